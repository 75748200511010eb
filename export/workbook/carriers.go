package workbook

import (
	"fmt"
	"strings"

	"github.com/xuri/excelize/v2"
)

// carriers binds the file to its plan in three places, all of which survive
// another program's saving: a custom property, a defined name and a sheet that
// is never shown. Whoever reads the file back compares them.
func (b *book) carriers() {
	digest := cut(clean(b.plan.Digest), 200)
	b.keep(b.file.SetCustomProps(excelize.CustomProperty{Name: "plan.digest", Value: digest}))
	b.keep(b.file.SetDefinedName(&excelize.DefinedName{Name: "plan_digest", RefersTo: `"` + strings.ReplaceAll(digest, `"`, `""`) + `"`}))
	for i, pair := range [][2]string{
		{"digest", digest}, {"version", clean(b.plan.Version)}, {"seed", fmt.Sprint(b.plan.Seed)}, {"units", fmt.Sprint(b.plan.Units)},
		{"simulate", fmt.Sprint(b.plan.Simulate)}, {"file", clean(b.plan.File)}, {"sheets", strings.Join(b.plan.optional(), ", ")},
	} {
		b.keep(b.file.SetCellStr(carrierSheet, at(1, i+1), pair[0]))
		b.keep(b.file.SetCellStr(carrierSheet, at(2, i+1), pair[1]))
	}
}
