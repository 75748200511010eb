package tape

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"testing"

	"batchwright/tolerance/formula"

	"pgregory.net/rapid"
)

var variables = []string{"x", "y", "z"}

// expression draws a text of the equation language with up to depth levels;
// unknowns are the names of the roots around it.
func expression(t *rapid.T, depth int, unknowns []string) string {
	leaf := depth == 0 || rapid.IntRange(0, 9).Draw(t, "leaf") == 0
	if leaf {
		known := append(slices.Clip(variables), unknowns...)
		if rapid.Bool().Draw(t, "name") {
			return rapid.SampledFrom(known).Draw(t, "which")
		}
		return rapid.SampledFrom([]string{"0", "1", "2", "0.5", "3.7", "-1.25", "1e-3", "12"}).Draw(t, "number")
	}
	sub := func() string { return expression(t, depth-1, unknowns) }
	switch kind := rapid.IntRange(0, 24).Draw(t, "kind"); kind {
	case 0, 1, 2:
		return "(" + sub() + " + " + sub() + ")"
	case 3, 4:
		return "(" + sub() + " - " + sub() + ")"
	case 5, 6, 7:
		return sub() + " * " + sub()
	case 8, 9:
		return sub() + " / (" + sub() + ")"
	case 10:
		return "(" + sub() + ")^" + rapid.SampledFrom([]string{"2", "3", "-1", "0.5", "1.7", "4", "-0.5", "(1/3)", "5"}).Draw(t, "exponent")
	case 11:
		return "-(" + sub() + ")"
	case 12:
		operator := rapid.SampledFrom([]string{"<", "<=", ">", ">=", "==", "!="}).Draw(t, "comparison")
		return "(" + sub() + " " + operator + " " + sub() + " ? " + sub() + " : " + sub() + ")"
	case 13:
		return "(" + sub() + " > 1 and not (" + sub() + " < 0) or " + sub() + " < -1 ? " + sub() + " : " + sub() + ")"
	case 14, 15:
		f := rapid.SampledFrom([]string{"min", "max", "parallel"}).Draw(t, "function of two")
		return f + "(" + sub() + ", " + sub() + ")"
	case 16:
		if len(unknowns) == 2 {
			return sub()
		}
		// Rising in the unknown, so that there is one root or a clamped end.
		u := "u" + strconv.Itoa(len(unknowns))
		part := expression(t, depth-1, append(slices.Clip(unknowns), u))
		// The offset keeps it away from 0, where a root is exact to its
		// bracket's size and no longer to its own.
		return "(4 + root(" + u + ", -2, 3, " + u + "*(3 + " + sub() + "^2) + atan(" + part + ")/10 - " + sub() + "))"
	}
	f := rapid.SampledFrom([]string{"sqrt", "ln", "exp", "sin", "cos", "atan", "abs", "log10", "bessel_i0_scaled", "bessel_i1_scaled"}).Draw(t, "function")
	return f + "(" + sub() + ")"
}

// walk evaluates a tree directly, without a graph: what the program must give.
func walk(n formula.Node, names map[string]float64) float64 {
	of := func(n formula.Node) float64 { return walk(n, names) }
	switch n := n.(type) {
	case *formula.Number:
		return n.Value
	case *formula.Name:
		return names[n.Name]
	case *formula.Unary:
		if n.Operator == "-" {
			return -of(n.X)
		}
		return 1 - of(n.X)
	case *formula.Binary:
		return walkBinary(n, names)
	case *formula.Compare:
		return walkCompare(n.Operator, of(n.X), of(n.Y))
	case *formula.Conditional:
		switch c := of(n.If); {
		case math.IsNaN(c):
			return c
		case c != 0:
			return of(n.Then)
		}
		return of(n.Else)
	case *formula.Call:
		return walkCall(n, names)
	case *formula.Root:
		return walkRoot(n, names)
	}
	panic("unknown node")
}

func walkBinary(n *formula.Binary, names map[string]float64) float64 {
	x, y := walk(n.X, names), walk(n.Y, names)
	switch n.Operator {
	case "+":
		return x + y
	case "-":
		return x - y
	case "*":
		return x * y
	case "/":
		return x / y
	case "^":
		return math.Pow(x, y)
	case "and":
		if x == 0 || y == 0 {
			return 0
		}
		return x * y
	}
	if x == 1 || y == 1 {
		return 1
	}
	return x + y // or: both 0, or one NaN
}

func walkCompare(operator string, x, y float64) float64 {
	if math.IsNaN(x) || math.IsNaN(y) {
		return math.NaN()
	}
	holds := map[string]bool{"<": x < y, "<=": x <= y, ">": x > y, ">=": x >= y, "==": x == y, "!=": x != y}[operator]
	if holds {
		return 1
	}
	return 0
}

func walkCall(n *formula.Call, names map[string]float64) float64 {
	x := walk(n.Arguments[0], names)
	y := 0.0
	if len(n.Arguments) > 1 {
		y = walk(n.Arguments[1], names)
	}
	switch n.Function {
	case "sqrt":
		return math.Sqrt(x)
	case "ln":
		return math.Log(x)
	case "log10":
		return math.Log10(x)
	case "exp":
		return math.Exp(x)
	case "abs":
		return math.Abs(x)
	case "min":
		return math.Min(x, y)
	case "max":
		return math.Max(x, y)
	case "sin":
		return math.Sin(x)
	case "cos":
		return math.Cos(x)
	case "atan":
		return math.Atan(x)
	case "parallel":
		if x == 0 && y == 0 {
			return 0
		}
		return x * y / (x + y)
	case "bessel_i0_scaled":
		return besselI0Scaled(x)
	case "bessel_i1_scaled":
		return besselI1Scaled(x)
	}
	panic("unknown function " + n.Function)
}

// walkRoot halves the bracket until it is two neighbouring numbers.
func walkRoot(n *formula.Root, names map[string]float64) float64 {
	at := func(x float64) float64 {
		inner := map[string]float64{n.Unknown: x}
		for k, v := range names {
			if k != n.Unknown {
				inner[k] = v
			}
		}
		return walk(n.Residual, inner)
	}
	low, high := walk(n.Low, names), walk(n.High, names)
	fLow, fHigh := at(low), at(high)
	switch {
	case math.IsNaN(fLow) || math.IsNaN(fHigh):
		return math.NaN()
	case fLow == 0:
		return low
	case fHigh == 0:
		return high
	case (fLow > 0) == (fHigh > 0):
		if math.Abs(fHigh) < math.Abs(fLow) {
			return high
		}
		return low
	}
	for range 90 {
		middle := low + (high-low)/2
		f := at(middle)
		if math.IsNaN(f) {
			return f
		}
		if (f > 0) == (fLow > 0) {
			low = middle
		} else {
			high = middle
		}
	}
	return low
}

func drawExpression(t *rapid.T) (*rig, *formula.Expression) {
	text := expression(t, 4, nil)
	e, mistakes := formula.Parse(text)
	if len(mistakes) > 0 {
		t.Skip("too long")
	}
	r := newRig(variables...)
	ref, err := r.g.Lower(e, func(name string) (Ref, bool) { ref, ok := r.inputs[name]; return ref, ok })
	if err != nil {
		t.Fatal(err)
	}
	r.use(ref)
	return r, e
}

func drawPoint(t *rapid.T, low, high float64) []float64 {
	v := make([]float64, len(variables))
	for i := range v {
		v[i] = rapid.Float64Range(low, high).Draw(t, variables[i])
	}
	return v
}

// conditioned reports whether the value at v hardly moves when every input and
// intermediate result is off by a few roundings: where it does, two right
// evaluations differ. It is judged by moving the inputs.
func conditioned(e *formula.Expression, v []float64) (value float64, ok bool) {
	at := func(scale float64) float64 {
		names := map[string]float64{}
		for i, name := range variables {
			names[name] = v[i] * scale
		}
		return walk(e.Root, names)
	}
	value = at(1)
	for _, scale := range []float64{1 + 1e-9, 1 - 1e-9, 1 + 3e-9} {
		if w := at(scale); math.IsNaN(w) != math.IsNaN(value) || math.Abs(w-value) > 1e-6*math.Abs(value) {
			return value, false
		}
	}
	return value, true
}

// TestRandomValues compares programs with a direct walk of the tree.
func TestRandomValues(t *testing.T) {
	compared := 0
	rapid.Check(t, func(t *rapid.T) {
		r, e := drawExpression(t)
		for range 5 {
			v := drawPoint(t, -3, 5)
			want, ok := conditioned(e, v)
			if !ok {
				continue
			}
			compared++
			if got := r.at(v...)[0]; !near(got, want, 1e-9) && math.Abs(got-want) > 1e-12 {
				t.Fatalf("%s at %v: %v, want %v", e.Text, v, got, want)
			}
		}
	})
	if compared < enough(200) {
		t.Errorf("only %d values were compared", compared)
	}
}

// TestRandomBounds draws boxes and points in them: no value may be outside the
// bounds.
func TestRandomBounds(t *testing.T) {
	finite := 0
	rapid.Check(t, func(t *rapid.T) {
		r, e := drawExpression(t)
		centre := drawPoint(t, -3, 5)
		width := rapid.SampledFrom([]float64{0, 1e-12, 1e-3, 0.1, 1, 5}).Draw(t, "width")
		box := make([]Interval, len(variables))
		for i := range box {
			box[i] = Interval{centre[i], centre[i] + width}
		}
		bound := r.program.Bounds(box)[0]
		for k := range 20 {
			v := make([]float64, len(box))
			for i := range v {
				share := rapid.SampledFrom([]float64{0, 1, 0.5, rapid.Float64Range(0, 1).Draw(t, "share")}).Draw(t, "place")
				v[i] = math.Min(box[i].Low+share*width, box[i].High)
			}
			got := r.at(v...)[0]
			if math.IsNaN(got) {
				continue
			}
			if !bound.Contains(got) {
				t.Fatalf("%s at %v (draw %d): %v outside %v of %v", e.Text, v, k, got, bound, box)
			}
			if !math.IsInf(bound.High-bound.Low, 0) {
				finite++
			}
		}
	})
	if finite < enough(500) {
		t.Errorf("only %d values had finite bounds", finite)
	}
}

// TestRandomTangents compares slopes with central differences, where
// differences of two step lengths agree with each other.
func TestRandomTangents(t *testing.T) {
	compared, infinite := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		r, e := drawExpression(t)
		v, d := drawPoint(t, 0.2, 4), drawPoint(t, -1, 1)
		difference := func(h float64) float64 {
			ahead, behind := make([]float64, len(v)), make([]float64, len(v))
			for i := range v {
				ahead[i], behind[i] = v[i]+h*d[i], v[i]-h*d[i]
			}
			return (r.at(ahead...)[0] - r.at(behind...)[0]) / (2 * h)
		}
		coarse, fine, off := difference(1e-4), difference(3e-5), difference(1e-5)
		value := math.Abs(r.at(v...)[0])
		here, ahead := r.at(v...)[0], r.at(v[0]+1e-5*d[0], v[1]+1e-5*d[1], v[2]+1e-5*d[2])[0]
		scale := math.Max(math.Abs(fine), 1e-3*value)
		if !(math.Abs(coarse-fine) < 1e-6*scale && math.Abs(off-fine) < 1e-6*scale && value < 1e6) || scale < 1e-9 {
			return
		}
		if !(math.Abs((ahead-here)/1e-5-fine) < 1e-2*scale) {
			return // a kink or a point of its own, as of min(x, 1) and z == 2
		}
		compared++
		got := r.slopes(v, d)[0]
		if math.IsNaN(got) {
			infinite++ // an intermediate result is infinite, as in atan(1/0)
			return
		}
		if !(math.Abs(got-fine) < 1e-5*scale) {
			t.Fatalf("%s at %v along %v: slope %v, difference quotient %v", e.Text, v, d, got, fine)
		}
	})
	if compared < enough(30) {
		t.Errorf("only %d slopes were compared", compared)
	}
	if infinite > compared/20 {
		t.Errorf("%d slopes of %d are no numbers", infinite, compared)
	}
}

// TestRandomLanes evaluates a block in several orders and sizes: every lane
// must get the same bits.
func TestRandomLanes(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r, e := drawExpression(t)
		const n = 13
		in, out := grid(len(variables), n), grid(1, n)
		for k := range n {
			for i, x := range drawPoint(t, -3, 5) {
				in[i][k] = x
			}
		}
		r.program.Values(out, in, r.frame)
		for k := range n {
			alone := r.at(in[0][k], in[1][k], in[2][k])[0]
			if math.Float64bits(alone) != math.Float64bits(out[0][k]) && !(math.IsNaN(alone) && math.IsNaN(out[0][k])) {
				t.Fatalf("%s: lane %d is %v in company, %v alone", e.Text, k, out[0][k], alone)
			}
		}
	})
}

func ExampleGraph_Lower() {
	e, _ := formula.Parse("1/(2*pi*sqrt(coil*capacitance))")
	g := NewGraph()
	inputs := map[string]Ref{"coil": g.Input(), "capacitance": g.Input()}
	frequency, _ := g.Lower(e, func(name string) (Ref, bool) { r, ok := inputs[name]; return r, ok })
	p := g.Program(frequency)
	dst := [][]float64{make([]float64, 2)}
	p.Values(dst, [][]float64{{1.8e-3, 1.9e-3}, {110e-12, 110e-12}}, p.NewFrame(256))
	fmt.Printf("%.0f Hz\n", dst[0])
	// Output: [357674 348134] Hz
}

// enough is how many of the things compared there must be: -short draws a fifth.
func enough(n int) int {
	if testing.Short() {
		return n / 5
	}
	return n
}
