package cli

import (
	"bytes"
	"context"
	"errors"
	"io"
	"strings"
	"testing"
)

// endless is a stream that never ends.
type endless struct{ read int }

func (e *endless) Read(b []byte) (int, error) {
	e.read += len(b)
	return copy(b, bytes.Repeat([]byte("#"), len(b))), nil
}

// No more is read than a build can be, however much there is.
func TestEndlessInput(t *testing.T) {
	in := &endless{}
	var out, errs bytes.Buffer
	code := run(context.Background(), []string{"check", "-"}, io.LimitReader(in, 1<<28), &out, &errs)
	const want = "stdin: the file is too large: expected at most 1 MiB\nbatchwright: 1 fault; nothing was written\n"
	if code != exitInput || out.Len() > 0 || errs.String() != want {
		t.Errorf("exit code %d, standard output %q, standard error %q", code, out.String(), errs.String())
	}
	if in.read > 4*largestFile { // what is read ahead included
		t.Errorf("read %d bytes", in.read)
	}
}

// gone is a stream whose reader has left.
type gone struct{}

func (gone) Write([]byte) (int, error) { return 0, errors.New("nobody reads this") }

func TestOutputGone(t *testing.T) {
	var errs bytes.Buffer
	code := run(context.Background(), []string{"kinds"}, strings.NewReader(""), gone{}, &errs)
	const want = "batchwright: cannot write standard output: nobody reads this\n"
	if code != exitFile || errs.String() != want {
		t.Errorf("exit code %d, standard error %q", code, errs.String())
	}
}

// broken is an input that fails midway.
type broken struct{}

func (broken) Read([]byte) (int, error) { return 0, errors.New("the line is dead") }

func TestInputBroken(t *testing.T) {
	var out, errs bytes.Buffer
	code := run(context.Background(), []string{"check", "-"}, broken{}, &out, &errs)
	const want = "batchwright: cannot read stdin: the line is dead\n"
	if code != exitFile || out.Len() > 0 || errs.String() != want {
		t.Errorf("exit code %d, standard output %q, standard error %q", code, out.String(), errs.String())
	}
}
