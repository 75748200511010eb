package pick

import (
	"fmt"
	"maps"
	"math"
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
	buys     [][][]purchase    // [opening][fitting]: what it takes of each of its lines
	lines    []line            // that may be bought
	lineIDs  map[string]int    // by order.Key
	takes    []map[int][]int   // of each opening, by line: how many pieces its fittings may take
	rest     int64             // the least money for parts that are not open
	missing  map[string]bool   // references of fixed parts that nobody offers, whatever is chosen
	crowded  bool              // some lines draw on one stock
}

// purchase is how many pieces of a buying line one unit takes.
type purchase struct{ line, count int }

// line is a buying line.
type line struct {
	part   part.Part
	fixed  int     // pieces a unit takes that are not open
	prices []price // by the pieces a unit takes, as far as they were asked for
}

// price is what so many pieces cost; not ok where the book has not as many.
type price struct {
	money     int64
	ok, known bool
}

// newMarket lists what may fill each opening and is offered.
func newMarket(b *build.Build) (*market, error) {
	m := &market{build: b, lineIDs: map[string]int{}, missing: map[string]bool{}}
	fixed := m.fixedParts()
	for _, p := range fixed {
		m.lines[m.know(p)].fixed++
	}
	m.priceFixed(fixed)
	for _, o := range b.Openings {
		all := b.Fittings(o)
		if len(all) == 0 {
			return nil, fmt.Errorf("pick: nothing can fill %s", o.Positions[0])
		}
		var sold []build.Fitting
		var buys [][]purchase
		takes := map[int][]int{}
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

// priceFixed notes which fixed parts nobody offers, and what the others come to,
// each line as if it had its stock to itself: a choice may leave a line more of
// it than it has without one, by making another line large enough to be bought
// elsewhere.
func (m *market) priceFixed(fixed []part.Part) {
	for _, l := range m.order(fixed).Unoffered {
		for _, ref := range l.Refs {
			m.missing[ref] = true
		}
	}
	for id := range m.lines {
		if !m.missing[m.lines[id].part.Ref] {
			m.rest += m.price(id, m.lines[id].fixed).money
		}
	}
}

// note adds what a fitting takes of each line.
func note(takes map[int][]int, list []purchase) {
	for _, p := range list {
		if !slices.Contains(takes[p.line], p.count) {
			takes[p.line] = append(takes[p.line], p.count)
		}
	}
}

// know gives a part's buying line its number.
func (m *market) know(p part.Part) int {
	key := order.Key(p)
	id, known := m.lineIDs[key]
	if !known {
		id = len(m.lines)
		m.lineIDs[key] = id
		m.lines = append(m.lines, line{part: p})
	}
	return id
}

// purchases are the buying lines of a fitting at so many positions.
func (m *market) purchases(f build.Fitting, positions int) []purchase {
	var list []purchase
	for _, p := range f.Pieces {
		list = add(list, purchase{m.know(p.Part), positions})
	}
	return list
}

// add adds a purchase to those of its line.
func add(list []purchase, p purchase) []purchase {
	for k := range list {
		if list[k].line == p.line {
			list[k].count += p.count
			return list
		}
	}
	return append(list, p)
}

// offered says whether the price book sells enough of every piece.
func (m *market) offered(list []purchase) bool {
	return !slices.ContainsFunc(list, func(p purchase) bool { return !m.price(p.line, p.count).ok })
}

// shareShelves says whether any two lines that are not the same draw on one
// stock.
func (m *market) shareShelves() bool {
	shelves := map[string]bool{}
	for _, l := range m.lines {
		shelf := order.Shelf(l.part)
		if shelves[shelf] && m.build.Book.Limited(l.part) {
			return true
		}
		shelves[shelf] = true
	}
	return false
}

// candidates is the number of combinations, held at math.MaxInt.
func (m *market) candidates() int {
	n := 1
	for _, list := range m.fittings {
		if n > math.MaxInt/max(1, len(list)) {
			return math.MaxInt
		}
		n *= len(list)
	}
	return n
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
	list := make([]purchase, 0, 32)
	for i, j := range choice {
		for _, p := range m.buys[i][j] {
			list = add(list, p)
		}
	}
	total := m.rest
	for _, p := range list {
		fixed := m.lines[p.line].fixed
		bought := m.price(p.line, fixed+p.count)
		if !bought.ok {
			return 0, false
		}
		total += bought.money - m.price(p.line, fixed).money
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
	return int64(o.Total), !slices.ContainsFunc(o.Unoffered, m.spoilt)
}

// spoilt says whether the choice is why nobody offers a line of the order: it
// is on the line, or took what the fixed parts there would have had. A line
// that nobody offers anyway is in no total whatever is chosen.
func (m *market) spoilt(l order.Line) bool {
	return slices.ContainsFunc(l.Refs, func(ref string) bool { return !m.missing[ref] })
}

// price is the money for some pieces a unit on one line, spares included. A
// line that is not bought from costs nothing.
func (m *market) price(id, perUnit int) price {
	if perUnit == 0 {
		return price{0, true, true}
	}
	l := &m.lines[id]
	for len(l.prices) <= perUnit {
		l.prices = append(l.prices, price{})
	}
	p := &l.prices[perUnit]
	if !p.known {
		o := m.order(pieces(l.part, perUnit))
		*p = price{int64(o.Total), len(o.Unoffered) == 0, true}
	}
	return *p
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
		sum += m.order(pieces(m.lines[p.line].part, p.count)).PerUnit
	}
	return sum
}

// floor is the least that an option can add to the money. On a line that
// others may buy from too, n pieces in all make the order dearer by at least n
// times the least that one of n can come to; of this, each takes its share.
//
//	count · min over n of (price(fixed+n) − price(fixed))/n
func (m *market) floor(i, j int) int64 {
	var sum int64
	for _, p := range m.buys[i][j] {
		fixed := m.lines[p.line].fixed
		without := m.price(p.line, fixed).money
		least := int64(-1)
		for others := range m.company(i, p.line) {
			n := others + p.count
			with := m.price(p.line, fixed+n)
			if own := (with.money - without) * int64(p.count) / int64(n); with.ok && (least < 0 || own < least) {
				least = own
			}
		}
		sum += max(least, 0)
	}
	return sum
}

// company is every number of pieces a unit that openings other than i may put
// on a line.
func (m *market) company(i, id int) map[int]bool {
	counts := map[int]bool{0: true}
	for k, takes := range m.takes {
		if k == i {
			continue
		}
		for _, n := range slices.Collect(maps.Keys(counts)) {
			for _, more := range takes[id] {
				counts[n+more] = true
			}
		}
	}
	return counts
}
