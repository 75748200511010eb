package chart

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"math"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgsvg"

	"batchwright/bom/offer"
	"batchwright/tolerance/pick"
	"batchwright/tolerance/spread"
)

// crowded is an invented trade whose points stand close together, three of
// them within a coin.
func crowded() pick.Trade {
	t := pick.Trade{Target: "warm-up drift", Asked: "±30 Hz on 98 % of the units", Unit: "Hz"}
	for _, x := range [][3]float64{
		{2009770, 104.1, 108.7}, {2054770, 104.06, 106.1}, {2103770, 73.2, 79.9}, {2129770, 49.2, 54.6}, {2174770, 49.1, 53.7}, {2220530, 49.1, 52.5},
		{2223330, 40.4, 41.3}, {2223770, 24.2, 27.4}, {2277670, 24.2, 26.6}, {2407670, 24.2, 26.1}, {2546270, 24.2, 26},
	} {
		t.Points = append(t.Points, pick.TradePoint{Total: offer.Money(x[0]), Predicted: spread.Figure(x[1]), Simulated: spread.Figure(x[2]), Met: x[2] < 30})
	}
	return t
}

func drawn(t *testing.T, trade pick.Trade, f Frame) string {
	t.Helper()
	var b bytes.Buffer
	if err := Trade(&b, trade, f); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func wellFormed(s string) error {
	d := xml.NewDecoder(strings.NewReader(s))
	for {
		if _, err := d.Token(); errors.Is(err, io.EOF) {
			return nil
		} else if err != nil {
			return err
		}
	}
}

// The same trade gives the same bytes, also where several are drawn at once,
// and no font has to be there.
func TestTradeBytes(t *testing.T) {
	f := Frame{Title: "Tone box", Currency: "EUR", Limit: 30}
	first := drawn(t, crowded(), f)
	again := make([]string, 4)
	done := make(chan bool)
	for i := range again {
		go func() {
			var b bytes.Buffer
			Trade(&b, crowded(), f)
			again[i] = b.String()
			done <- true
		}()
	}
	for range again {
		<-done
	}
	for _, other := range again {
		if other != first {
			t.Fatal("the same trade gave other bytes")
		}
	}
	for _, word := range []string{"<text", "font"} {
		if strings.Contains(first, word) {
			t.Errorf("the drawing asks for a font: %s", word)
		}
	}
	f.Currency = "USD"
	if drawn(t, crowded(), f) == first {
		t.Error("the currency is drawn nowhere")
	}
}

// dots finds the round marks of a radius in a drawing: their centres, in points
// from the lower left. A circle is two arcs that begin and end at its right.
func dots(t *testing.T, svg, radius string) (list [][2]float64) {
	t.Helper()
	r, err := strconv.ParseFloat(radius, 64)
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range regexp.MustCompile(`d="M([\d.]+),([\d.]+)A`+radius+`,`).FindAllStringSubmatch(svg, -1) {
		x, err1 := strconv.ParseFloat(m[1], 64)
		y, err2 := strconv.ParseFloat(m[2], 64)
		if err := errors.Join(err1, err2); err != nil {
			t.Fatal(err)
		}
		list = append(list, [2]float64{x - r, y})
	}
	return list
}

// Marks stand where the figures say: distances on paper are in proportion to
// money across and to half widths upward, and rings are at the points that miss.
// Seven of the eleven are above 30 Hz.
func TestTradePlaces(t *testing.T) {
	svg, trade := drawn(t, crowded(), Frame{Limit: 30}), crowded()
	at := dots(t, svg, "3.2")
	if len(at) != 11 || len(dots(t, svg, "2.1")) != 7 {
		t.Fatalf("%d marks, %d of them rings", len(at), len(dots(t, svg, "2.1")))
	}
	last := len(at) - 1
	across := (at[last][0] - at[0][0]) / (254.627 - 200.977)
	up := (at[0][1] - at[last][1]) / (108.7 - 26)
	if !(across > 5 && up > 1) { // 520 by 380 points, axes and words off
		t.Fatalf("%v points for one of money, %v for one Hz", across, up)
	}
	for i, p := range trade.Points {
		x, y := at[0][0]+across*(p.Total.Float()-200.977), at[last][1]+up*(float64(p.Simulated)-26)
		if math.Abs(x-at[i][0]) > 0.02 || math.Abs(y-at[i][1]) > 0.02 { // five digits are written
			t.Errorf("point %d is at %v, want %.2f, %.2f", i, at[i], x, y)
		}
	}
}

func TestSteps(t *testing.T) {
	got := steps(plotter.XYs{{X: 1, Y: 9}, {X: 4, Y: 7}, {X: 5, Y: 2}})
	want := plotter.XYs{{X: 1, Y: 9}, {X: 4, Y: 9}, {X: 4, Y: 7}, {X: 5, Y: 7}, {X: 5, Y: 2}}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
}

// All labels find room, on no step, mark, line or other label: of crowded
// points, and of one with the limit right above it and a step down beside it.
func TestLabelsApart(t *testing.T) {
	edge := pick.Trade{Unit: "Hz", Points: []pick.TradePoint{
		{Total: 1_800_000, Predicted: 60, Simulated: 60}, {Total: 2_200_000, Predicted: 29, Simulated: 29}, {Total: 2_224_000, Predicted: 5, Simulated: 5}, {Total: 2_500_000, Predicted: 4, Simulated: 4},
	}}
	dear := edge // whose money is too long for the margin on the right
	dear.Points = slices.Clone(edge.Points)
	for i := range dear.Points {
		dear.Points[i].Total *= 1000
	}
	for name, trade := range map[string]pick.Trade{"crowded": crowded(), "edge": edge, "dear": dear} {
		d := newTradeDrawing(trade, Frame{Limit: 30})
		p, l := d.plot(), d.labels()
		c := p.DataCanvas(draw.NewCanvas(vgsvg.New(wide, high), wide, high-100))
		got := l.arrange(c, p)
		if want := len(trade.Points) + 1; len(got) != want { // and the limit's
			t.Errorf("%s: %d labels, want %d: %v", name, len(got), want, got)
		}
		toX, toY := p.Transforms(&c)
		corners := steps(d.simulated)
		corners = append(corners, plotter.XY{X: math.NaN()}, plotter.XY{X: p.X.Min, Y: 30}, plotter.XY{X: p.X.Max, Y: 30})
		for i, a := range got {
			for _, b := range got[:i] {
				if a.box.Min.X < b.box.Max.X && b.box.Min.X < a.box.Max.X && a.box.Min.Y < b.box.Max.Y && b.box.Min.Y < a.box.Max.Y {
					t.Errorf("%s: %s lies on %s", name, a.words, b.words)
				}
			}
			if a.box.Min.X < c.Min.X || a.box.Max.X > c.Max.X || a.box.Min.Y < c.Min.Y || a.box.Max.Y > c.Max.Y {
				t.Errorf("%s: %s runs out of the drawing", name, a.words)
			}
			for k := 1; k < len(corners); k++ { // walk along the steps and the limit
				for u := 0.0; u <= 1; u += 1.0 / 512 {
					x, y := corners[k-1].X+u*(corners[k].X-corners[k-1].X), corners[k-1].Y+u*(corners[k].Y-corners[k-1].Y)
					if inside(a.box, vg.Point{X: toX(x), Y: toY(y)}) {
						t.Fatalf("%s: %s is struck through at %.2f, %.2f", name, a.words, x, y)
					}
				}
			}
		}
	}
}

func inside(box vg.Rectangle, p vg.Point) bool {
	return p.X > box.Min.X && p.X < box.Max.X && p.Y > box.Min.Y && p.Y < box.Max.Y
}

// Half widths are told in the unit that people use for their size, and the
// limit is drawn where that leaves the steps to be seen: 2.5 times 2500 Hz is
// 6250 Hz.
func TestTradeUnitsAndLimit(t *testing.T) {
	trade := pick.Trade{Target: "pull", Unit: "Hz", Points: []pick.TradePoint{
		{Total: 100_000, Predicted: spread.Figure(math.Inf(1)), Simulated: 2500}, {Total: 123_400, Predicted: 900, Simulated: 950},
	}}
	for _, c := range []struct {
		name   string
		limit  float64
		dashed int
		says   string
	}{
		{"drawn", 6250, 1, "Dashed: the target's limit, ±6.25 kHz."},
		{"too far", 6260, 0, "The target's limit, ±6.26 kHz, lies above the drawing."},
		{"unknown", math.NaN(), 0, "to first order. 10.00"},
		{"open", math.Inf(1), 0, "to first order. 10.00"},
	} {
		svg := drawn(t, trade, Frame{Limit: c.limit})
		if got := strings.Count(svg, "stroke-dasharray:6,3"); got != c.dashed {
			t.Errorf("%s: %d dashed lines, want %d", c.name, got, c.dashed)
		}
		if !strings.Contains(strings.ReplaceAll(svg, "&#39;", "'"), c.says) {
			t.Errorf("%s: nowhere says %q", c.name, c.says)
		}
		if !strings.Contains(svg, "10.00: within ±2.5 kHz. 12.34: within ±0.95 kHz.") {
			t.Errorf("%s: the points are not told", c.name)
		}
	}
}

// What cannot be drawn is an error, and nothing is written.
func TestTradeErrors(t *testing.T) {
	unknown := crowded()
	unknown.Points[2].Simulated = spread.Figure(math.NaN())
	for want, trade := range map[string]pick.Trade{"a trade without a point": {}, "the choice for 210.38 has no simulated half width": unknown} {
		var b bytes.Buffer
		if err := Trade(&b, trade, Frame{}); err == nil || !strings.HasPrefix(err.Error(), want) || b.Len() > 0 {
			t.Errorf("error %v and %d bytes, want %q and none", err, b.Len(), want)
		}
	}
	full := errors.New("full")
	if err := Trade(failing{full}, crowded(), Frame{}); !errors.Is(err, full) {
		t.Errorf("a writer that fails: %v", err)
	}
}

type failing struct{ err error }

func (f failing) Write([]byte) (int, error) { return 0, f.err }

// Whatever stands in the texts and figures, the drawing is well-formed.
func TestTradeHostile(t *testing.T) {
	for _, s := range []string{"</title><script>", `"&'`, "a\x00b\x1b[31m\ufffe", "\xff\xfe", strings.Repeat("long ", 2000), strings.Repeat("W", 3000), "اختبار 试验 𝄞", ""} {
		trade := crowded()
		trade.Target, trade.Asked, trade.Unit = s, s, s
		svg := drawn(t, trade, Frame{Title: s, Currency: s, Notes: []string{s}})
		if err := wellFormed(svg); err != nil {
			t.Errorf("%.20q: %v", s, err)
		}
		if strings.Contains(svg, "<script") {
			t.Error("a text became an element")
		}
	}
	for name, points := range map[string][]pick.TradePoint{
		"one":       {{Total: 100, Simulated: 5}},
		"free":      {{Simulated: 0}},
		"same":      {{Total: 100, Simulated: 5}, {Total: 100, Simulated: 4}},
		"no figure": {{Total: 100, Predicted: spread.Figure(math.NaN()), Simulated: 5}},
	} {
		svg := drawn(t, pick.Trade{Unit: "Hz", Points: points}, Frame{Limit: math.NaN()})
		if err := wellFormed(svg); err != nil || strings.Contains(svg, "NaN") || strings.Contains(svg, "Inf") {
			t.Errorf("%s: not a drawing (%v)", name, err)
		}
	}
}

// A title longer than the sheet is wide ends in an ellipsis within it.
func TestCut(t *testing.T) {
	style := letters(13, true)
	if got := cut("Tone box", style, 200); got != "Tone box" {
		t.Errorf("a short title became %q", got)
	}
	got := cut(strings.Repeat("W", 400), style, 200)
	if w := style.Width(got); !strings.HasSuffix(got, "W…") || w > 200 || w+style.Width("W") <= 200 {
		t.Errorf("%q is %v wide", got, w)
	}
}

// An outline is as large as the font says: an H of 10 points from its left end
// at 10 and its foot at 20, against the box that the font gives for it.
func TestOutlineSize(t *testing.T) {
	style := letters(10, false)
	face := style.Handler.Cache().Lookup(style.Font, style.Font.Size)
	var buffer sfnt.Buffer
	glyph, err := face.Face.GlyphIndex(&buffer, 'H')
	if err != nil {
		t.Fatal(err)
	}
	box, _, err := face.Face.GlyphBounds(&buffer, glyph, fixed.I(10), 0) // in 64ths of a point, y down
	if err != nil {
		t.Fatal(err)
	}
	segments, err := face.Face.LoadGlyph(&buffer, glyph, fixed.Int26_6(face.Face.UnitsPerEm()), nil)
	if err != nil {
		t.Fatal(err)
	}
	got := [4]float64{math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)}
	for _, c := range trace(nil, segments, vg.Point{X: 10, Y: 20}, 10/vg.Length(face.Face.UnitsPerEm())) {
		if c.Type != vg.CloseComp {
			x, y := c.Pos.X.Points(), c.Pos.Y.Points()
			got = [4]float64{min(got[0], x), min(got[1], y), max(got[2], x), max(got[3], y)}
		}
	}
	want := [4]float64{10 + float64(box.Min.X)/64, 20 - float64(box.Max.Y)/64, 10 + float64(box.Max.X)/64, 20 - float64(box.Min.Y)/64}
	for i := range want {
		if math.Abs(got[i]-want[i]) > 1.0/64 {
			t.Errorf("the H spans %.3f, want %.3f", got, want)
			break
		}
	}
}

// Letters stand as far apart as the font measures them, kerned: the outline of
// the second begins where it does alone, moved by what stands before it.
func TestOutlines(t *testing.T) {
	style := letters(10, false)
	starts := func(s string) (xs []float64) {
		c := outlined{vgsvg.New(100, 100)}
		c.FillString(style.Handler.Cache().Lookup(style.Font, style.Font.Size), vg.Point{X: 10, Y: 20}, s)
		var b bytes.Buffer
		if _, err := c.WriteTo(&b); err != nil {
			t.Fatal(err)
		}
		for _, m := range regexp.MustCompile(`M([\d.]+),`).FindAllStringSubmatch(b.String(), -1) {
			var x float64
			fmt.Sscan(m[1], &x)
			xs = append(xs, x)
		}
		return xs
	}
	for _, pair := range [][2]string{{"H", "H"}, {"T", "V"}, {"L", "T"}} { // letters of one stroke each
		both, second := starts(pair[0]+pair[1]), starts(pair[1])
		want := second[0] + (style.Width(pair[0]+pair[1]) - style.Width(pair[1])).Points()
		if len(both) != 2 || math.Abs(both[1]-want) > 2e-3 {
			t.Errorf("%v: outlines begin at %v, want the second at %.4f", pair, both, want)
		}
	}
	if style.Width("LT") > style.Width("L")+style.Width("T")-0.3 {
		t.Error("the font does not kern LT: the case shows nothing")
	}
}
