package document

import (
	"encoding/csv"
	"errors"
	"io"
	"slices"
	"strings"
	"unicode/utf8"
)

// Row is a line of a table. Cells are in the order of the header asked for,
// none nil; a cell that was not written, or is empty, is Null.
type Row struct {
	Line  int
	Cells []*Node
}

// ReadCSV reads a comma-separated table (RFC 4180; lines that begin with # are
// comments) whose first line names its columns, in any order. Every column of
// header must be there but for those also named in optional. Rows that do not
// fit are complained of and left out.
func ReadCSV(file string, text []byte, header []string, optional ...string) ([]Row, Complaints) {
	source, bad := clean(file, text)
	if bad != nil {
		return nil, Complaints{*bad}
	}
	t := table{file: file, lines: strings.Split(source, "\n"), header: header, optional: optional}
	t.reader = csv.NewReader(strings.NewReader(source))
	t.reader.FieldsPerRecord = -1
	t.reader.Comment = '#'
	if !t.names() {
		return nil, t.faults.List()
	}
	var rows []Row
	for {
		record, err := t.reader.Read()
		if err == io.EOF {
			return rows, t.faults.List()
		}
		if err != nil {
			t.broken(err)
			return rows, t.faults.List()
		}
		if row, ok := t.row(record); ok {
			rows = append(rows, row)
		}
	}
}

// table is a CSV file being read.
type table struct {
	file             string
	lines            []string
	header, optional []string
	reader           *csv.Reader
	columns          []int // of the file, for each of header; -1: not there
	width            int
	faults           Faults
}

// cell makes the node of field i of the record just read.
func (t *table) cell(record []string, i int) *Node {
	line, byteColumn := t.reader.FieldPos(i)
	column := byteColumn
	if line-1 < len(t.lines) && byteColumn-1 <= len(t.lines[line-1]) {
		column = utf8.RuneCountInString(t.lines[line-1][:byteColumn-1]) + 1
	}
	n := &Node{Value: strings.TrimSpace(record[i]), File: t.file, Line: line, Column: column}
	if n.Value == "" {
		n.Kind = Null
	}
	return n
}

// names reads the first line.
func (t *table) names() bool {
	record, err := t.reader.Read()
	start := &Node{File: t.file, Line: 1, Column: 1}
	if err == io.EOF {
		t.faults.Add(start, "an empty table", "a first line "+strings.Join(t.header, ","))
		return false
	}
	if err != nil {
		t.broken(err)
		return false
	}
	t.width = len(record)
	t.columns = make([]int, len(t.header))
	for i := range t.columns {
		t.columns[i] = -1
	}
	for i := range record {
		t.name(t.cell(record, i), i)
	}
	if len(record) == 1 && strings.ContainsAny(record[0], ";\t") {
		t.faults = Faults{}
		t.faults.Add(t.cell(record, 0), "columns that no comma separates", "commas, and a dot as the decimal mark")
		return false
	}
	for i, name := range t.header {
		if t.columns[i] < 0 && !slices.Contains(t.optional, name) {
			t.faults.AddAt(start, 0, Complaint{Message: "the column " + name + " is missing", Expected: "a first line " + strings.Join(t.header, ",")})
		}
	}
	return len(t.faults.found) == 0
}

// name takes one heading.
func (t *table) name(n *Node, column int) {
	i := slices.Index(t.header, n.Value)
	switch {
	case i < 0:
		t.faults.Add(n, "unknown column", "one of "+strings.Join(t.header, ", "), t.header...)
	case t.columns[i] >= 0:
		t.faults.Add(n, "a column that is already there", "each column once")
	default:
		t.columns[i] = column
	}
}

// row sorts the fields of a record into the columns asked for.
func (t *table) row(record []string) (Row, bool) {
	first := t.cell(record, 0)
	if len(record) > t.width {
		t.faults.Add(t.cell(record, t.width), "more cells than columns", "a comma only between cells, a dot as the decimal mark")
		return Row{}, false
	}
	row := Row{Line: first.Line, Cells: make([]*Node, len(t.header))}
	for i, column := range t.columns {
		if column >= 0 && column < len(record) {
			row.Cells[i] = t.cell(record, column)
			continue
		}
		row.Cells[i] = &Node{Kind: Null, File: t.file, Line: first.Line, Column: first.Column}
		if column >= 0 && !slices.Contains(t.optional, t.header[i]) {
			t.faults.AddAt(first, 0, Complaint{Message: "the row ends before the column " + t.header[i]})
			return Row{}, false
		}
	}
	return row, true
}

// broken turns an error of the CSV reader into a complaint.
func (t *table) broken(err error) {
	c := Complaint{File: t.file, Message: "not a valid table: " + err.Error()}
	var p *csv.ParseError
	if errors.As(err, &p) {
		c.Line, c.Column = p.Line, p.Column
		if p.Line-1 < len(t.lines) && p.Column-1 <= len(t.lines[p.Line-1]) {
			c.Column = utf8.RuneCountInString(t.lines[p.Line-1][:p.Column-1]) + 1
		}
		c.Message = "not a valid table: " + p.Err.Error()
	}
	t.faults.AddAll(Complaints{c})
}
