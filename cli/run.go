// Package cli is the command line: Run reads the arguments, and one thin file
// for each command asks the other packages and lays out what they answer.
//
// Data goes to standard output, messages and progress to standard error. Data
// is held back until a command has done its work, so that a run that fails or
// is interrupted leaves nothing half-written.
package cli

import (
	"bytes"
	"context"
	"io"
	"os"
	"os/signal"

	"github.com/urfave/cli/v2"
)

// Version is that of the program; it is part of every plan's digest.
const Version = "0.1.0"

// The exit codes.
const (
	exitDone        = 0   // and every target is met
	exitMissed      = 1   // done, but a target is missed; files are written all the same
	exitInput       = 2   // the input or the command line is wrong; nothing is written
	exitFile        = 3   // a file could not be read or written
	exitInterrupted = 130 // nothing is half-written
)

// program is one run: its streams, and the data held back until it is done.
type program struct {
	stdin  io.Reader
	stdout io.Writer
	stderr io.Writer
	out    bytes.Buffer
	app    *cli.App
}

// Run runs one command and returns its exit code. The arguments leave out the
// program's own name. Nothing outlives the call.
func Run(args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	defer stop()
	context.AfterFunc(ctx, stop) // a second interrupt ends the program at once
	return run(ctx, args, stdin, stdout, stderr)
}

func run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	p := &program{stdin: stdin, stdout: stdout, stderr: stderr}
	p.app = p.newApp()
	arranged, err := arrange(p.app, args)
	if err == nil {
		err = p.app.RunContext(ctx, append([]string{p.app.Name}, arranged...))
	}
	if ctx.Err() != nil && code(err) != exitDone {
		err = interrupted()
	}
	if code(err) <= exitMissed {
		if _, failed := p.stdout.Write(p.out.Bytes()); failed != nil {
			err = unwritable("standard output", failed)
		}
	}
	p.explain(err)
	return code(err)
}

// newApp describes the commands. Every run has its own.
func (p *program) newApp() *cli.App {
	app := &cli.App{
		Name:    "batchwright",
		Usage:   "plans a small batch of analogue stages: parts, tolerances, trims and test sheets",
		Version: Version,
		Commands: []*cli.Command{
			p.planCommand(), p.checkCommand(), p.spreadCommand(), p.pickCommand(), p.compareCommand(), p.reviewCommand(), p.kindsCommand(), p.familiesCommand(), p.newCommand(),
		},
		Action:                p.noCommand,
		OnUsageError:          usageFault,
		ExitErrHandler:        func(*cli.Context, error) {}, // Run decides
		HideHelpCommand:       true,
		CustomAppHelpTemplate: appHelp,
		Reader:                p.stdin,
		Writer:                &p.out,
		ErrWriter:             p.stderr,
	}
	for _, c := range app.Commands {
		c.OnUsageError = usageFault
		c.HideHelpCommand = true
		c.CustomHelpTemplate = commandHelp
	}
	return app
}

// noCommand answers a command line that names no command, or none there is.
func (p *program) noCommand(c *cli.Context) error {
	names := commandNames(p.app)
	if word := c.Args().First(); word != "" {
		return unknownWord("command", word, names)
	}
	return usage("no command given: expected one of %s; `batchwright --help` says what they do", list(names))
}

func commandNames(app *cli.App) []string {
	names := make([]string, len(app.Commands))
	for i, c := range app.Commands {
		names[i] = c.Name
	}
	return names
}
