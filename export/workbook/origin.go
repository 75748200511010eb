package workbook

import (
	"fmt"
	"slices"
	"strings"
)

// Origin is what a workbook says of the plan it was written from: its three
// carriers of the digest, and the options of that run. All of it is text from a
// file that anyone could have written.
type Origin struct {
	Digest   string `json:"digest"` // "" where the carriers are gone or do not agree
	Version  string `json:"version"`
	Seed     string `json:"seed"`
	Units    string `json:"units"`
	Simulate string `json:"simulate"`
	File     string `json:"file"`

	sheets  []string // that the plan had only because it was asked for them
	found   []string // the digests of the carriers that are there
	missing []string // the carriers that are not
}

// origin reads the carriers.
func (r *Returned) origin() Origin {
	var o Origin
	take := func(carrier, digest string) {
		if digest == "" {
			o.missing = append(o.missing, carrier)
		} else {
			o.found = append(o.found, digest)
		}
	}
	take("the custom property plan.digest", r.property("plan.digest"))
	take("the name plan_digest", strings.Trim(r.names["plan_digest"], `="`))
	facts := map[string]string{}
	if s := r.sheet(carrierSheet); s != nil {
		for row := 1; row <= min(s.rows, 50); row++ {
			facts[s.at(row, 1).text] = cut(clean(s.at(row, 2).text), 200)
		}
	}
	take("the hidden sheet "+carrierSheet, facts["digest"])
	o.Version, o.Seed, o.Units, o.Simulate, o.File = facts["version"], facts["seed"], facts["units"], facts["simulate"], facts["file"]
	o.sheets = strings.Split(facts["sheets"], ", ")
	slices.Sort(o.found)
	if o.found = slices.Compact(o.found); len(o.found) == 1 {
		o.Digest = o.found[0]
	}
	return o
}

// property is a custom property's text.
func (r *Returned) property(name string) string {
	properties, err := r.file.GetCustomProps()
	if err != nil {
		return ""
	}
	for _, p := range properties {
		if text, ok := p.Value.(string); ok && p.Name == name {
			return cut(clean(text), 200)
		}
	}
	return ""
}

// Foreign says why the workbook is not that of the plan with this digest, with
// both digests; "" where it is.
func (o Origin) Foreign(digest string) string {
	switch {
	case len(o.found) == 0:
		return fmt.Sprintf("the workbook does not say which plan it was written from; this plan is %s", shortDigest(digest))
	case len(o.found) > 1:
		var all []string
		for _, d := range o.found {
			all = append(all, shortDigest(d))
		}
		return fmt.Sprintf("the workbook says of itself that it is of the plans %s; this plan is %s", strings.Join(all, " and "), shortDigest(digest))
	case o.Digest != digest:
		return fmt.Sprintf("the workbook is of plan %s; this plan is %s", shortDigest(o.Digest), shortDigest(digest))
	}
	return ""
}

// shortDigest is a digest as people compare it by eye.
func shortDigest(digest string) string { return Plan{Digest: digest}.short() }
