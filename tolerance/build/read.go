package build

import (
	"path/filepath"
	"regexp"

	"batchwright/bom/document"
	"batchwright/bom/offer"
	"batchwright/bom/part"
)

// MaxUnits is the largest batch: what one test sheet holds.
const MaxUnits = 200

// An Opener reads a file that a build file names.
type Opener func(path string) ([]byte, error)

// reader gathers the build and every fault found on the way.
type reader struct {
	document.Faults
	build  *Build
	root   *document.Node
	stages []stageNode
	refs   map[string]*document.Node // references already given to a part
	broken map[string]bool           // stages and trims complained of: what names them is spared
}

// topKeys are the keys of a build file.
var topKeys = []string{"build", "units", "spares", "price_book", "families", "instruments",
	"conditions", "stages", "trims", "targets"}

var identifier = regexp.MustCompile(`^[A-Za-z][A-Za-z0-9_]*$`)

// Read reads a build file. Files it names are opened beside it. The error is a
// document.Complaints with every fault of every file, or the error of a file
// that could not be opened.
func Read(file string, text []byte, open Opener) (*Build, error) {
	root, faults := document.Parse(file, text)
	if len(faults) > 0 {
		return nil, faults
	}
	r := &reader{
		root:   root,
		build:  &Build{File: file},
		refs:   map[string]*document.Node{},
		broken: map[string]bool{},
	}
	if err := r.readAll(open); err != nil {
		return nil, err
	}
	if list := r.List(); len(list) > 0 {
		return nil, list
	}
	return r.build, nil
}

// readAll reads the parts of the file in the order in which they are needed.
func (r *reader) readAll(open Opener) error {
	if !r.Keys(r.root, topKeys...) && r.root.Kind != document.Mapping {
		return nil
	}
	r.readHead()
	if err := r.readFamilies(open); err != nil {
		return err
	}
	if err := r.readBook(open); err != nil {
		return err
	}
	r.readInstruments(r.root.Get("instruments"))
	r.readConditions(r.Need(r.root, "conditions", "at least one condition, the first being the reference"))
	r.readStages(r.Need(r.root, "stages", "the stages in signal order"))
	r.readTrims(r.root.Get("trims"))
	r.readTargets(r.root.Get("targets"))
	return nil
}

// readHead reads the title and the size of the batch.
func (r *reader) readHead() {
	if n := r.Need(r.root, "build", "a title"); n != nil {
		if n.Kind != document.Scalar || n.Value == "" {
			r.Add(n, "title", "a line of text")
		}
		r.build.Title = n.Value
	}
	if n := r.Need(r.root, "units", "how many are built"); n != nil {
		r.build.Units, _ = r.Whole(n, 1, MaxUnits)
	}
	r.build.Spares = DefaultSpares
	if n := r.root.Get("spares"); n != nil {
		if q, ok := r.Quantity(n, percent); ok {
			r.build.Spares = r.wholePercent(n, q.Value)
		}
	}
}

// DefaultSpares is the percentage of spare pieces bought unless the file says
// otherwise (common practice, no source).
const DefaultSpares = 5

// wholePercent turns a fraction into whole percent from 0 to 100.
func (r *reader) wholePercent(n *document.Node, fraction float64) int {
	for p := 0; p <= 100; p++ {
		if d := fraction*100 - float64(p); d > -1e-9 && d < 1e-9 {
			return p
		}
	}
	r.Add(n, "spares", "a whole percentage from 0 % to 100 %")
	return 0
}

// readFamilies loads the embedded families and the user's over them.
func (r *reader) readFamilies(open Opener) error {
	r.build.Families = part.Embedded()
	n := r.root.Get("families")
	if n == nil {
		return nil
	}
	path, text, err := r.beside(n, open)
	if err != nil || path == "" {
		return err
	}
	root, faults := document.Parse(path, text)
	r.AddAll(faults)
	if len(faults) == 0 {
		r.build.Families.Read(root, &r.Faults)
	}
	return nil
}

// readBook loads the user's price book, or the embedded demonstration book.
func (r *reader) readBook(open Opener) error {
	n := r.root.Get("price_book")
	if n == nil {
		r.build.Book = offer.Embedded()
		return nil
	}
	path, text, err := r.beside(n, open)
	if err != nil || path == "" {
		return err
	}
	book, faults := offer.Read(path, text, r.build.Families)
	r.AddAll(faults)
	r.build.Book = book
	return nil
}

// beside opens a file named in the build file, relative to it.
func (r *reader) beside(n *document.Node, open Opener) (path string, text []byte, err error) {
	if n.Kind != document.Scalar || n.Value == "" {
		r.Add(n, "file name", "the name of a file, relative to this one")
		return "", nil, nil
	}
	path = n.Value
	if !filepath.IsAbs(path) {
		path = filepath.Join(filepath.Dir(r.build.File), path)
	}
	text, err = open(path)
	return path, text, err
}
