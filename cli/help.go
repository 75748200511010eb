package cli

// The help texts. They are set on the app and its commands and not on the
// library, whose own templates are shared by the whole process.

const appHelp = `{{.Name}} {{.Version}}: {{.Usage}}

usage: {{.Name}} COMMAND [ARGUMENT] [FLAGS]

commands:{{range .VisibleCommands}}
  {{printf "%-10s" .Name}}{{.Usage}}{{end}}

{{.Name}} COMMAND --help says more. Flags may stand before and after the argument.

exit codes:
  0    done, and every target is met
  1    done, but a target is missed; files are written all the same
  2    the input or the command line is wrong; nothing is written
  3    a file could not be read or written
  130  interrupted; nothing is half-written
`

const commandHelp = `{{.HelpName}}: {{.Usage}}

usage: {{.HelpName}}{{if .ArgsUsage}} {{.ArgsUsage}}{{end}} [FLAGS]

{{.Description}}

flags:{{range .VisibleFlags}}
  {{.}}{{end}}
`
