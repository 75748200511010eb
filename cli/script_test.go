package cli_test

import (
	"flag"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"

	"batchwright/cli"
)

var update = flag.Bool("update", false, "rewrite scripts, README and the picture from what the program does now")

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){
		"batchwright": func() { os.Exit(cli.Run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) },
	})
}

// TestScripts runs every script of testdata/script. `code N` asserts the exit
// code of the command that follows it on the line, `empty` that a stream or a
// folder holds nothing.
func TestScripts(t *testing.T) {
	found, err := filepath.Glob("testdata/script/*.txtar")
	if err != nil || len(found) < 8 {
		t.Fatalf("found %d scripts (%v), expected at least 8", len(found), err)
	}
	testscript.Run(t, testscript.Params{
		Files: found, RequireExplicitExec: true, RequireUniqueNames: true, UpdateScripts: *update,
		Cmds: map[string]func(*testscript.TestScript, bool, []string){"code": code, "workbooks": workbooks, "typed": typed, "half": half},
		Setup: func(e *testscript.Env) error {
			small, err := os.ReadFile("testdata/small.yaml")
			if err != nil {
				return err
			}
			return os.WriteFile(filepath.Join(e.WorkDir, "small.yaml"), small, 0o644)
		},
	})
}

// code runs a command and asserts its exit code: `code 2 batchwright check x`.
func code(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: code N command [arguments]")
	}
	err := ts.Exec(args[1], args[2:]...)
	got := "0"
	if exit, ok := err.(interface{ ExitCode() int }); ok {
		got = strconv.Itoa(exit.ExitCode())
	} else if err != nil {
		ts.Fatalf("%v", err)
	}
	if got != args[0] {
		ts.Fatalf("%v: exit code %s, expected %s\nstderr: %s", args[1:], got, args[0], ts.ReadFile("stderr"))
	}
}

// workbooks asserts how many files a folder holds that a plan could have
// written, temporary ones included: `workbooks 0 .`.
func workbooks(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 2 {
		ts.Fatalf("usage: workbooks N folder")
	}
	n := 0
	for _, pattern := range []string{"*.xlsx", "*.tmp", ".*"} {
		found, err := filepath.Glob(filepath.Join(ts.MkAbs(args[1]), pattern))
		ts.Check(err)
		for _, f := range found {
			if filepath.Base(f) != ".tmp" { // the script's own folder
				n++
			}
		}
	}
	if strconv.Itoa(n) != args[0] {
		ts.Fatalf("%d files in %s, expected %s", n, args[1], args[0])
	}
}
