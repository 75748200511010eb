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
// first: "L1 value 71 %, C6 value 14 %".
func Contributors(o spread.OutputReport, most int) string {
	list := slices.Clone(o.Contributions)
	slices.SortStableFunc(list, func(a, b spread.Contribution) int { return cmp.Compare(b.Share, a.Share) })
	var words []string
	for _, c := range list {
		if len(words) < most && c.Share >= leastShare {
			words = append(words, fmt.Sprintf("%s %s %.0f %%", c.Ref, c.Parameter, 100*float64(c.Share)))
		}
	}
	return strings.Join(words, ", ")
}
