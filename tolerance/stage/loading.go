package stage

// Loading says in words how an instrument at the point loads it: "its
// capacitance joins the node; resistance damps it without moving it".
func (p Point) Loading() string {
	what := ""
	switch {
	case p.Conductance != "" && p.Capacitance != "":
		what = "its resistance and capacitance join the node"
	case p.Conductance != "":
		what = "its resistance joins the node"
	case p.Capacitance != "":
		what = "its capacitance joins the node"
	}
	if what != "" && p.Stiff != "" {
		what += "; "
	}
	return what + p.Stiff
}
