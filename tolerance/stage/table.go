package stage

import (
	"slices"
	"sync"

	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
)

// table holds every kind, oscillators first, in the order of a signal's way.
var table = register(
	&colpitts, &clapp, &hartley, &tunedTank,
	&wienBridge, &phaseShift, &schmittRC, &timerAstable, &crystalOscillator,
	&multiplier, &junctionMixer, &gateMixer, &diodeRing,
	&opampNoninverting, &opampInverting, &commonEmitter, &emitterFollower, &powerAmp,
	&envelopeDetector, &levelTank,
	&rcLowpass, &rcHighpass, &sallenKeyLowpass, &lcLowpass, &coupling,
	&divider, &shuntZener, &fixedRegulator, &adjustableRegulator, &railDecoupling,
	&freeFormula,
)

// register gives each kind its parsed equations, made when first asked for.
func register(kinds ...*Kind) []*Kind {
	for _, k := range kinds {
		k.parsed = sync.OnceValue(k.parse)
	}
	return kinds
}

// rise is the setting that every kind has.
var rise = Setting{Name: "rise", Unit: quantity.Kelvin, Default: "0 K",
	Summary: "how far the stage's parts are above ambient when warmed up"}

// Find finds a kind by name.
func Find(name string) (*Kind, bool) {
	for _, k := range table {
		if k.Name == name {
			return k, true
		}
	}
	return nil, false
}

// Names lists the kinds in the order of a signal's way.
func Names() []string {
	names := make([]string, len(table))
	for i, k := range table {
		names[i] = k.Name
	}
	return names
}

// AllSettings are the kind's own settings and the one that every kind has.
func (k *Kind) AllSettings() []Setting { return append(slices.Clip(k.Settings), rise) }

// EquationList is the kind's equations, parsed; do not change it. Equations
// that do not parse are a mistake of this package and panic.
func (k *Kind) EquationList() []formula.Equation {
	if k.parsed == nil {
		return k.parse()
	}
	return k.parsed()
}

func (k *Kind) parse() []formula.Equation {
	list, mistakes := formula.ParseEquations(k.Equations)
	if len(mistakes) > 0 {
		panic("stage: equations of " + k.Name + ": " + mistakes[0].Message + " " + mistakes[0].Found)
	}
	return list
}
