package spread

import (
	"iter"
	"math"
)

// Histogram counts values in bins that are narrow near a centre and widen in
// proportion to the distance from it: 512 bins to each doubling of
// |x - centre|, on both sides, and one bin for the centre itself. It needs no
// range beforehand, keeps its resolution out to any tail, and holds whole
// numbers only, so merging is exact and gives the same in any order.
//
// The centre should be near the middle of the values, within a few of their
// standard deviations: the bins about a value are |x - centre|/512 wide at
// most. With a share π of the values in the bin, what the bins add to a
// quantile's sampling error is about √(π/(p(1-p)))/2 of that error or less
// (values of one bin fluctuate about an even spread as a Brownian bridge does);
// QuantileError gives a bound.
//
// Infinite values count beyond all finite ones and take part in quantiles;
// NaN has no place in an order, is left out and counted apart.
//
// The zero value is an empty histogram about 0.
type Histogram struct {
	centre         float64
	wings          [2]wing // x > centre, x < centre: by the sign bit of x - centre
	at             int64   // x = centre
	least, largest float64
	finite         int64 // how many least and largest are of
	negative       int64 // -Inf
	positive       int64 // +Inf
	nan            int64
}

const (
	binBits  = 9            // 512 bins per octave
	binShift = 52 - binBits // the bits of |x - centre| from here up number its bin
	octave   = 1 << binBits // bins
	nearest  = 0x1p-200     // what is nearer to the centre is counted as at it
	binLimit = 1 << 32      // values a bin, hence a histogram, can count
)

// wing is the bins of one side: counts[i] belongs to bin first+i. It covers
// whole octaves and grows by them.
type wing struct {
	first  int
	counts []uint32
}

// NewHistogram returns an empty histogram about a finite centre.
func NewHistogram(centre float64) *Histogram {
	if !finite(centre) {
		panic("spread: histogram about a centre that is not finite")
	}
	return &Histogram{centre: centre}
}

// AddColumn counts the values of x whose keep is true; a nil keep keeps all.
// It panics if keep is neither nil nor of x's length. It allocates only when
// a value is the first of its octave. A bin counts to 2^32.
func (h *Histogram) AddColumn(x []float64, keep []bool) {
	if keep != nil && len(keep) != len(x) {
		panic("spread: keep is not as long as its column")
	}
	least, largest := h.least, h.largest
	if h.finite == 0 {
		least, largest = math.Inf(1), math.Inf(-1)
	}
	before := h.finite
	for i, v := range x {
		if keep != nil && !keep[i] {
			continue
		}
		d := v - h.centre
		b := math.Float64bits(d)
		w := &h.wings[b>>63]
		if j := int(b<<1>>(binShift+1)) - w.first; uint(j) < uint(len(w.counts)) {
			w.counts[j]++
		} else if !h.addRare(v, d) {
			continue
		}
		h.finite++
		if v < least {
			least = v
		}
		if v > largest {
			largest = v
		}
	}
	if h.finite > before {
		h.least, h.largest = least, largest
	}
}

// addRare counts a value v, d off the centre, that no bin there is can hold,
// and reports whether it is finite. What is further from the centre than a
// float64 can say counts as infinite.
func (h *Histogram) addRare(v, d float64) bool {
	size := math.Abs(d)
	switch {
	case math.IsNaN(v):
		h.nan++
	case d < -math.MaxFloat64:
		h.negative++
	case d > math.MaxFloat64:
		h.positive++
	case size < nearest:
		h.at++
		return true
	default:
		b := math.Float64bits(d)
		bin := int(math.Float64bits(size) >> binShift)
		w := &h.wings[b>>63]
		w.cover(bin, bin+1)
		w.counts[bin-w.first]++
		return true
	}
	return false
}

// cover makes the wing hold the bins low..high-1, in whole octaves.
func (w *wing) cover(low, high int) {
	low, high = low/octave*octave, (high+octave-1)/octave*octave
	if len(w.counts) > 0 {
		low, high = min(low, w.first), max(high, w.first+len(w.counts))
	}
	counts := make([]uint32, high-low)
	copy(counts[max(w.first-low, 0):], w.counts)
	w.first, w.counts = low, counts
}

// Merge adds all that o has counted. It panics if the two are about different
// centres or count too much for one histogram (2^32 finite values).
func (h *Histogram) Merge(o *Histogram) {
	if h.centre != o.centre {
		panic("spread: histograms about different centres")
	}
	if h.finite+o.finite >= binLimit {
		panic("spread: more values than a histogram counts")
	}
	if h.finite == 0 {
		h.least, h.largest = o.least, o.largest
	} else if o.finite > 0 {
		h.least, h.largest = min(h.least, o.least), max(h.largest, o.largest)
	}
	h.wings[0].merge(&o.wings[0])
	h.wings[1].merge(&o.wings[1])
	h.at += o.at
	h.finite += o.finite
	h.negative += o.negative
	h.positive += o.positive
	h.nan += o.nan
}

func (w *wing) merge(o *wing) {
	if len(o.counts) == 0 {
		return
	}
	w.cover(o.first, o.first+len(o.counts))
	for i, n := range o.counts {
		w.counts[o.first-w.first+i] += n
	}
}

// Count returns how many values take part in quantiles: finite and infinite.
func (h *Histogram) Count() int { return int(h.finite + h.negative + h.positive) }

// NonFinite returns how many values were -Inf, +Inf and NaN.
func (h *Histogram) NonFinite() (negative, positive, nan int) {
	return int(h.negative), int(h.positive), int(h.nan)
}

// Quantile returns the value at fraction p of the sorted values
// x_0 <= … <= x_{n-1}:
//
//	(1-f)·x_j + f·x_{j+1}      j + f = (n-1)·p, j whole, 0 <= f < 1
//
// which is definition 7 of R. J. Hyndman and Y. Fan, "Sample quantiles in
// statistical packages", The American Statistician 50 (1996), 361-365, and
// what spreadsheets call the inclusive percentile. The least and the largest
// value are exact; any other is read as if the values of its bin lay evenly
// in it, or in that part of it which is not beyond the least or the largest. It is NaN without values (or between -Inf and +Inf) and panics if p
// is not in [0, 1].
func (h *Histogram) Quantile(p float64) float64 { return h.read(p).value }

// QuantileError returns how far Quantile(p) can be from the same quantile of
// the values themselves: a bound, not an estimate, given by the edges of the
// bins (the error met is mostly a small part of it). It is NaN where the
// quantile is not finite.
func (h *Histogram) QuantileError(p float64) float64 {
	r := h.read(p)
	if r.low == r.high { // an exact value, or NaN for none
		return r.value - r.low
	}
	rounding := 0x1p-51 * (math.Abs(h.centre) + math.Abs(r.low) + math.Abs(r.high))
	return math.Max(r.value-r.low, r.high-r.value) + rounding
}

// reading is an order statistic, or a mean of two, and what it lies between.
type reading struct{ value, low, high float64 }

// read returns Quantile's reading.
func (h *Histogram) read(p float64) reading {
	if !(p >= 0 && p <= 1) {
		panic("spread: quantile fraction outside [0, 1]")
	}
	n := int64(h.Count())
	if n == 0 {
		return reading{math.NaN(), math.NaN(), math.NaN()}
	}
	place := float64(n-1) * p
	j := int64(place)
	f := place - float64(j)
	a := h.order(j)
	if f == 0 || j+1 == n {
		return a
	}
	b := h.order(j + 1)
	mean := func(a, b float64) float64 {
		if a == b { // infinite ones too
			return a
		}
		return (1-f)*a + f*b
	}
	return reading{mean(a.value, b.value), mean(a.low, b.low), mean(a.high, b.high)}
}

// order reads the value of a rank, 0 being the first of all.
func (h *Histogram) order(rank int64) reading {
	if rank < h.negative {
		return exactly(math.Inf(-1))
	}
	rank -= h.negative
	switch {
	case rank >= h.finite:
		return exactly(math.Inf(1))
	case rank == 0:
		return exactly(h.least)
	case rank == h.finite-1:
		return exactly(h.largest)
	}
	for bin, n := range h.bins() {
		if rank >= n {
			rank -= n
			continue
		}
		low, high := h.clamp(bin.low), h.clamp(bin.high)
		value := low + (float64(rank)+0.5)/float64(n)*(high-low)
		return reading{min(value, high), low, high} // rounding must not lead outside
	}
	panic("spread: histogram counts do not add up")
}

// clamp holds an offset from the centre, made a value, to the extremes seen.
func (h *Histogram) clamp(offset float64) float64 {
	return min(max(h.centre+offset, h.least), h.largest)
}

func exactly(v float64) reading { return reading{v, v, v} }

// Bin is one bin's ends, not beyond the least and the largest value.
type Bin struct{ Low, High float64 }

// Bins yields the bins that count anything, in ascending order, with how many
// values each counts; infinite values are in none.
func (h *Histogram) Bins() iter.Seq2[Bin, int] {
	return func(yield func(Bin, int) bool) {
		for b, n := range h.bins() {
			if !yield(Bin{h.clamp(b.low), h.clamp(b.high)}, int(n)) {
				return
			}
		}
	}
}

// edges are the ends of a bin as offsets from the centre.
type edges struct{ low, high float64 }

// bins yields the bins that count anything, in ascending order.
func (h *Histogram) bins() iter.Seq2[edges, int64] {
	return func(yield func(edges, int64) bool) {
		above, below := &h.wings[0], &h.wings[1]
		for i := len(below.counts) - 1; i >= 0; i-- {
			if n := below.counts[i]; n > 0 {
				e := below.edges(i)
				if !yield(edges{-e.high, -e.low}, int64(n)) {
					return
				}
			}
		}
		if h.at > 0 && !yield(edges{}, h.at) {
			return
		}
		for i, n := range above.counts {
			if n > 0 && !yield(above.edges(i), int64(n)) {
				return
			}
		}
	}
}

// edges returns the ends of counts[i]'s bin.
func (w *wing) edges(i int) edges {
	bin := uint64(w.first + i)
	return edges{math.Float64frombits(bin << binShift), math.Float64frombits((bin + 1) << binShift)}
}
