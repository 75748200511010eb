package cli

import (
	"bytes"
	"context"
	"os"
	"os/signal"
	"strings"
	"testing"
	"time"
)

// long is a run that nobody would wait for.
func long(folder string) []string {
	return []string{"plan", "testdata/small.yaml", "--simulate", "5000000", "--out", folder}
}

func nothingLeft(t *testing.T, code int, stdout, stderr, folder string) {
	t.Helper()
	if code != exitInterrupted || stdout != "" || stderr != "batchwright: interrupted; nothing was written\n" {
		t.Errorf("exit code %d, standard output %q, standard error %q", code, stdout, stderr)
	}
	left, err := os.ReadDir(folder)
	if err != nil || len(left) > 0 {
		t.Errorf("left behind: %v (%v)", left, err)
	}
}

// An interrupt before or during the work ends it with nothing written.
func TestCancelled(t *testing.T) {
	for name, after := range map[string]time.Duration{"at once": 0, "while picking": 20 * time.Millisecond, "later": 300 * time.Millisecond} {
		t.Run(name, func(t *testing.T) {
			ctx, cancel := context.WithTimeout(context.Background(), after)
			defer cancel()
			folder := t.TempDir()
			var out, errs bytes.Buffer
			code := run(ctx, long(folder), strings.NewReader(""), &out, &errs)
			nothingLeft(t, code, out.String(), errs.String(), folder)
		})
	}
}

// The interrupt key does that.
func TestInterruptKey(t *testing.T) {
	own := make(chan os.Signal, 1) // so that an interrupt before Run listens does not end the test
	signal.Notify(own, os.Interrupt)
	defer signal.Stop(own)
	me, err := os.FindProcess(os.Getpid())
	if err != nil {
		t.Fatal(err)
	}
	folder := t.TempDir()
	var out, errs bytes.Buffer
	code := make(chan int)
	go func() { code <- Run(long(folder), strings.NewReader(""), &out, &errs) }()
	for {
		select {
		case c := <-code:
			nothingLeft(t, c, out.String(), errs.String(), folder)
			return
		case <-time.After(100 * time.Millisecond):
			if err := me.Signal(os.Interrupt); err != nil {
				t.Skipf("this system sends no interrupts: %v", err)
			}
		}
	}
}
