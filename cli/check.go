package cli

import (
	"errors"

	"github.com/urfave/cli/v2"

	"batchwright/bom/document"
	"batchwright/tolerance/build"
)

func (p *program) checkCommand() *cli.Command {
	return &cli.Command{
		Name:      "check",
		Usage:     "read a build file and say what is wrong with it, or what is in it",
		ArgsUsage: "BUILD",
		Description: `Reads the build and the files it names, and lists every fault with its line and
column, what was found, what was expected and the nearest valid word. "-" reads
the build from standard input.

  batchwright check tone-box.yaml`,
		Flags:  []cli.Flag{jsonFlag()},
		Action: p.check,
	}
}

// checked is what `check --json` prints. With complaints there is nothing else.
type checked struct {
	Build      string          `json:"build,omitempty"`
	Units      int             `json:"units,omitempty"`
	Conditions []string        `json:"conditions,omitempty"`
	Stages     []checkedStage  `json:"stages,omitempty"`
	Trims      []checkedTrim   `json:"trims,omitempty"`
	Targets    []checkedTarget `json:"targets,omitempty"`
	Open       []checkedOpen   `json:"open,omitempty"`
	Complaints []complaint     `json:"complaints"`
}

type checkedStage struct {
	Stage string   `json:"stage"`
	Kind  string   `json:"kind"`
	Refs  []string `json:"refs"`
}

type checkedTrim struct {
	Turn   string `json:"turn"`
	Output string `json:"output"`
}

type checkedTarget struct {
	Name  string `json:"name"`
	Asked string `json:"asked"`
}

type checkedOpen struct {
	Positions []string `json:"positions"`
	Families  []string `json:"families"`
	Choices   int      `json:"choices"`
}

type complaint struct {
	File     string `json:"file"`
	Line     int    `json:"line"`
	Column   int    `json:"column"`
	Message  string `json:"message"`
	Found    string `json:"found,omitempty"`
	Expected string `json:"expected,omitempty"`
	Nearest  string `json:"nearest,omitempty"`
}

func (p *program) check(c *cli.Context) error {
	file, err := argument(c, "build file", false)
	if err != nil {
		return err
	}
	src, err := p.read(file, 0)
	var complaints document.Complaints
	if c.Bool("json") && errors.As(err, &complaints) {
		return errors.Join(err, p.complaints(complaints))
	}
	if err != nil {
		return err
	}
	if c.Bool("json") {
		return p.json(summarise(src.Build))
	}
	p.showCheck(src.Build)
	return nil
}

// complaints prints what is wrong as JSON: of `check` it is the result, so it
// goes out although the exit code says that the input is wrong.
func (p *program) complaints(list document.Complaints) error {
	out := checked{}
	for _, c := range list {
		out.Complaints = append(out.Complaints, complaint(c))
	}
	if err := p.json(out); err != nil {
		return err
	}
	if _, err := p.stdout.Write(p.out.Bytes()); err != nil {
		return unwritable("standard output", err)
	}
	return nil
}

// summarise says what is in a build.
func summarise(b *build.Build) checked {
	out := checked{Build: b.Title, Units: b.Units, Complaints: []complaint{}}
	for _, c := range b.Conditions {
		out.Conditions = append(out.Conditions, c.Name)
	}
	for _, s := range b.Stages {
		stage := checkedStage{s.Name, s.Kind.Name, []string{}}
		for _, place := range s.Places {
			stage.Refs = append(stage.Refs, place.Refs()...)
		}
		out.Stages = append(out.Stages, stage)
	}
	for _, t := range b.Trims {
		out.Trims = append(out.Trims, checkedTrim{t.Stage + "." + t.Role, t.Output.String()})
	}
	for _, t := range b.Targets {
		out.Targets = append(out.Targets, checkedTarget{t.Name, t.Asked})
	}
	for _, o := range b.Openings {
		out.Open = append(out.Open, checkedOpen{o.Positions, o.Families, len(b.Fittings(o))})
	}
	return out
}
