package document

import (
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// printed writes rows as "line: value@line:column ...".
func printed(rows []Row) string {
	var b strings.Builder
	for _, r := range rows {
		fmt.Fprintf(&b, "%d:", r.Line)
		for _, c := range r.Cells {
			fmt.Fprintf(&b, " %s", outline(c))
		}
		b.WriteString("\n")
	}
	return b.String()
}

// The places are counted by hand.
func TestReadCSV(t *testing.T) {
	header := []string{"point", "unit", "reading", "note"}
	for _, c := range []struct{ reason, text, want string }{
		{"plain", "point,unit,reading,note\nmixer.collector,7,-0.12 V,x\n", "2: 2:1'mixer.collector' 2:17'7' 2:19'-0.12 V' 2:27'x'\n"},
		{"another order", "reading,note,point,unit\n1 V,x,a,7\n", "2: 2:7'a' 2:9'7' 2:1'1 V' 2:5'x'\n"},
		{"an optional column left out", "point,unit,reading\na,7,1 V\n", "2: 2:1'a' 2:3'7' 2:5'1 V' 2:1~\n"},
		{"an optional cell left out", "point,unit,reading,note\na,7,1 V\n", "2: 2:1'a' 2:3'7' 2:5'1 V' 2:1~\n"},
		{"empty cells", "point,unit,reading,note\na,,1 V,\n", "2: 2:1'a' 2:3~ 2:4'1 V' 2:8~\n"},
		{"quoted cells", "point,unit,reading,note\n\"a,b\",7,\"1 V\",\"say \"\"x\"\"\"\n", "2: 2:1'a,b' 2:7'7' 2:9'1 V' 2:15'say \"x\"'\n"},
		{"columns in characters", "point,unit,reading,note\nµΩ,7,é,x\n", "2: 2:1'µΩ' 2:4'7' 2:6'é' 2:8'x'\n"},
		{"comments and blank lines", "# readings\npoint,unit,reading,note\n\n# more\na,7,1 V,x\n", "5: 5:1'a' 5:3'7' 5:5'1 V' 5:9'x'\n"},
		{"carriage returns", "point,unit,reading,note\r\na,7,1 V,x\r\n", "2: 2:1'a' 2:3'7' 2:5'1 V' 2:9'x'\n"},
		{"byte order mark", "\uFEFFpoint,unit,reading,note\na,7,1 V,x\n", "2: 2:1'a' 2:3'7' 2:5'1 V' 2:9'x'\n"},
		{"blanks around", "point , unit,reading,note\n a , 7,1 V,x\n", "2: 2:1'a' 2:5'7' 2:8'1 V' 2:12'x'\n"},
		{"no rows", "point,unit,reading,note\n", ""},
		{"no line end", "point,unit,reading,note\na,7,1 V,x", "2: 2:1'a' 2:3'7' 2:5'1 V' 2:9'x'\n"},
	} {
		t.Run(c.reason, func(t *testing.T) {
			rows, complaints := ReadCSV("r.csv", []byte(c.text), header, "note")
			if complaints != nil {
				t.Fatal(complaints.Error())
			}
			if diff := cmp.Diff(c.want, printed(rows)); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestReadCSVComplaints(t *testing.T) {
	header := []string{"point", "unit", "reading", "note"}
	for _, c := range []struct {
		reason, text, want string
		rows               int
	}{
		{"an empty file", "", "r.csv:1:1: an empty table: expected a first line point,unit,reading,note", 0},
		{"a missing column", "point,reading\na,1 V\n", "r.csv:1:1: the column unit is missing: expected a first line point,unit,reading,note", 0},
		{"a misspelt column", "point,unit,raeding\n", "r.csv:1:1: the column reading is missing: expected a first line point,unit,reading,note\n" +
			`r.csv:1:12: unknown column: found "raeding", expected one of point, unit, reading, note; nearest: reading`, 0},
		{"a column twice", "point,unit,reading,unit\n", `r.csv:1:20: a column that is already there: found "unit", expected each column once`, 0},
		{"semicolons", "point;unit;reading\na;7;1 V\n", `r.csv:1:1: columns that no comma separates: found "point;unit;reading", expected commas, and a dot as the decimal mark`, 0},
		{"a comma in a number", "point,unit,reading\na,7,1,2 V\nb,7,1 V\n", `r.csv:2:7: more cells than columns: found "2 V", expected a comma only between cells, a dot as the decimal mark`, 1},
		{"a short row", "point,unit,reading\na,7\nb,7,1 V\n", "r.csv:2:1: the row ends before the column reading", 1},
		{"a quote inside a cell", "point,unit,reading\nµa,7,1\"V\n", `r.csv:2:7: not a valid table: bare " in non-quoted-field`, 0},
		{"a quote not closed", "point,unit,reading\na,7,\"1 V\n", `r.csv:2:10: not a valid table: extraneous or missing " in quoted-field`, 0},
		{"no UTF-8", "point,unit,reading\na,7,\xff\n", "r.csv:2:5: not valid UTF-8: expected a file saved as UTF-8", 0},
		{"NUL", "point,unit\x00", `r.csv:1:11: a control character: found "\x00", expected printable text`, 0},
		{"50 MB", strings.Repeat("a,b\n", 12<<20), "r.csv: the file is too large: expected at most 1 MiB of text", 0},
	} {
		t.Run(c.reason, func(t *testing.T) {
			rows, complaints := ReadCSV("r.csv", []byte(c.text), header, "note")
			if diff := cmp.Diff(c.want, complaints.Error()); diff != "" {
				t.Error(diff)
			}
			if len(rows) != c.rows {
				t.Errorf("%d rows, want %d", len(rows), c.rows)
			}
		})
	}
}

func FuzzReadCSV(f *testing.F) {
	for _, seed := range []string{"a,b\n1,2\n", "b,a\n\"x\ny\",2\n", "a;b\n", "a,b\n\"", "a\n\n#\n1,2", "\uFEFFa,b\r\n1,\r\n", "a,b,c\n", "a,a\n"} {
		f.Add([]byte(seed))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		rows, complaints := ReadCSV("f", text, []string{"a", "b"}, "b")
		for _, r := range rows {
			if len(r.Cells) != 2 {
				t.Fatalf("%d cells", len(r.Cells))
			}
			for _, c := range r.Cells {
				if c == nil || c.Line < 1 || c.Column < 1 || (c.Kind == Null) != (c.Value == "") {
					t.Fatalf("%+v", c)
				}
			}
		}
		for _, c := range complaints {
			if c.File != "f" || c.Message == "" {
				t.Errorf("%#v", c)
			}
		}
	})
}
