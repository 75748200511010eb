package spread

// Finding is something a stage does at a condition that its user must not
// miss, such as clipping. Share is that of the units, of all simulated, on
// which it happens; units in which a trim that it depends on did not reach are
// not among them, and are UntrimmedShare.
type Finding struct {
	Stage          string    `json:"stage"`
	Finding        string    `json:"finding"` // the kind's equation
	Condition      string    `json:"condition"`
	Share          Figure    `json:"share"`
	Interval       [2]Figure `json:"interval"`
	UntrimmedShare Figure    `json:"untrimmed_share"`
	Text           string    `json:"text"` // what happens; what to do
}

// batchCount is in how many units of a batch something happens.
type batchCount struct{ batch, units int }

// addFindings counts the units of a block in which each finding happens.
func (w *worker) addFindings(j *job, out [][]float64, first, width int) {
	m := w.nodes.model
	for k, index := range w.nodes.findings {
		x := out[w.nodes.happen+k]
		keep := w.keepReached(m.Findings[index].Trims, width)
		for i := range keep {
			switch {
			case !keep[i]:
				j.untrimmed[k]++
			case x[i] > 0:
				j.happened[k] = counted(j.happened[k], (first+i)/m.Build.Units)
			}
		}
	}
}

// counted adds a unit to the last batch of a list, or a batch to the list.
func counted(list []batchCount, batch int) []batchCount {
	if n := len(list); n > 0 && list[n-1].batch == batch {
		list[n-1].units++
		return list
	}
	return append(list, batchCount{batch, 1})
}

// mergeFindings adds a run's counts, whose first and last batch may be other
// runs' too.
func (s *sample) mergeFindings(j job) {
	for k, list := range j.happened {
		if len(list) > 0 && s.happened[k] == nil {
			s.happened[k] = make([]int, s.batches)
		}
		for _, c := range list {
			s.happened[k][c.batch] += c.units
		}
		s.untrimmed[k] += j.untrimmed[k]
	}
}

// findings reports what happens in some unit, by stage, finding and condition.
func (s *sample) findings() []Finding {
	var list []Finding
	m := s.nodes.model
	for i, f := range m.Findings {
		k := s.nodes.happenAt[i]
		if s.happened[k] == nil {
			continue
		}
		share, low, high := ShareInterval(s.happened[k], m.Build.Units, Confidence)
		kind := f.Stage.Kind.Findings[f.Index]
		list = append(list, Finding{
			Stage: f.Stage.Name, Finding: kind.Equation, Condition: m.Build.Conditions[f.Condition].Name,
			Share: Figure(share), Interval: [2]Figure{Figure(low), Figure(high)},
			UntrimmedShare: Figure(float64(s.untrimmed[k]) / float64(s.units)), Text: kind.Text,
		})
	}
	return list
}
