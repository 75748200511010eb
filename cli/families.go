package cli

import (
	"github.com/urfave/cli/v2"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

func (p *program) familiesCommand() *cli.Command {
	return &cli.Command{
		Name:      "families",
		Usage:     "the part families a build file can name; with NAME, every figure of one",
		ArgsUsage: "[NAME]",
		Description: `Lists the embedded families, or prints one family's grades, values, scatter and
where each figure comes from. Figures are typical of their class and nobody's
guarantee.

  batchwright families
  batchwright families polystyrene`,
		Flags:  []cli.Flag{jsonFlag()},
		Action: p.families,
	}
}

func (p *program) families(c *cli.Context) error {
	name, err := argument(c, "family", true)
	if err != nil {
		return err
	}
	all := part.Embedded()
	if name == "" {
		return p.familyList(all, c.Bool("json"))
	}
	f, ok := all.Family(name)
	if !ok {
		return unknownWord("family", name, all.Names())
	}
	if c.Bool("json") {
		return p.json(describeFamily(f))
	}
	p.showFamily(describeFamily(f), f)
	return nil
}

// familyEntry is a family in the list.
type familyEntry struct {
	Name  string `json:"name"`
	Part  string `json:"part"`
	Title string `json:"title"`
}

func (p *program) familyList(all *part.Catalogue, asJSON bool) error {
	list := []familyEntry{}
	for _, name := range all.Names() {
		f, _ := all.Family(name)
		list = append(list, familyEntry{f.Name, string(f.Type), f.Title})
	}
	if asJSON {
		return p.json(map[string][]familyEntry{"families": list})
	}
	p.showFamilies(list)
	return nil
}

// familyText is a family as `families NAME --json` prints it: SI base units,
// fractions not percent.
type familyText struct {
	familyEntry
	Grades       []gradeText  `json:"grades"`
	Values       *rangeText   `json:"values"` // null where its parts have no value to choose
	Figures      []figureText `json:"figures"`
	Voltage      *float64     `json:"voltage"` // null where nothing is said
	Temperatures *rangeText   `json:"temperatures"`
	Size         string       `json:"size,omitempty"` // of the body, in words
	Source       string       `json:"source"`
	Note         string       `json:"note,omitempty"`
}

type gradeText struct {
	Tolerance float64 `json:"tolerance"`
	Series    string  `json:"series,omitempty"`
}

type rangeText struct {
	Low  float64 `json:"low"`
	High float64 `json:"high"`
}

// figureText is one figure of a family's parts; Value is null for the one they
// are bought by, and Tolerance where the grade decides it.
type figureText struct {
	Figure      string       `json:"figure"`
	Unit        string       `json:"unit"`
	Value       *float64     `json:"value"`
	Tolerance   *float64     `json:"tolerance"`
	Absolute    bool         `json:"absolute"` // the tolerance is in Unit, not a fraction
	Shape       string       `json:"shape"`
	Temperature spreadText   `json:"temperature_coefficient"`
	Humidity    spreadText   `json:"humidity_coefficient"`
	Ageing      ageingText   `json:"ageing"`
	Correlation lotText      `json:"correlation"`
	Law         [][3]float64 `json:"temperature_law,omitempty"` // °C, lowest, highest change
	Bias        [][3]float64 `json:"bias_law,omitempty"`        // share of the rated voltage, lowest, highest change
}

type spreadText struct {
	Value  float64 `json:"value"`
	Spread float64 `json:"spread"`
}

type ageingText struct {
	spreadText
	Per string `json:"per"`
}

type lotText struct {
	Value       float64 `json:"value"`
	Temperature float64 `json:"temperature"`
}

// describeFamily says everything that is known of a family.
func describeFamily(f *part.Family) familyText {
	t := familyText{
		familyEntry: familyEntry{f.Name, string(f.Type), f.Title},
		Grades:      []gradeText{}, Figures: []figureText{}, Size: f.Size, Source: f.Source, Note: f.Note,
	}
	for _, g := range f.Grades {
		t.Grades = append(t.Grades, gradeText(g))
	}
	if f.HasValue() {
		t.Values = &rangeText{f.Low, f.High}
		t.Figures = append(t.Figures, describeFigure(boughtBy(f.Type), f.Type.Unit(), nil, f.Scatter, true))
	}
	for _, q := range f.Parameters {
		value := &q.Value
		if f.HasValue() && q.Name == "low" {
			value = nil
		}
		t.Figures = append(t.Figures, describeFigure(q.Name, q.Unit, value, q.Scatter, q.Tolerance == part.GradeTolerance))
	}
	if f.Voltage != 0 {
		t.Voltage = &f.Voltage
	}
	if f.MinCelsius != 0 || f.MaxCelsius != 0 {
		t.Temperatures = &rangeText{f.MinCelsius, f.MaxCelsius}
	}
	return t
}

// boughtBy names the figure that a value in a build file is.
func boughtBy(t part.Type) string {
	if t.Trimmer() {
		return "high"
	}
	return t.Parameters()[0].Name
}

func describeFigure(name string, unit quantity.Unit, value *float64, s part.Scatter, byGrade bool) figureText {
	t := figureText{
		Figure: name, Unit: unit.Symbol, Value: value, Absolute: s.Absolute && !byGrade, Shape: string(shape(s)),
		Temperature: spreadText(s.Temperature), Humidity: spreadText(s.Humidity),
		Ageing:      ageingText{spreadText(s.Ageing.Spread), string(s.Ageing.Per)},
		Correlation: lotText(s.Correlation),
	}
	if !byGrade {
		t.Tolerance = &s.Tolerance
	}
	for _, l := range s.Law {
		t.Law = append(t.Law, [3]float64{l.Celsius, l.Low, l.High})
	}
	for _, l := range s.Bias {
		t.Bias = append(t.Bias, [3]float64{l.Share, l.Low, l.High})
	}
	return t
}

// shape reads the zero value as what it stands for.
func shape(s part.Scatter) part.Shape {
	if s.Shape == "" {
		return part.Normal
	}
	return s.Shape
}
