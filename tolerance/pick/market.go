package pick

import (
	"fmt"
	"maps"
	"slices"

	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/tolerance/build"
)

// market is what may fill each opening, and what it costs: the search's money
// is the order's, to the last digit.
type market struct {
	build    *build.Build
	fittings [][]build.Fitting // of each opening: those whose pieces are all on sale
	buys     [][][]purchase    // [opening][fitting]: its buying lines
	lines    map[string]line   // that may be bought, by key
	fixed    map[string]int    // parts that are not open, by key
	rest     int64             // the money for those
	prices   map[lineCount]price
	takes    []map[string]map[int]bool // of each opening: how many of a line's pieces it may take
	crowded  bool                      // some lines of different keys draw on one stock
}

// purchase is how many pieces of a buying line one unit takes.
type purchase struct {
	key   string
	count int
}

// line is a buying line.
type line struct {
	part  part.Part
	shelf string // what the price book knows it by: lines on one shelf share its stock
}

// lineCount is a buying line and how many of its pieces a unit takes.
type lineCount struct {
	key   string
	count int
}

// price is what so many pieces cost; not ok where the book has not as many.
type price struct {
	money int64
	ok    bool
}

// newMarket lists what may fill each opening and is offered.
func newMarket(b *build.Build) (*market, error) {
	m := &market{build: b, lines: map[string]line{}, fixed: map[string]int{}, prices: map[lineCount]price{}}
	fixed := m.fixedParts()
	for _, p := range fixed {
		m.fixed[m.know(p)]++
	}
	m.rest = int64(m.order(fixed).Total)
	for _, o := range b.Openings {
		all := b.Fittings(o)
		if len(all) == 0 {
			return nil, fmt.Errorf("pick: nothing can fill %s", o.Positions[0])
		}
		var sold []build.Fitting
		var buys [][]purchase
		takes := map[string]map[int]bool{}
		for _, f := range all {
			if list := m.purchases(f, len(o.Positions)); m.offered(list) {
				sold, buys = append(sold, f), append(buys, list)
				note(takes, list)
			}
		}
		m.fittings, m.buys, m.takes = append(m.fittings, sold), append(m.buys, buys), append(m.takes, takes)
	}
	m.crowded = m.shareShelves()
	return m, nil
}

// know notes a part's buying line and gives its key.
func (m *market) know(p part.Part) string {
	key := order.Key(p)
	if _, known := m.lines[key]; !known {
		m.lines[key] = line{p, order.Shelf(p)}
	}
	return key
}

// purchases are the buying lines of a fitting at so many positions.
func (m *market) purchases(f build.Fitting, positions int) []purchase {
	var list []purchase
	for _, p := range f.Pieces {
		key := m.know(p.Part)
		if i := slices.IndexFunc(list, func(q purchase) bool { return q.key == key }); i >= 0 {
			list[i].count += positions
			continue
		}
		list = append(list, purchase{key, positions})
	}
	return list
}

// offered says whether the price book sells enough of every piece.
func (m *market) offered(list []purchase) bool {
	return !slices.ContainsFunc(list, func(p purchase) bool { return !m.price(p.key, p.count).ok })
}

// shareShelves says whether any two lines that are not the same draw on one
// stock.
func (m *market) shareShelves() bool {
	shelves := map[string]string{}
	for key, l := range m.lines {
		if other, taken := shelves[l.shelf]; taken && other != key && m.build.Book.Limited(l.part) {
			return true
		}
		shelves[l.shelf] = key
	}
	return false
}

// unsold is the first opening that nothing offered may fill, or -1.
func (m *market) unsold() int {
	return slices.IndexFunc(m.fittings, func(sold []build.Fitting) bool { return len(sold) == 0 })
}

func (m *market) order(parts []part.Part) order.Order {
	b := m.build
	return order.New(parts, b.Units, b.Spares, b.Book, b.Families)
}

// fixedParts are the parts that are not open.
func (m *market) fixedParts() []part.Part {
	open := map[string]bool{}
	for _, o := range m.build.Openings {
		for _, position := range o.Positions {
			for _, ref := range m.build.Place(position).Refs() {
				open[ref] = true
			}
		}
	}
	return slices.DeleteFunc(m.build.Parts(), func(p part.Part) bool { return open[p.Ref] })
}

// fit is the build fitted with a choice.
func (m *market) fit(choice []int) (*build.Build, error) {
	fittings := make([]build.Fitting, len(choice))
	for i, j := range choice {
		fittings[i] = m.fittings[i][j]
	}
	return m.build.Fit(fittings)
}

// cost is the exact money of a choice: what is bought on each of its lines
// together with whatever else is bought there, and the rest of the order; not
// ok where the price book has not enough.
func (m *market) cost(choice []int) (int64, bool) {
	if m.crowded {
		return m.orderCost(choice)
	}
	counts := make(map[string]int, 2*len(choice))
	total := m.rest
	for i, j := range choice {
		for _, p := range m.buys[i][j] {
			if _, there := counts[p.key]; !there {
				counts[p.key] = m.fixed[p.key]
				total -= m.price(p.key, m.fixed[p.key]).money
			}
			counts[p.key] += p.count
		}
	}
	for key, count := range counts { // a sum of whole numbers, in any order the same
		bought := m.price(key, count)
		if !bought.ok {
			return 0, false
		}
		total += bought.money
	}
	return total, true
}

// orderCost is cost by the whole order, where lines draw on one stock.
func (m *market) orderCost(choice []int) (int64, bool) {
	b, err := m.fit(choice)
	if err != nil {
		return 0, false
	}
	o := m.order(b.Parts())
	for _, l := range o.Unoffered {
		if !m.unofferedAnyway(l) {
			return 0, false
		}
	}
	return int64(o.Total), true
}

// unofferedAnyway says whether nothing on an order's line that is not offered
// is open: the build has it whatever is chosen.
func (m *market) unofferedAnyway(l order.Line) bool {
	for _, o := range m.build.Openings {
		for _, position := range o.Positions {
			if base := m.build.Place(position).Part.Ref; slices.ContainsFunc(l.Refs, func(ref string) bool {
				return ref == base || ref == base+"A" || ref == base+"B"
			}) {
				return false
			}
		}
	}
	return true
}

// price is the money for some pieces a unit on one line, spares included. A
// line that is not bought from costs nothing; a fixed one that nobody offers
// is in no total.
func (m *market) price(key string, perUnit int) price {
	if perUnit == 0 {
		return price{0, true}
	}
	k := lineCount{key, perUnit}
	known, ok := m.prices[k]
	if !ok {
		o := m.order(pieces(m.lines[key].part, perUnit))
		known = price{int64(o.Total), len(o.Unoffered) == 0}
		m.prices[k] = known
	}
	return known
}

// pieces is the same part so many times.
func pieces(p part.Part, n int) []part.Part {
	parts := make([]part.Part, n)
	for i := range parts {
		parts[i] = p
		parts[i].Ref = fmt.Sprintf("X%d", i+1)
	}
	return parts
}

// unitCost is what one unit's pieces of a fitting cost at the batch's prices.
func (m *market) unitCost(i, j int) offer.Money {
	var sum offer.Money
	for _, p := range m.buys[i][j] {
		sum += m.order(pieces(m.lines[p.key].part, p.count)).PerUnit
	}
	return sum
}

// floor is the least that an option can add to the money: over every number of
// pieces that others may put on its lines, what its own make dearer.
func (m *market) floor(i, j int) int64 {
	var sum int64
	for _, p := range m.buys[i][j] {
		least := int64(-1)
		for others := range m.company(i, p.key) {
			with, without := m.price(p.key, others+p.count), m.price(p.key, others)
			if more := with.money - without.money; with.ok && (least < 0 || more < least) {
				least = more
			}
		}
		sum += max(least, 0)
	}
	return sum
}

// company is every number of pieces a unit that what is fixed and the openings
// other than i may put on a line.
func (m *market) company(i int, key string) map[int]bool {
	counts := map[int]bool{m.fixed[key]: true}
	for k, takes := range m.takes {
		if k == i {
			continue
		}
		for _, n := range slices.Collect(maps.Keys(counts)) {
			for more := range takes[key] {
				counts[n+more] = true
			}
		}
	}
	return counts
}

// note adds what a fitting takes of each line.
func note(takes map[string]map[int]bool, list []purchase) {
	for _, p := range list {
		if takes[p.key] == nil {
			takes[p.key] = map[int]bool{}
		}
		takes[p.key][p.count] = true
	}
}
