package exact

import (
	"cmp"
	"slices"
)

// Widths of the beams that look for a good choice, one after the other while
// they find better ones; and how many full choices of each are looked at.
var beamWidths = [...]int{32, 256}

const beamLeaves = 24

// A beamNode is a partial choice in a beam.
type beamNode struct {
	at      *standing
	settled []int // kept options, by line
}

// A step is a way to extend one of a beam's partial choices.
type step struct {
	bound    float64
	node, on int
}

// beam settles line after line and keeps only the width most promising
// partial choices, those with the least bound, each time. It returns the full
// choices at its end in the problem's indexes. It proves nothing; what it
// finds becomes the ceiling of the search.
func (b *bank) beam(width int, ceiling int64) [][]int {
	first := beamNode{b.newStanding(), make([]int, len(b.order))}
	b.stand(first.at, first.settled, 0)
	nodes := []beamNode{first}
	for depth := range b.order {
		nodes = b.extend(nodes, depth, width, b.below(ceiling))
	}
	var out [][]int
	for _, n := range nodes[:min(len(nodes), beamLeaves)] {
		choice := make([]int, len(n.settled))
		for i, o := range n.settled {
			choice[i] = b.kept[i][o]
		}
		out = append(out, choice)
	}
	return out
}

// extend settles the line at depth in every node and keeps the best width.
func (b *bank) extend(nodes []beamNode, depth, width int, ceiling float64) []beamNode {
	var steps []step
	for n, node := range nodes {
		for o := range b.kept[b.order[depth]] {
			if bound := b.bound(node.at, depth, o, ceiling); bound <= ceiling {
				steps = append(steps, step{bound, n, o})
			}
		}
	}
	slices.SortStableFunc(steps, func(x, y step) int { return cmp.Compare(x.bound, y.bound) })
	var out []beamNode
	for _, s := range steps[:min(len(steps), width)] {
		next := beamNode{b.newStanding(), slices.Clone(nodes[s.node].settled)}
		next.settled[b.order[depth]] = s.on
		b.take(next.at, nodes[s.node].at, depth, s.on)
		out = append(out, next)
	}
	return out
}
