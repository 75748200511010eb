package cli_test

import (
	"fmt"
	"os"
	"strconv"
	"strings"

	"github.com/rogpeppe/go-internal/testscript"
	"github.com/xuri/excelize/v2"
)

// typed writes into a workbook as a person would: `typed FROM TO CELL=TEXT…`,
// where CELL is POINT/UNIT of the test sheet or SHEET!A1, and TEXT a figure
// where it is one. `+SHEET!3` inserts a row above row 3.
func typed(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: typed from.xlsx to.xlsx cell=text...")
	}
	f, err := excelize.OpenFile(ts.MkAbs(args[0]))
	ts.Check(err)
	defer f.Close()
	for _, word := range args[2:] {
		if place, found := strings.CutPrefix(word, "+"); found {
			sheet, row, _ := strings.Cut(place, "!")
			n, err := strconv.Atoi(row)
			ts.Check(err)
			ts.Check(f.InsertRows(sheet, n, 1))
			continue
		}
		where, text, _ := strings.Cut(word, "=")
		sheet, cell, found := strings.Cut(where, "!")
		if !found {
			sheet, cell, err = cellOf(f, where)
			ts.Check(err)
		}
		var v any = text
		if figure, err := strconv.ParseFloat(text, 64); err == nil {
			v = figure
		}
		ts.Check(f.SetCellValue(sheet, cell, v))
	}
	ts.Check(f.SaveAs(ts.MkAbs(args[1])))
}

// cellOf finds POINT/UNIT by the names that the workbook carries.
func cellOf(f *excelize.File, where string) (sheet, cell string, err error) {
	point, unit, _ := strings.Cut(where, "/")
	u, err := strconv.Atoi(unit)
	if err != nil {
		return "", "", err
	}
	areas := map[string][]int{}
	for _, n := range f.GetDefinedName() {
		s, area, found := strings.Cut(n.RefersTo, "!")
		if !found || n.Name != "plan_points" && n.Name != "plan_readings" {
			continue
		}
		sheet = strings.Trim(s, "'")
		from, _, _ := strings.Cut(strings.ReplaceAll(area, "$", ""), ":")
		col, row, err := excelize.CellNameToCoordinates(from)
		if err != nil {
			return "", "", err
		}
		areas[n.Name] = []int{col, row}
	}
	for row := areas["plan_points"][1]; row < 500; row++ {
		at, _ := excelize.CoordinatesToCellName(areas["plan_points"][0], row)
		name, err := f.GetCellValue(sheet, at)
		if err != nil {
			return "", "", err
		}
		if name == point {
			cell, err := excelize.CoordinatesToCellName(areas["plan_readings"][0]+u-1, row)
			return sheet, cell, err
		}
	}
	return "", "", fmt.Errorf("no row %s", point)
}

// half keeps the first half of a file: `half FROM TO`.
func half(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 2 {
		ts.Fatalf("usage: half from to")
	}
	text := ts.ReadFile(args[0])
	ts.Check(os.WriteFile(ts.MkAbs(args[1]), []byte(text[:len(text)/2]), 0o644))
}
