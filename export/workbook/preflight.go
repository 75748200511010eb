package workbook

import (
	"archive/zip"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"
)

// What a returned workbook may be at most, its file LargestFile bytes. A plan of 200 units fills a tenth of
// it; a file that asks for more was made to do harm, or is another's.
const (
	LargestFile  = 16 << 20
	largestWhole = 64 << 20 // unpacked
	mostParts    = 1000
	mostSheetRow = 40_000 // cards of 200 units
	mostSheetCol = 500
	mostCells    = 500_000   // rows times the last column of each, over all sheets
	mostElements = 2_000_000 // of XML
	mostMerges   = 8000
	mostNames    = 2000
	deepest      = 100     // XML elements in each other
	longestTag   = 1 << 20 // bytes between two < of an XML part
)

// preflight reads a file that came back to its end, before the library that
// opens workbooks sees it: that one takes damaged parts for empty ones and a
// small file that unpacks to gigabytes for a large one. The error says in words
// what is wrong.
func preflight(file []byte) error {
	if len(file) > LargestFile {
		return fmt.Errorf("the file has %d MiB; a filled workbook has at most %d", len(file)>>20, LargestFile>>20)
	}
	if err := sniff(file); err != nil {
		return err
	}
	z, err := archive(file)
	if err != nil {
		return err
	}
	f := flight{left: largestWhole, elements: mostElements, cells: mostCells, merges: mostMerges, names: mostNames, lastText: -1}
	for _, part := range z.File {
		if err := f.part(part); err != nil {
			return fmt.Errorf("the part %s: %w", quoted(part.Name), err)
		}
	}
	if f.sheets == 0 {
		return errors.New("a workbook without a sheet in it")
	}
	if f.lastText >= f.texts {
		return fmt.Errorf("a cell shows text number %d, and the workbook holds %d", f.lastText+1, f.texts)
	}
	return nil
}

// flight counts what is left of each budget.
type flight struct {
	left                 int64
	elements             int
	cells, merges, names int
	sheets, texts        int
	lastText             int // the highest text a cell refers to, −1 for none
}

var errTooMuch = errors.New("it unpacks to more than a filled workbook can hold")

// part reads one part to its end, which checks its sum.
func (f *flight) part(part *zip.File) error {
	in, err := part.Open()
	if err != nil {
		return errors.New("it is packed in a way that cannot be read")
	}
	defer in.Close()
	r := &budget{in: in, left: &f.left, xml: isXML(part.Name)}
	if !r.xml {
		_, err = io.Copy(io.Discard, r)
	} else if err = f.walk(r); err == nil || looseXML(part.Name) && !errors.Is(err, errTooMuch) && !bounded(err) {
		_, err = io.Copy(io.Discard, r)
	}
	return inWords(err)
}

// isXML goes by the name but for pictures and printer settings, which no
// relation can make a sheet of: their names end otherwise.
func isXML(name string) bool {
	name = strings.ToLower(name)
	for _, end := range []string{".png", ".jpg", ".jpeg", ".gif", ".emf", ".wmf", ".bin"} {
		if strings.HasSuffix(name, end) {
			return false
		}
	}
	return !strings.HasSuffix(name, "/")
}

// looseXML are the drawings of comments, which are written without closing
// every element.
func looseXML(name string) bool { return strings.HasSuffix(strings.ToLower(name), ".vml") }

// inWords turns the errors of zip and xml into ours.
func inWords(err error) error {
	var syntax *xml.SyntaxError
	switch {
	case err == nil:
		return nil
	case errors.Is(err, zip.ErrChecksum):
		return errors.New("its sum does not agree: the file is damaged")
	case errors.Is(err, io.ErrUnexpectedEOF):
		return errors.New("it is cut short")
	case errors.As(err, &syntax):
		return fmt.Errorf("it is damaged in line %d (%s)", syntax.Line, cut(clean(syntax.Msg), 80))
	case errors.Is(err, errTooMuch), bounded(err):
		return err
	}
	return fmt.Errorf("it is damaged (%s)", cut(clean(err.Error()), 80))
}

// bound is a limit that a file exceeds.
type bound struct{ text string }

func (b bound) Error() string { return b.text }

func bounded(err error) bool {
	var b bound
	return errors.As(err, &b)
}

func beyond(format string, args ...any) error { return bound{fmt.Sprintf(format, args...)} }

// budget reads no more than is left over all parts; of XML no stretch without a
// < that is longer than any tag or text of ours: the parser holds such a
// stretch, and many times more for its attributes.
type budget struct {
	in      io.Reader
	left    *int64
	xml     bool
	stretch int
}

func (b *budget) Read(p []byte) (int, error) {
	n, err := b.in.Read(p)
	if *b.left -= int64(n); *b.left < 0 {
		return 0, errTooMuch
	}
	for _, c := range p[:n] {
		if b.stretch++; c == '<' {
			b.stretch = 0
		}
	}
	if b.xml && b.stretch > longestTag {
		return 0, beyond("a stretch of %d KiB that is neither cell nor row", b.stretch>>10)
	}
	return n, err
}

// walk goes through an XML part and bounds what it would become.
func (f *flight) walk(r io.Reader) error {
	d := xml.NewDecoder(r)
	s := sheetWalk{flight: f}
	depth := 0
	for {
		token, err := d.Token()
		if err == io.EOF {
			return s.end()
		}
		if err != nil {
			return err
		}
		switch t := token.(type) {
		case xml.StartElement:
			if depth++; depth > deepest {
				return beyond("elements %d deep", depth)
			}
			if err := s.start(t); err != nil {
				return err
			}
		case xml.EndElement:
			depth--
			s.inText = false
		case xml.CharData:
			if s.inText {
				s.text += string(t)
			}
		case xml.Directive:
			return beyond("a document type, which no workbook has")
		}
	}
}

// sheetWalk follows rows and cells through a sheet.
type sheetWalk struct {
	*flight
	row, col, last int
	shared, inText bool
	text           string
}

// start counts what begins. Other parts than sheets have elements of the same
// names now and then, within the same limits.
func (s *sheetWalk) start(t xml.StartElement) error {
	if s.elements--; s.elements < 0 {
		return errTooMuch
	}
	switch t.Name.Local {
	case "worksheet":
		s.sheets++
	case "si":
		s.texts++
	case "mergeCell":
		if s.merges--; s.merges < 0 {
			return beyond("more than %d merged areas", mostMerges)
		}
	case "definedName":
		if s.names--; s.names < 0 {
			return beyond("more than %d names", mostNames)
		}
	case "row":
		return s.startRow(attribute(t, "r"))
	case "c":
		return s.startCell(attribute(t, "r"), attribute(t, "t"))
	case "v":
		s.inText, s.text = s.shared, ""
	}
	return nil
}

func attribute(t xml.StartElement, name string) string {
	for _, a := range t.Attr {
		if a.Name.Local == name && a.Name.Space == "" {
			return a.Value
		}
	}
	return ""
}

func (s *sheetWalk) startRow(r string) error {
	if err := s.end(); err != nil {
		return err
	}
	row := s.row + 1
	if r != "" {
		var err error
		if row, err = strconv.Atoi(r); err != nil || row <= s.row {
			return beyond("row %s after row %d", quoted(r), s.row)
		}
	}
	if row > mostSheetRow {
		return beyond("row %d; a plan has at most %d", row, mostSheetRow)
	}
	s.row, s.col, s.last = row, 0, 0
	return nil
}

func (s *sheetWalk) startCell(r, kind string) error {
	if err := s.took(); err != nil {
		return err
	}
	s.shared = kind == "s"
	if s.row == 0 {
		return nil // no sheet: some other part's c
	}
	col := s.col + 1
	if r != "" {
		c, row, err := excelize.CellNameToCoordinates(r)
		if err != nil || row != s.row || c <= s.col {
			return beyond("cell %s in row %d after column %d", quoted(r), s.row, s.col)
		}
		col = c
	}
	if col > mostSheetCol {
		return beyond("column %d; a plan has at most %d", col, mostSheetCol)
	}
	s.col, s.last = col, col
	return nil
}

// took ends a cell: one of shared text must refer to a text.
func (s *sheetWalk) took() error {
	if s.shared && s.text != "" {
		n, err := strconv.Atoi(strings.TrimSpace(s.text))
		if err != nil || n < 0 {
			return beyond("a cell shows text number %s", quoted(s.text))
		}
		s.lastText = max(s.lastText, n)
	}
	s.shared, s.inText, s.text = false, false, ""
	return nil
}

// end ends a row, or the part.
func (s *sheetWalk) end() error {
	if err := s.took(); err != nil {
		return err
	}
	// Every row costs its cells up to its last one, whether they are there or not.
	if s.cells -= s.last + 1; s.cells < 0 {
		return beyond("more than %d cells", mostCells)
	}
	return nil
}
