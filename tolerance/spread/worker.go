package spread

import (
	"math"

	"batchwright/tolerance/scatter"
)

// worker simulates blocks of units with memory of its own.
type worker struct {
	*sample
	source   scatter.Source
	columns  *columns
	reached  [][]bool // [trim][lane]
	keep     []bool
	good     []bool
	outputs  []*Histogram
	settings []*Histogram
	points   []*Histogram
}

func (s *sample) newWorker(source scatter.Source) *worker {
	w := &worker{
		sample: s, source: source, columns: s.nodes.newColumns(lanes),
		keep: make([]bool, lanes), good: make([]bool, lanes),
		outputs: emptied(s.outputs), settings: emptied(s.settings), points: emptied(s.points),
	}
	w.reached = make([][]bool, len(s.nodes.model.Trims))
	for _, t := range s.nodes.trims {
		w.reached[t] = make([]bool, lanes)
	}
	return w
}

// emptied makes a histogram about the same centre for each summary.
func emptied(list []summary) []*Histogram {
	out := make([]*Histogram, len(list))
	for i, s := range list {
		out[i] = NewHistogram(s.centre)
	}
	return out
}

func (w *worker) mergeHistograms(s *sample) {
	for i, h := range w.outputs {
		s.outputs[i].histogram.Merge(h)
	}
	for i, h := range w.settings {
		s.settings[i].histogram.Merge(h)
	}
	for i, h := range w.points {
		s.points[i].histogram.Merge(h)
	}
}

// job simulates one run of units from the first.
func (w *worker) job(first int) job {
	j := job{
		outputs:  make([]Moments, len(w.outputs)),
		settings: make([]Moments, len(w.settings)),
		points:   make([]Moments, len(w.points)),
		short:    make([][2]int, len(w.settings)), near: make([][2]int, len(w.settings)),
		happened: make([][]batchCount, len(w.nodes.findings)), untrimmed: make([]int, len(w.nodes.findings)),
	}
	for block := first; block < min(first+run, w.sample.units); block += lanes {
		w.block(&j, block, min(lanes, w.sample.units-block))
	}
	return j
}

// block simulates width units from the first and adds them up.
func (w *worker) block(j *job, first, width int) {
	in, out := w.columns.cut(width)
	for _, i := range w.nodes.program.Inputs() {
		w.source.Fill(in[i], w.nodes.model.Inputs[i].Column, first)
	}
	w.nodes.program.Values(out, in, w.columns.frame)
	w.addTrims(j, out, width)
	w.judge(out, first, width)
	for i := range w.outputs {
		trims := w.nodes.model.Outputs[w.nodes.outputs[i]].Trims
		keep := w.keepReached(trims, width)
		w.add(&j.outputs[i], w.outputs[i], out[i], keep)
		if values := w.values[i]; values != nil {
			keepValues(values[first:first+width], out[i], keep)
		}
	}
	for i := range w.points {
		copy(w.keep, w.good[:width])
		w.add(&j.points[i], w.points[i], out[w.nodes.points+i], w.keep[:width])
	}
	w.addFindings(j, out, first, width)
}

// keepValues copies the lanes kept; the others become NaN.
func keepValues(dst, x []float64, keep []bool) {
	for i := range dst {
		dst[i] = math.NaN()
		if keep[i] {
			dst[i] = x[i]
		}
	}
}

// add adds the lanes kept to a column's sums, which count what is not finite
// apart.
func (w *worker) add(m *Moments, h *Histogram, x []float64, keep []bool) {
	m.AddColumn(x, keep)
	h.AddColumn(x, keep)
}

// keepReached marks the lanes whose trims all reached.
func (w *worker) keepReached(trims []int, width int) []bool {
	keep := w.keep[:width]
	for i := range keep {
		keep[i] = true
	}
	for _, t := range trims {
		for i := range keep {
			keep[i] = keep[i] && w.reached[t][i]
		}
	}
	return keep
}

// addTrims notes which trims reached and where their settings ended.
func (w *worker) addTrims(j *job, out [][]float64, width int) {
	for k, t := range w.nodes.trims {
		column := w.nodes.trimColumn(k)
		low, high := out[column+1], out[column+2]
		for i := range width {
			w.reached[t][i] = reached(low[i], high[i])
			if !w.reached[t][i] {
				j.short[k][(shortSide(low[i], high[i])+1)/2]++
			}
		}
		earlier := append([]int{t}, w.nodes.model.Trims[t].Trims...)
		keep := w.keepReached(earlier, width)
		w.add(&j.settings[k], w.settings[k], out[column], keep)
		addNear(&j.near[k], out[column], keep)
	}
}

// NearEnd is how close to an end of its travel, of 1, a trimmer is called near it.
const NearEnd = 0.1

// addNear counts the lanes kept whose settings are near 0 and near 1.
func addNear(near *[2]int, settings []float64, keep []bool) {
	for i, x := range settings {
		switch {
		case !keep[i]:
		case x <= NearEnd:
			near[0]++
		case x >= 1-NearEnd:
			near[1]++
		}
	}
}

// judge marks which units meet each target, and which meet all.
func (w *worker) judge(out [][]float64, first, width int) {
	good := w.good[:width]
	for i := range good {
		good[i] = true
	}
	for k, t := range w.nodes.targets {
		comply := w.comply[k][first : first+width]
		w.judgeTarget(t, out, comply)
		for i := range good {
			good[i] = good[i] && comply[i]
		}
	}
	copy(w.sample.good[first:first+width], good)
}

// judgeTarget marks the units that meet one target: the trims it depends on
// reached and, at each condition, the output within limits.
func (w *worker) judgeTarget(t int, out [][]float64, comply []bool) {
	m := w.nodes.model
	target := m.Build.Targets[t]
	if target.Trim >= 0 {
		earlier := append([]int{target.Trim}, m.Trims[target.Trim].Trims...)
		copy(comply, w.keepReached(earlier, len(comply)))
		return
	}
	for i := range comply {
		comply[i] = true
	}
	for _, index := range m.Targets[t].Outputs {
		x := out[w.nodes.columnOf[index]]
		keep := w.keepReached(m.Outputs[index].Trims, len(comply))
		for i := range comply {
			comply[i] = comply[i] && keep[i] && x[i] >= target.Low && x[i] <= target.High
		}
	}
}
