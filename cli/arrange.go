package cli

import (
	"slices"
	"strings"

	"github.com/urfave/cli/v2"
)

// arrange puts a command's flags before its other arguments, for the flag
// parser stops at the first argument that is no flag. Everything after "--"
// and a single "-" are arguments. Unknown flags and flags without their value
// are refused here, where the nearest flag can be named.
func arrange(app *cli.App, args []string) ([]string, error) {
	at := slices.IndexFunc(args, func(a string) bool { return !strings.HasPrefix(a, "-") })
	if at < 0 {
		return args, checkFlags(args, app.Flags)
	}
	if err := checkFlags(args[:at], app.Flags); err != nil {
		return nil, err
	}
	command := app.Command(args[at])
	if command == nil {
		return args[:at+1], nil // refused by the app, with the nearest command
	}
	flags, rest, err := sortOut(args[at+1:], command.Flags)
	if err != nil {
		return nil, err
	}
	arranged := slices.Clone(args[:at+1])
	if slices.ContainsFunc(flags, asksForHelp) {
		return append(arranged, "--help"), nil // the library would look up a topic named like the file
	}
	arranged = append(arranged, flags...)
	return append(append(arranged, "--"), rest...), nil
}

// sortOut separates flags, each with its value, from the other arguments.
func sortOut(args []string, known []cli.Flag) (flags, rest []string, err error) {
	for i := 0; i < len(args); i++ {
		a := args[i]
		if a == "--" {
			return flags, append(rest, args[i+1:]...), nil
		}
		if a == "-" || !strings.HasPrefix(a, "-") {
			rest = append(rest, a)
			continue
		}
		name, _, joined := strings.Cut(a, "=")
		takesValue, err := findFlag(name, known)
		if err != nil {
			return nil, nil, err
		}
		flags = append(flags, a)
		if !takesValue || joined {
			continue
		}
		if i++; i == len(args) {
			return nil, nil, usage("%s needs a value", name)
		}
		flags = append(flags, args[i])
	}
	return flags, rest, nil
}

// checkFlags refuses unknown flags among those before the command.
func checkFlags(args []string, known []cli.Flag) error {
	for _, a := range args {
		name, _, _ := strings.Cut(a, "=")
		if _, err := findFlag(name, known); err != nil {
			return err
		}
	}
	return nil
}

func asksForHelp(flag string) bool {
	return flag == "--help" || flag == "-help" || flag == "-h" || flag == "--h"
}

// always are the flags that the library adds.
var always = [...]string{"help", "h", "version", "v"}

// findFlag says whether a flag takes a value.
func findFlag(name string, known []cli.Flag) (takesValue bool, err error) {
	word := strings.TrimPrefix(strings.TrimPrefix(name, "-"), "-")
	var names []string
	for _, f := range known {
		if slices.Contains(f.Names(), word) {
			_, isSwitch := f.(*cli.BoolFlag)
			return !isSwitch, nil
		}
		names = append(names, "--"+f.Names()[0])
	}
	if slices.Contains(always[:], word) {
		return false, nil
	}
	return false, unknownWord("flag", name, append(names, "--help"))
}
