package part

import (
	"slices"
	"strings"
	"sync"

	"batchwright/bom/document"
	"batchwright/data"
)

// Catalogue is the families a build can place parts from.
type Catalogue struct {
	families map[string]*Family
	names    []string // in the order read; what a file adds follows
}

// Embedded is the catalogue that batchwright carries with it. Each call gives
// one of its own, to which a file may add.
func Embedded() *Catalogue {
	c := embedded()
	own := &Catalogue{families: make(map[string]*Family, len(c.families)), names: slices.Clone(c.names)}
	for name, f := range c.families {
		own.families[name] = f
	}
	return own
}

// embedded reads the embedded table once. Families are never changed after
// they are read, so catalogues share them.
var embedded = sync.OnceValue(func() *Catalogue {
	c, complaints := read("families.yaml", data.Families)
	if len(complaints) > 0 {
		panic("part: embedded families: " + complaints.Error())
	}
	return c
})

// read reads a family file into an empty catalogue.
func read(file string, text []byte) (*Catalogue, document.Complaints) {
	n, complaints := document.Parse(file, text)
	if len(complaints) > 0 {
		return nil, complaints
	}
	c := &Catalogue{families: make(map[string]*Family)}
	var f document.Faults
	c.Read(n, &f)
	return c, f.List()
}

// Family finds a family by name.
func (c *Catalogue) Family(name string) (*Family, bool) {
	f, ok := c.families[name]
	return f, ok
}

// Names lists the families, the embedded ones first, each in its file's order.
func (c *Catalogue) Names() []string { return slices.Clone(c.names) }

// OfType lists the names of the families whose parts are of type t.
func (c *Catalogue) OfType(t Type) []string {
	var names []string
	for _, name := range c.names {
		if c.families[name].Type == t {
			names = append(names, name)
		}
	}
	return names
}

// add puts a family in, in place of one of the same name.
func (c *Catalogue) add(f *Family) {
	if _, known := c.families[f.Name]; !known {
		c.names = append(c.names, f.Name)
	}
	c.families[f.Name] = f
}

// Read reads a family file's root, {families: {name: …}}, into the catalogue.
// An entry that says `part` stands alone, in place of one of the same name; one
// that does not amends the family of that name. Faults go to f, all of them.
func (c *Catalogue) Read(n *document.Node, f *document.Faults) {
	if !f.Keys(n, "families") {
		return
	}
	list := f.Need(n, "families", "a mapping of family names")
	if !f.Mapping(list) {
		return
	}
	for _, pair := range list.Pairs {
		if family, ok := c.readFamily(pair, f); ok {
			c.add(family)
		}
	}
}

// readFamily reads one entry.
func (c *Catalogue) readFamily(pair document.Pair, f *document.Faults) (*Family, bool) {
	name := pair.Key.Value
	if name == "" || strings.ContainsAny(name, " \t,") {
		f.Add(pair.Key, "not a family name", "a word without spaces and commas, such as metal-film-50")
		return nil, false
	}
	if !f.Keys(pair.Value, familyKeys...) {
		return nil, false
	}
	family := &Family{Name: name, Title: name}
	known, amends := c.families[name]
	switch given := pair.Value.Get("part"); {
	case given != nil:
		word, ok := f.Word(given, "a part type", typeWords()...)
		if !ok {
			return nil, false
		}
		family.Type = Type(word)
	case amends:
		family = known.clone()
	default:
		f.Add(pair.Key, "new family without `part`", "part: with one of "+strings.Join(typeWords(), ", ")+
			"; or the name of a family to amend", c.names...)
		return nil, false
	}
	r := reader{family: family, node: pair.Value, faults: f}
	return family, r.read()
}

// clone copies a family deeply enough to amend it.
func (f *Family) clone() *Family {
	g := *f
	g.Grades = slices.Clone(f.Grades)
	g.Parameters = slices.Clone(f.Parameters)
	return &g
}

// typeWords lists the types as words.
func typeWords() []string {
	words := make([]string, len(anatomies))
	for i, a := range anatomies {
		words[i] = string(a.part)
	}
	return words
}
