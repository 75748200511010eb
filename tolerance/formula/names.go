package formula

import "slices"

// Names lists what an expression names, once each and in order of appearance:
// everything but functions and the unknowns of its roots.
func (e *Expression) Names() []string {
	var names []string
	appear(e.Root, nil, func(name string) {
		if !slices.Contains(names, name) {
			names = append(names, name)
		}
	})
	return names
}

// appear visits the names in a node; bound are the unknowns known there.
func appear(n Node, bound []string, visit func(name string)) {
	switch n := n.(type) {
	case *Name:
		if !slices.Contains(bound, n.Name) {
			visit(n.Name)
		}
	case *Root:
		appear(n.Low, bound, visit)
		appear(n.High, bound, visit)
		appear(n.Residual, append(slices.Clip(bound), n.Unknown), visit)
	default:
		for _, child := range children(n) {
			appear(child, bound, visit)
		}
	}
}

// children are the operands of a node that binds no name.
func children(n Node) []Node {
	switch n := n.(type) {
	case *Unary:
		return []Node{n.X}
	case *Binary:
		return []Node{n.X, n.Y}
	case *Compare:
		return []Node{n.X, n.Y}
	case *Conditional:
		return []Node{n.If, n.Then, n.Else}
	case *Call:
		return n.Arguments
	}
	return nil
}

// Reserved says whether a name is a function's or a constant's, so that an
// equation could not tell it from one of the user's own.
func Reserved(name string) bool {
	_, constant := ConstantNamed(name)
	return constant || slices.Contains(Functions(), name)
}
