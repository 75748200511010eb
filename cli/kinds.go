package cli

import (
	"strings"

	"github.com/urfave/cli/v2"

	"batchwright/tolerance/stage"
)

func (p *program) kindsCommand() *cli.Command {
	return &cli.Command{
		Name:      "kinds",
		Usage:     "the kinds of stage a build file can name; with NAME, all about one",
		ArgsUsage: "[NAME]",
		Description: `Lists the kinds, or prints of one kind a drawing, its roles, inputs, settings,
outputs, test points and equations, and what to write in a build file. In the
drawing [roles] must be filled, (roles) may be; the equations printed are the
ones that run. The shapes, by which settings and coils can be given, are listed
below and printed likewise.

A resistor, a capacitor or a coil may be two pieces, in parallel or in series,
and C6 is then C6A and C6B; choose takes combine: [single, parallel, series]:

  tank: {ref: C6, parallel: [{value: 180 pF, family: c0g}, {value: 39 pF, family: c0g}]}

  batchwright kinds
  batchwright kinds colpitts
  batchwright kinds rod`,
		Flags:  []cli.Flag{jsonFlag()},
		Action: p.kinds,
	}
}

func (p *program) kinds(c *cli.Context) error {
	name, err := argument(c, "kind", true)
	if err != nil {
		return err
	}
	if name == "" {
		return p.kindList(c.Bool("json"))
	}
	k, ok := stage.Find(name)
	if !ok {
		return p.shape(name, c.Bool("json"))
	}
	if c.Bool("json") {
		return p.json(describeKind(k))
	}
	p.showKind(k)
	return nil
}

// named is an entry of a list.
type named struct {
	Name    string `json:"name"`
	Summary string `json:"summary"`
}

func (p *program) kindList(asJSON bool) error {
	list := []named{}
	for _, name := range stage.Names() {
		k, _ := stage.Find(name)
		list = append(list, named{k.Name, k.Summary})
	}
	if asJSON {
		return p.json(map[string][]named{"kinds": list, "shapes": shapeList()})
	}
	p.showList(list)
	p.showShapeList()
	return nil
}

// kindText is a kind as `kinds NAME --json` prints it.
type kindText struct {
	named
	Sketch    string        `json:"sketch"`
	Roles     []roleText    `json:"roles"`
	Inputs    []inputText   `json:"inputs"`
	Settings  []settingText `json:"settings"`
	Outputs   []outputText  `json:"outputs"`
	Points    []pointText   `json:"points"`
	Findings  []findingText `json:"findings"`
	Equations []string      `json:"equations"`
	Fragment  string        `json:"fragment"`
	Limits    string        `json:"limits"`
	Source    string        `json:"source"`
}

type roleText struct {
	Role     string `json:"role"`
	Type     string `json:"type"`
	Optional bool   `json:"optional"`
	Summary  string `json:"summary"`
}

type inputText struct {
	Input    string `json:"input"`
	Optional bool   `json:"optional"`
	Summary  string `json:"summary"`
}

type settingText struct {
	Setting string `json:"setting"`
	Unit    string `json:"unit"`
	Default string `json:"default"`
	Summary string `json:"summary"`
}

type outputText struct {
	Output  string `json:"output"`
	Unit    string `json:"unit"`
	Summary string `json:"summary"`
}

type pointText struct {
	Point      string `json:"point"`
	Reading    string `json:"reading"`
	Instrument string `json:"instrument"`
	At         string `json:"at"`
	Loading    string `json:"loading"`
}

type findingText struct {
	Finding string `json:"finding"`
	Text    string `json:"text"`
}

// describeKind says of a kind what it says of itself.
func describeKind(k *stage.Kind) kindText {
	t := kindText{
		named: named{k.Name, k.Summary}, Limits: k.Limits, Source: k.Source,
		Sketch: strings.Trim(k.Sketch, "\n"), Fragment: strings.Trim(k.Fragment, "\n"),
		Roles: []roleText{}, Inputs: []inputText{}, Settings: []settingText{},
		Outputs: []outputText{}, Points: []pointText{}, Findings: []findingText{}, Equations: []string{},
	}
	for _, r := range k.Roles {
		t.Roles = append(t.Roles, roleText{r.Name, string(r.Type), r.Optional, r.Summary})
	}
	for _, i := range k.Inputs {
		t.Inputs = append(t.Inputs, inputText{i.Name, i.Optional, i.Summary})
	}
	for _, s := range k.AllSettings() {
		t.Settings = append(t.Settings, settingText{s.Name, s.Unit.Symbol, settingDefault(s), s.Summary})
	}
	for _, o := range k.Outputs {
		t.Outputs = append(t.Outputs, outputText{o.Name, o.Unit.Symbol, o.Summary})
	}
	for _, q := range k.Points {
		t.Points = append(t.Points, pointText{q.Name, q.Reading, q.Instrument, q.At, q.Loading()})
	}
	for _, f := range k.Findings {
		t.Findings = append(t.Findings, findingText{f.Equation, f.Text})
	}
	for _, e := range k.EquationList() {
		t.Equations = append(t.Equations, e.Name+" = "+e.Expression.Text)
	}
	return t
}

// settingDefault is a setting's default with the tolerance it scatters by.
func settingDefault(s stage.Setting) string {
	if s.Default != "" && s.Scatter.Tolerance != 0 {
		return s.Default + " " + tolerance(s.Scatter, s.Unit)
	}
	return s.Default
}
