package formula

// rule is how a function treats the dimensions of its arguments.
type rule int

const (
	plain  rule = iota // dimensionless in, dimensionless out
	same               // all arguments alike, the result like them
	halved             // the square root of the argument's dimension
)

// function is one row of the table of functions.
type function struct {
	name  string
	arity int
	rule  rule
}

// functions are what an expression may call besides root, which binds a name
// and so is no ordinary function.
var functions = []function{
	{"sqrt", 1, halved},
	{"ln", 1, plain},
	{"log10", 1, plain},
	{"exp", 1, plain},
	{"abs", 1, same},
	{"min", 2, same},
	{"max", 2, same},
	{"sin", 1, plain},
	{"cos", 1, plain},
	{"atan", 1, plain},
	{"parallel", 2, same},
	{"bessel_i0_scaled", 1, plain},
	{"bessel_i1_scaled", 1, plain},
}

const rootFunction = "root"

// Functions are the names that may be called, root last.
func Functions() []string {
	names := make([]string, 0, len(functions)+1)
	for _, f := range functions {
		names = append(names, f.name)
	}
	return append(names, rootFunction)
}

func functionNamed(name string) (function, bool) {
	for _, f := range functions {
		if f.name == name {
			return f, true
		}
	}
	return function{}, false
}
