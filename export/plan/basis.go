package plan

import (
	"fmt"
	"math"
	"runtime"
	"strings"

	"batchwright/bom/quantity"
	"batchwright/export/workbook"
	"batchwright/tolerance/build"
)

// basis is what the figures rest on, beside what the workbook says by itself:
// file, digest, seed, sizes and how the limits of its test sheet are made.
func basis(w Work) []workbook.Basis {
	list := []workbook.Basis{
		{Heading: "Versions", Text: fmt.Sprintf("batchwright %s, %s. Same input, seed and version: same workbook.", w.Version, runtime.Version())},
		prices(w),
	}
	list = append(list, semantics...)
	list = append(list, instruments(w.Build)...)
	list = append(list, kinds(w.Build)...)
	return append(list, families(w.Build)...)
}

// prices says whose prices the order is at.
func prices(w Work) workbook.Basis {
	text := fmt.Sprintf("Price book %s; %d %% spares on every line.", w.Order.Book, w.Order.SparesPercent)
	if note := PriceNote(w.Order); note != "" {
		text += " " + strings.ToUpper(note[:1]) + note[1:] + "."
	}
	return workbook.Basis{Heading: "Prices", Text: text}
}

// semantics is how values scatter and how the figures come about.
var semantics = []workbook.Basis{
	{Heading: "Value of a part", Text: "nominal · (1 + tolerance·z) · (1 + α·Δ) · (1 + η·(humidity − 50 %)) · (1 + a·g(age)); Δ is the part's temperature less 25 °C. α, η and a scatter about their own nominal values. Every z lies between −1 and 1."},
	{Heading: "Shapes of z", Text: "Normal: standard deviation one third, cut off at ±1. Uniform. Triangular. Bimodal: uniform over one half to one on either side, the middle sorted out."},
	{Heading: "Lots", Text: "Pieces bought on one line share a lot across the whole batch and resemble each other by the family's correlations (Gaussian copula): one for the value, one for what temperature, humidity and age do to it."},
	{Heading: "Trims", Text: "Trims are solved in order on every unit, each left wrong by a uniform error of ±within in its output. A unit whose trim does not reach is a failed unit."},
	{Heading: "Worst case", Text: "Every z anywhere in −1 to 1 independently, trims solved again at each point. What is given is the worst point that was found and how it was searched."},
	{Heading: "Standard uncertainty", Text: "First-order propagation with the correlation within lots, trims included.", Source: "JCGM 100:2008, 5.2"},
	{Heading: "Simulation", Text: "Whole batches, each with lots of its own. Every draw is a hash of seed, batch, unit and parameter, so any unit can be drawn again alone. Intervals are at 95 % confidence and respect the batches."},
}

// instruments says what each instrument used is taken to be.
func instruments(b *build.Build) []workbook.Basis {
	used := map[string]bool{}
	for _, s := range b.Stages {
		for _, p := range s.Kind.Points {
			used[p.Instrument] = true
		}
	}
	var list []workbook.Basis
	for _, i := range b.Instruments {
		if used[i.Name] {
			list = append(list, workbook.Basis{Heading: "Instrument " + i.Name, Text: instrument(b, i),
				Source: "typical of its class unless the build file says otherwise"})
		}
	}
	return list
}

func instrument(b *build.Build, i build.Instrument) string {
	resistance, capacitance := b.Load(i)
	var words []string
	if resistance > 0 && !math.IsInf(resistance, 0) {
		words = append(words, "loads with "+quantity.Format(resistance, quantity.Ohm, 0))
	}
	if capacitance > 0 {
		words = append(words, quantity.Format(capacitance, quantity.Farad, 0))
	}
	words = append(words, "accuracy "+relative(i.Accuracy)+" of reading")
	if i.Floor > 0 {
		words = append(words, fmt.Sprintf("and %g in the reading's unit", i.Floor))
	}
	if i.MinimumLevel > 0 {
		words = append(words, "needs a peak of "+quantity.Format(i.MinimumLevel, quantity.Volt, 0))
	}
	if i.Through != "" {
		words = append(words, "through the "+i.Through)
	}
	return strings.Join(words, ", ") + "."
}

// relative writes an accuracy in the unit people use for one of its size.
func relative(x float64) string {
	if x < 0.0005 {
		return quantity.Format(x, quantity.PPM, 0)
	}
	return quantity.Format(x, quantity.Percent, 0)
}

// kinds names the source of every kind's equations.
func kinds(b *build.Build) []workbook.Basis {
	var list []workbook.Basis
	seen := map[string]bool{}
	for _, s := range b.Stages {
		if k := s.Kind; !seen[k.Name] {
			seen[k.Name] = true
			list = append(list, workbook.Basis{Heading: "Kind " + k.Name, Text: k.Summary + ". " + k.Limits, Source: k.Source})
		}
	}
	return list
}

// families names the source of every family's figures.
func families(b *build.Build) []workbook.Basis {
	var list []workbook.Basis
	seen := map[string]bool{"": true}
	for _, p := range b.Parts() {
		f, ok := b.Families.Family(p.Family)
		if !ok || seen[p.Family] {
			continue
		}
		seen[p.Family] = true
		list = append(list, workbook.Basis{
			Heading: "Family " + f.Name, Text: strings.TrimSpace(f.Title + ". Typical of its class, not a guarantee. " + f.Note), Source: f.Source,
		})
	}
	return list
}
