package plan

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"batchwright/tolerance/spread"
)

// leastShare is the share of the variance below which nobody looks at a part.
const leastShare = 0.05

// Contributors says what an output's scatter comes from, the largest share
// first: "L1 71 %, C6 temperature 14 %".
func Contributors(o spread.OutputReport, most int) string {
	list := slices.Clone(o.Contributions)
	slices.SortStableFunc(list, func(a, b spread.Contribution) int { return cmp.Compare(b.Share, a.Share) })
	var words []string
	for _, c := range list {
		if len(words) < most && c.Share >= leastShare {
			words = append(words, fmt.Sprintf("%s %.0f %%", source(c), 100*float64(c.Share)))
		}
	}
	return strings.Join(words, ", ")
}

// source names a parameter; of a part's value the reference says enough.
func source(c spread.Contribution) string {
	if c.Parameter == "value" {
		return c.Ref
	}
	return c.Ref + " " + c.Parameter
}
