package main

// helpTemplate lays out the help of every command.
const helpTemplate = `{{with (or .Long .Short)}}{{.}}
{{end}}{{if .Runnable}}
usage: {{.UseLine}}
{{end}}{{if .HasAvailableSubCommands}}
commands:
{{range .Commands}}{{if .IsAvailableCommand}}  {{rpad .Name 10}} {{.Short}}
{{end}}{{end}}{{end}}{{if .HasAvailableLocalFlags}}
flags:
{{.LocalFlags.FlagUsagesWrapped 100 | trimTrailingWhitespaces}}
{{end}}`
