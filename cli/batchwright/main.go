// Command batchwright plans a small batch of analogue stages: see package cli.
package main

import (
	"os"

	"batchwright/cli"
)

func main() { os.Exit(cli.Run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) }
