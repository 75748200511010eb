package build

import "batchwright/tolerance/tape"

// compileSamples makes, for every target on an output, a node for each
// condition but the reference: the reading there of the point that reads the
// output, or the output itself where no point does.
func (c *compiler) compileSamples(settings []tape.Ref) {
	environments := map[int]*environment{} // loaded, by point and condition
	for t, target := range c.Build.Targets {
		if target.Trim >= 0 {
			continue
		}
		point := c.pointOf(target.Output)
		for k, condition := range target.At {
			if condition == 0 && target.ChangeFrom <= 0 {
				continue // the bench is there
			}
			s := Sample{Target: t, Condition: condition, Point: point, Unloaded: c.Outputs[c.Targets[t].Outputs[k]].Node}
			s.Loaded = s.Unloaded
			if point >= 0 {
				s.Loaded = c.readingAt(environments, settings, point, condition)
				if target.ChangeFrom >= 0 {
					s.Loaded = c.Graph.Sub(s.Loaded, c.readingAt(environments, settings, point, target.ChangeFrom))
				}
			}
			c.Samples = append(c.Samples, s)
		}
	}
}

// pointOf is the point that reads an output; -1 where none does.
func (c *compiler) pointOf(name OutputName) int {
	for i, p := range c.Points {
		if p.Stage.Name == name.Stage && p.Stage.Kind.Points[p.Index].Name == name.Output {
			return i
		}
	}
	return -1
}

// readingAt is a point's loaded reading at a condition.
func (c *compiler) readingAt(made map[int]*environment, settings []tape.Ref, point, condition int) tape.Ref {
	p := c.Points[point]
	key := point*len(c.Build.Conditions) + condition
	if made[key] == nil {
		made[key] = c.loadedEnvironment(condition, settings, p.Stage, p.Index, p.Instrument)
	}
	return c.equation(made[key], p.Stage, p.Stage.Kind.Points[p.Index].Name)
}
