package build

import (
	"batchwright/bom/document"
	"batchwright/tolerance/stage"
)

// stageNode is a stage and the text it is read from.
type stageNode struct {
	*Stage
	node *document.Node
}

// readStages reads every stage: names and kinds first, so that any stage may
// be referred to, then what is in them.
func (r *reader) readStages(n *document.Node) {
	if n == nil {
		return
	}
	if n.Kind != document.Mapping || len(n.Pairs) == 0 {
		r.Add(n, "stages", "a mapping of names to stages, in signal order")
		return
	}
	for _, p := range n.Pairs {
		r.readKind(p)
	}
	for _, s := range r.stages {
		if s.Kind.Free {
			r.readFormulaStage(s)
		} else {
			r.readStage(s)
		}
	}
	r.resolveShared()
	r.settleUnits()
	r.checkReferences()
	r.checkAcross()
	r.checkFittings()
	r.checkGeometries()
	r.checkFormulas()
	r.checkCycles()
}

// readKind reads a stage's name and kind.
func (r *reader) readKind(p document.Pair) {
	name := p.Key.Value
	if !identifier.MatchString(name) {
		r.Add(p.Key, "stage's name", "a letter, then letters, digits and _, so that equations can name it")
	}
	if r.build.variable(name) >= 0 {
		r.Add(p.Key, "stage's name", "a name that no condition's variable has")
	}
	if p.Value.Kind != document.Mapping {
		r.Add(p.Value, "stage", "a mapping with a kind")
		r.broken[name] = true
		return
	}
	n := p.Value.Get("kind")
	if n == nil {
		r.Add(p.Key, "stage without a kind", "kind: and one of the kinds")
		r.broken[name] = true
		return
	}
	word, ok := r.Word(n, "a kind", stage.Names()...)
	if !ok {
		r.broken[name] = true
		return
	}
	kind, _ := stage.Find(word)
	s := &Stage{Name: name, Kind: kind, Outputs: kind.Outputs}
	r.stages = append(r.stages, stageNode{s, p.Value})
	r.build.Stages = append(r.build.Stages, s)
}

// readStage reads a stage of a built-in kind.
func (r *reader) readStage(s stageNode) {
	r.Keys(s.node, "kind", "in", "settings", "parts")
	r.readWires(s)
	r.readSettings(s)
	r.readPlaces(s)
}

// readWires reads where a stage's inputs come from: `in: STAGE` where the kind
// has one input, `in: {input: STAGE}` where it has more.
func (r *reader) readWires(s stageNode) {
	n := s.node.Get("in")
	switch {
	case len(s.Kind.Inputs) == 0:
		if n != nil {
			r.Add(n, "input", "none: "+s.Kind.Name+" takes no signal")
		}
	case n == nil:
		for _, i := range s.Kind.Inputs {
			if !i.Optional {
				r.Add(s.node, "missing key in", "the stage that feeds "+s.Name)
				return
			}
		}
	case n.Kind == document.Scalar && len(s.Kind.Inputs) == 1:
		r.readWire(s, s.Kind.Inputs[0].Name, n)
	default:
		r.readWireTable(s, n)
	}
}

func (r *reader) readWireTable(s stageNode, n *document.Node) {
	var names []string
	for _, i := range s.Kind.Inputs {
		names = append(names, i.Name)
	}
	if !r.Keys(n, names...) && n.Kind != document.Mapping {
		return
	}
	for _, i := range s.Kind.Inputs {
		if v := n.Get(i.Name); v != nil {
			r.readWire(s, i.Name, v)
		} else if !i.Optional {
			r.Add(n, "missing input "+i.Name, "the stage that feeds it")
		}
	}
}

func (r *reader) readWire(s stageNode, input string, n *document.Node) {
	if from, ok := r.Word(n, "a stage", r.stageNames()...); ok && !r.broken[from] {
		s.Wires = append(s.Wires, Wire{input, from})
	}
}

func (r *reader) stageNames() []string {
	var names []string
	for _, p := range r.root.Get("stages").Pairs {
		names = append(names, p.Key.Value)
	}
	return names
}
