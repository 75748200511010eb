package workbook

import (
	"bytes"
	"errors"
	"fmt"
	"strings"

	"github.com/xuri/excelize/v2"
)

// Returned is a workbook that came back from the bench. Whatever is in it was
// typed or made by others.
type Returned struct {
	Origin Origin

	file   *excelize.File
	names  map[string]string // what workbook-wide names refer to
	sheets []*sheetCells
}

// Open reads a workbook that came back. Its parts are checked before anything
// is made of them; the error says in words what the file is if it is no
// workbook, or what is wrong with it.
func Open(file []byte) (r *Returned, err error) {
	if err := preflight(file); err != nil {
		return nil, err
	}
	defer rescue(&err)
	f, err := excelize.OpenReader(bytes.NewReader(file), excelize.Options{
		UnzipSizeLimit: largestWhole, UnzipXMLSizeLimit: largestWhole, RawCellValue: true,
	})
	if err != nil {
		if f != nil {
			f.Close()
		}
		return nil, fmt.Errorf("a damaged workbook (%s)", cut(clean(err.Error()), 80))
	}
	r = &Returned{file: f, names: map[string]string{}}
	for _, n := range f.GetDefinedName() {
		if n.Scope == "Workbook" {
			r.names[n.Name] = n.RefersTo
		}
	}
	for _, name := range f.GetSheetList() {
		s, err := readCells(f, name)
		if err != nil {
			f.Close()
			return nil, err
		}
		r.sheets = append(r.sheets, s)
	}
	r.Origin = r.origin()
	return r, nil
}

// rescue turns a panic of the library into an error: what a hostile file can
// do to it is not known to the end.
func rescue(err *error) {
	if recover() != nil {
		*err = errors.New("a damaged workbook: the program that reads it failed on it")
	}
}

// Close lets the file go.
func (r *Returned) Close() error { return r.file.Close() }

// sheet finds a sheet by its name, in any case.
func (r *Returned) sheet(name string) *sheetCells {
	for _, s := range r.sheets {
		if strings.EqualFold(s.name, name) {
			return s
		}
	}
	return nil
}

// sheetCells are the cells of one sheet that hold something.
type sheetCells struct {
	file       *excelize.File
	name       string
	rows, cols int
	cells      map[place]oneCell
}

// place is a row and a column, from 1.
type place struct{ row, col int }

func (p place) String() string { return at(p.col, p.row) }

// oneCell is what a cell holds: its value as the file has it, and its formula.
type oneCell struct {
	text    string
	formula string
	kind    excelize.CellType
}

func (c oneCell) empty() bool { return c.text == "" && c.formula == "" }

// number says whether the cell holds a number that was typed.
func (c oneCell) number() bool {
	return c.formula == "" && (c.kind == excelize.CellTypeUnset || c.kind == excelize.CellTypeNumber)
}

// shown is the cell as a finding repeats it.
func (c oneCell) shown() string {
	if c.formula != "" {
		return cut("="+clean(c.formula), longestShown)
	}
	return cut(clean(c.text), longestShown)
}

const longestShown = 160

func (s *sheetCells) at(row, col int) oneCell { return s.cells[place{row, col}] }

// readCells reads a sheet. A sheet of a chart has no cells.
func readCells(f *excelize.File, name string) (*sheetCells, error) {
	s := &sheetCells{file: f, name: name, cells: map[place]oneCell{}}
	rows, err := f.Rows(name)
	if err != nil {
		var noSheet excelize.ErrSheetNotExist
		if errors.As(err, &noSheet) {
			return nil, fmt.Errorf("the sheet %s is listed and not there", quoted(name))
		}
		return s, nil // a chart or a dialog
	}
	defer rows.Close()
	for row := 1; rows.Next(); row++ {
		texts, err := rows.Columns(excelize.Options{RawCellValue: true})
		if err != nil {
			return nil, fmt.Errorf("the sheet %s cannot be read in row %d", quoted(name), row)
		}
		for i, text := range texts {
			if err := s.take(place{row, i + 1}, text); err != nil {
				return nil, fmt.Errorf("the sheet %s cannot be read in cell %s", quoted(name), at(i+1, row))
			}
		}
	}
	return s, nil
}

// take keeps a cell if there is something in it.
func (s *sheetCells) take(p place, text string) error {
	formula, err := s.file.GetCellFormula(s.name, p.String())
	if err != nil {
		return err
	}
	if text == "" && formula == "" {
		return nil
	}
	kind, err := s.file.GetCellType(s.name, p.String())
	if err != nil {
		return err
	}
	s.cells[p] = oneCell{text, formula, kind}
	s.rows, s.cols = max(s.rows, p.row), max(s.cols, p.col)
	return nil
}

// style is how a cell is drawn; nil where the file does not say it.
func (s *sheetCells) style(p place) *excelize.Style {
	id, err := s.file.GetCellStyle(s.name, p.String())
	if err != nil {
		return nil
	}
	style, err := s.file.GetStyle(id)
	if err != nil {
		return nil
	}
	return style
}
