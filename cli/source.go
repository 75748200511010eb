package cli

import (
	"errors"
	"fmt"
	"io"
	"os"

	"batchwright/bom/document"
	"batchwright/data"
	"batchwright/tolerance/build"
)

// largestFile is how much of a file is read: a build file, family file or price
// book that is larger is none.
const largestFile = 1 << 20

// example is the embedded build that `plan` plans where none is named.
const example = "lantern.yaml"

// source is a build as it was read, and the text it was read from.
type source struct {
	*build.Build
	text []byte
}

// read reads the build file named; "-" is standard input, "" the example.
// units, where not 0, stands in for the file's own number of units.
func (p *program) read(file string, units int) (*source, error) {
	text, err := p.text(&file)
	if err != nil {
		return nil, err
	}
	b, err := build.Read(file, text, open)
	if err != nil {
		return nil, err
	}
	if units != 0 {
		b.Units = units
	}
	return &source{b, text}, nil
}

// text is what the build file says. Standard input and the example get a name
// that complaints can show.
func (p *program) text(file *string) ([]byte, error) {
	switch *file {
	case "":
		*file = example
		text, err := data.Examples.ReadFile("examples/" + example)
		if err != nil {
			panic("cli: the embedded example is missing: " + err.Error())
		}
		return text, nil
	case "-":
		*file = "stdin"
		return limited(*file, p.stdin)
	}
	return open(*file)
}

// open reads a file, but no more of it than a file of ours can be.
func open(path string) ([]byte, error) {
	text, err := openAtMost(path, largestFile)
	if err != nil {
		return nil, err
	}
	return notTooLarge(path, text)
}

// openAtMost reads a file up to a byte beyond most, which shows that it is
// larger.
func openAtMost(path string, most int64) ([]byte, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, unreadable(path, err)
	}
	defer f.Close()
	if info, err := f.Stat(); err == nil && info.IsDir() {
		return nil, unreadable(path, errors.New("it is a folder, expected a file"))
	}
	return atMost(path, f, most)
}

// limited reads r to its end unless that is too far away.
func limited(name string, r io.Reader) ([]byte, error) {
	text, err := atMost(name, r, largestFile)
	if err != nil {
		return nil, err
	}
	return notTooLarge(name, text)
}

func atMost(name string, r io.Reader, most int64) ([]byte, error) {
	text, err := io.ReadAll(io.LimitReader(r, most+1))
	if err != nil {
		return nil, unreadable(name, err)
	}
	return text, nil
}

func notTooLarge(name string, text []byte) ([]byte, error) {
	if len(text) > largestFile {
		return nil, document.Complaints{{
			File: name, Message: "the file is too large",
			Expected: fmt.Sprintf("at most %d MiB", largestFile>>20),
		}}
	}
	return text, nil
}
