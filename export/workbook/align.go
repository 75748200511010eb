package workbook

import (
	"fmt"
	"strconv"
)

// alignment says where the rows and columns of a freshly written sheet stand
// in one that came back: rows[3] is where the third row went, 0 for nowhere.
type alignment struct {
	fresh, back *sheetCells
	rows, cols  []int
	ordered     bool // nothing changed places
}

// align lays two sheets over each other by what is written in them, so that
// rows and columns that were inserted or taken out are seen as such. Formulas
// are left out: they change when rows move.
func align(fresh, back *sheetCells) *alignment {
	a := &alignment{fresh: fresh, back: back}
	line := func(p place) int { return p.row }
	value := func(p place, c oneCell) string { return c.key() }
	a.rows = matched(fresh.lines(fresh.rows, line, value), back.lines(back.rows, line, value))
	came := make([]int, back.rows+1)
	for r, b := range a.rows {
		came[b] = r
	}
	column := func(p place) int { return p.col }
	own := func(p place, c oneCell) string { return fmt.Sprint(p.row, " ", c.key()) }
	theirs := func(p place, c oneCell) string {
		if came[p.row] == 0 {
			return ""
		}
		return fmt.Sprint(came[p.row], " ", c.key())
	}
	a.cols = matched(fresh.lines(fresh.cols, column, own), back.lines(back.cols, column, theirs))
	return a
}

// to is where a place of the fresh sheet went.
func (a *alignment) to(p place) (place, bool) {
	if p.row >= len(a.rows) || p.col >= len(a.cols) || a.rows[p.row] == 0 || a.cols[p.col] == 0 {
		return place{}, false
	}
	return place{a.rows[p.row], a.cols[p.col]}, true
}

// key is the cell's value to tell lines by. Figures go by twelve digits: other
// programs keep fifteen.
func (c oneCell) key() string {
	if c.formula != "" {
		return ""
	}
	if c.number() {
		if v, err := strconv.ParseFloat(c.text, 64); err == nil {
			return strconv.FormatFloat(v, 'g', 12, 64)
		}
	}
	return c.text
}

// lines collects what stands in each line of a sheet; which is a cell's line.
func (s *sheetCells) lines(n int, which func(place) int, key func(place, oneCell) string) []map[string]int {
	lines := make([]map[string]int, n+1)
	for p, c := range s.cells {
		if k := key(p, c); k != "" {
			i := which(p)
			if lines[i] == nil {
				lines[i] = map[string]int{}
			}
			lines[i][k]++
		}
	}
	return lines
}

// mostPairs bounds the table that the search for the best alignment fills.
const mostPairs = 400_000

// matched pairs the lines of one list with those of another, in order, so that
// as much as can be stands in both lines of a pair (Needleman and Wunsch, 1970,
// with no price for a gap). The equal lines at both ends need no search. Lists
// start at 1; 0 is no line.
func matched(fresh, back []map[string]int) []int {
	to := make([]int, len(fresh))
	low, high := 1, 0
	for low < len(fresh) && low < len(back) && contained(fresh[low], back[low]) {
		to[low] = low
		low++
	}
	for high < len(fresh)-low && high < len(back)-low && contained(fresh[len(fresh)-1-high], back[len(back)-1-high]) {
		high++
		to[len(fresh)-high] = len(back) - high
	}
	n, m := len(fresh)-high-low, len(back)-high-low
	if n*m > mostPairs { // too far apart to be told: as they stand
		for i := range min(n, m) {
			to[low+i] = low + i
		}
		return to
	}
	for i, j := range best(fresh[low:low+n], back[low:low+m]) {
		if j >= 0 {
			to[low+i] = low + j
		}
	}
	return to
}

// contained says whether all of a line stands in another, which is empty only if
// both are.
func contained(line, other map[string]int) bool {
	return shared(line, other) == total(line) && (len(line) > 0 || len(other) == 0)
}

func total(line map[string]int) int {
	n := 0
	for _, k := range line {
		n += k
	}
	return n
}

func shared(a, b map[string]int) int {
	n := 0
	for k, count := range a {
		n += min(count, b[k])
	}
	return n
}

// best finds the pairs with the most in common; of pairs with nothing in common
// as many as there can be. It returns for each line of a its partner or −1.
func best(a, b []map[string]int) []int {
	const common = 1000 // one shared value outweighs any number of empty pairs
	width := len(b) + 1
	score := make([]int32, (len(a)+1)*width)
	gain := func(i, j int) int32 { return int32(common*shared(a[i], b[j]) + 1) }
	for i := len(a) - 1; i >= 0; i-- {
		for j := len(b) - 1; j >= 0; j-- {
			score[i*width+j] = max(score[(i+1)*width+j], score[i*width+j+1], score[(i+1)*width+j+1]+gain(i, j))
		}
	}
	to := make([]int, len(a))
	j := 0
	for i := range a {
		to[i] = -1
		for j < len(b) {
			here := score[i*width+j]
			if here == score[(i+1)*width+j+1]+gain(i, j) {
				to[i] = j
				j++
				break
			}
			if here == score[(i+1)*width+j] {
				break
			}
			j++
		}
	}
	return to
}
