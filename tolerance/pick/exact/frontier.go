package exact

import (
	"math"
	"math/bits"
)

// A node is a partial choice: the first depth lines in search order are
// settled, the last of them to option; the rest stands in its parents. A full
// choice comes back once more, one deeper, when its exact cost is known.
type node struct {
	key    int64  // no completion costs less
	first  uint64 // packed start of the least completion in lexicographic order
	parent int32
	option uint16 // index into the kept options of its line
	depth  uint16
}

const nobody = -1

// A frontier keeps all nodes ever pushed and a heap of those still open,
// ordered by key, then by the least completion, deeper ones first. As both
// are bounds on everything below a node, the first full choice to come out
// with its exact cost is the cheapest and of the cheapest the first.
type frontier struct {
	nodes  []node
	heap   []int32
	lines  int
	order  []int   // search depth -> line
	kept   [][]int // line -> problem's option indexes, ascending
	shift  []uint  // line -> place in the packed start
	packed int     // lines that fit in it
	a, b   []int   // scratch of less
}

func newFrontier(order []int, kept [][]int) *frontier {
	f := &frontier{lines: len(order), order: order, kept: kept}
	f.a, f.b = make([]int, f.lines), make([]int, f.lines)
	f.shift = make([]uint, f.lines)
	place := uint(64)
	for i, options := range kept {
		width := uint(bits.Len(uint(options[len(options)-1])))
		if width > place {
			break
		}
		place -= width
		f.shift[i] = place
		f.packed++
	}
	return f
}

// root is the node with nothing settled.
func (f *frontier) root(key int64) node {
	n := node{key: key, parent: nobody}
	for i := range f.packed {
		n.first |= uint64(f.kept[i][0]) << f.shift[i]
	}
	return n
}

// child settles the next line of the open node at to kept option o.
func (f *frontier) child(at int32, o int, key int64) node {
	parent := &f.nodes[at]
	i := f.order[parent.depth]
	n := node{key: key, first: parent.first, parent: at, option: uint16(o), depth: parent.depth + 1}
	if i < f.packed {
		n.first += uint64(f.kept[i][o]-f.kept[i][0]) << f.shift[i]
	}
	return n
}

// priced is a full choice with its exact cost.
func (f *frontier) priced(at int32, cost int64) node {
	n := f.nodes[at]
	n.key, n.parent, n.depth = cost, at, n.depth+1
	return n
}

// settled writes the kept options settled on the way to a node, by line, -1
// where none.
func (f *frontier) settled(dst []int, at int32) {
	for i := range dst {
		dst[i] = -1
	}
	for at != nobody {
		n := &f.nodes[at]
		if n.depth > 0 && int(n.depth) <= f.lines {
			dst[f.order[n.depth-1]] = int(n.option)
		}
		at = n.parent
	}
}

// least writes the least completion of a node in the problem's indexes.
func (f *frontier) least(dst []int, at int32) {
	f.settled(dst, at)
	for i, o := range dst {
		dst[i] = f.kept[i][max(o, 0)]
	}
}

func (f *frontier) less(x, y int32) bool {
	a, b := &f.nodes[x], &f.nodes[y]
	if a.key != b.key {
		return a.key < b.key
	}
	if a.first != b.first {
		return a.first < b.first
	}
	if f.packed < f.lines {
		f.least(f.a, x)
		f.least(f.b, y)
		for i := range f.a {
			if f.a[i] != f.b[i] {
				return f.a[i] < f.b[i]
			}
		}
	}
	if a.depth != b.depth {
		return a.depth > b.depth
	}
	return x < y
}

// room says whether n more nodes stay within the limit.
func (f *frontier) room(n, limit int) bool {
	return len(f.nodes)+n <= min(limit, math.MaxInt32)
}

func (f *frontier) push(n node) {
	f.nodes = append(f.nodes, n)
	f.heap = append(f.heap, int32(len(f.nodes)-1))
	i := len(f.heap) - 1
	for i > 0 {
		up := (i - 1) / 2
		if !f.less(f.heap[i], f.heap[up]) {
			break
		}
		f.heap[i], f.heap[up] = f.heap[up], f.heap[i]
		i = up
	}
}

func (f *frontier) pop() int32 {
	top, last := f.heap[0], len(f.heap)-1
	f.heap[0] = f.heap[last]
	f.heap = f.heap[:last]
	for i := 0; ; {
		down := 2*i + 1
		if down >= last {
			break
		}
		if down+1 < last && f.less(f.heap[down+1], f.heap[down]) {
			down++
		}
		if !f.less(f.heap[down], f.heap[i]) {
			break
		}
		f.heap[i], f.heap[down] = f.heap[down], f.heap[i]
		i = down
	}
	return top
}
