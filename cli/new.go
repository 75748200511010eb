package cli

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"runtime"
	"strings"

	"github.com/urfave/cli/v2"

	"batchwright/data"
)

func (p *program) newCommand() *cli.Command {
	return &cli.Command{
		Name:      "new",
		Usage:     "write a build file to start from: a copy of an example, remarks and all",
		ArgsUsage: "FILE",
		Description: `Writes a complete build under a name of yours, to be changed line by line. An
existing file is left alone. "-" writes to standard output. The examples are
` + strings.Join(exampleNames(), ", ") + `.

  batchwright new tone-box.yaml
  batchwright new mine.yaml --like ` + starter,
		Flags: []cli.Flag{
			&cli.StringFlag{Name: "like", Usage: "copy the example `NAME`", Value: starter},
		},
		Action: p.new,
	}
}

// starter is the example that `new` copies where none is named.
var starter = strings.TrimSuffix(example, ".yaml")

func (p *program) new(c *cli.Context) error {
	file, err := argument(c, "file", false)
	if err != nil {
		return err
	}
	text, err := exampleText(c.String("like"))
	if err != nil {
		return err
	}
	if file == "-" {
		p.out.Write(text)
		return nil
	}
	if err := writeNew(file, text); err != nil {
		return err
	}
	fmt.Fprintf(&p.out, "wrote %s, a copy of the example %s\n", file, c.String("like"))
	return nil
}

// exampleNames are the embedded examples, in the order of their names.
func exampleNames() []string {
	files, err := fs.Glob(data.Examples, "examples/*.yaml")
	if err != nil || len(files) == 0 {
		panic(fmt.Sprintf("cli: no embedded examples: %v", err))
	}
	for i, f := range files {
		files[i] = strings.TrimSuffix(path.Base(f), ".yaml")
	}
	return files
}

// exampleText is the text of an example by its name.
func exampleText(name string) ([]byte, error) {
	for _, known := range exampleNames() {
		if name == known {
			return data.Examples.ReadFile("examples/" + name + ".yaml")
		}
	}
	return nil, unknownWord("example", name, exampleNames())
}

// writeNew writes a file that is not there yet, whole or not at all: a
// temporary file beside it is filled, synced and given its name.
func writeNew(file string, text []byte) (err error) {
	if err := unused(file); err != nil {
		return err
	}
	f, err := os.CreateTemp(filepath.Dir(file), ".batchwright-*.tmp")
	if err != nil {
		return unwritable(file, err)
	}
	defer os.Remove(f.Name()) // gone already once it was renamed
	_, err = f.Write(text)
	if mode := f.Chmod(0o644); err == nil && runtime.GOOS != "windows" {
		err = mode
	}
	if err == nil {
		err = f.Sync()
	}
	if closed := f.Close(); err == nil {
		err = closed
	}
	if err != nil {
		return unwritable(file, err)
	}
	return giveName(f.Name(), file)
}

// giveName gives a temporary file its name. A link is refused where somebody has
// put a file there meanwhile; where there are no links, a renaming must do.
func giveName(temporary, file string) error {
	err := os.Link(temporary, file)
	if errors.Is(err, fs.ErrExist) {
		return alreadyThere(file)
	}
	if err != nil {
		err = os.Rename(temporary, file)
	}
	if err != nil {
		return unwritable(file, err)
	}
	return nil
}

// unused refuses the name of a new file that is none.
func unused(file string) error {
	if file == "" {
		return usage("expected the name of a new file")
	}
	if _, err := os.Lstat(file); err == nil {
		return alreadyThere(file)
	}
	return nil
}

func alreadyThere(file string) error {
	return usage("%s is there already: expected the name of a new file", file)
}
