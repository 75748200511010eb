package cli

import (
	"errors"
	"fmt"
	"io/fs"
	"strings"

	"github.com/urfave/cli/v2"

	"batchwright/bom/document"
)

// fault is an error that knows its exit code. Its text may have several lines;
// an empty one has been said already.
type fault struct {
	code int
	err  error
}

func (f *fault) Error() string { return f.err.Error() }
func (f *fault) Unwrap() error { return f.err }

// code is the exit code of an error. Complaints are the input's fault; an error
// that nobody has marked is this program's own, and reads as one of a file.
func code(err error) int {
	var f *fault
	var complaints document.Complaints
	switch {
	case err == nil:
		return exitDone
	case errors.As(err, &f):
		return f.code
	case errors.As(err, &complaints):
		return exitInput
	}
	return exitFile
}

// explain prints an error to standard error: complaints one a line and their
// count, anything else after the program's name.
func (p *program) explain(err error) {
	var complaints document.Complaints
	switch {
	case err == nil:
	case errors.As(err, &complaints):
		fmt.Fprintf(p.stderr, "%s\nbatchwright: %s; nothing was written\n", harmless(complaints.Error()), count(len(complaints), "fault"))
	default:
		for line := range strings.Lines(harmless(err.Error())) {
			fmt.Fprintf(p.stderr, "batchwright: %s\n", strings.TrimRight(line, "\n"))
		}
	}
}

// usage is a wrong command line.
func usage(format string, args ...any) error {
	return &fault{exitInput, fmt.Errorf(format, args...)}
}

// usageFault turns the flag parser's error into one of ours. Both the app and
// every command need it, or the parser prints help where data belongs.
func usageFault(_ *cli.Context, err error, _ bool) error {
	return &fault{exitInput, err}
}

// unknownWord is a word that names nothing, with the nearest that does.
func unknownWord(what, word string, known []string) error {
	text := fmt.Sprintf("unknown %s %q: expected one of %s", what, word, list(known))
	if near := document.Nearest(word, known); near != "" {
		text += "; nearest: " + near
	}
	return &fault{exitInput, errors.New(text)}
}

// unreadable is a file that could not be read.
func unreadable(file string, err error) error {
	return &fault{exitFile, fmt.Errorf("cannot read %s: %w", file, reason(err))}
}

// unwritable is a file that could not be written.
func unwritable(file string, err error) error {
	return &fault{exitFile, fmt.Errorf("cannot write %s: %w", file, reason(err))}
}

// reason leaves out the path that the system's error repeats.
func reason(err error) error {
	var path *fs.PathError
	if errors.As(err, &path) {
		return path.Err
	}
	return err
}

// missed says that the work is done but targets are missed.
func missed(format string, args ...any) error {
	return &fault{exitMissed, fmt.Errorf(format, args...)}
}

func interrupted() error {
	return &fault{exitInterrupted, errors.New("interrupted; nothing was written")}
}

// count is "1 fault" or "3 faults".
func count(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// list writes words as people list them, "a, b or c", a long list cut short.
func list(words []string) string {
	const most = 20
	if len(words) > most {
		return strings.Join(words[:most], ", ") + ", …"
	}
	if len(words) < 2 {
		return strings.Join(words, "")
	}
	return strings.Join(words[:len(words)-1], ", ") + " or " + words[len(words)-1]
}
