package main

import (
	"strings"
	"unicode/utf8"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// printUsage is what the help of a command ends with, within the width of a page.
func printUsage(c *cobra.Command) error {
	p := &page{}
	p.title("Usage:")
	if c.HasAvailableSubCommands() {
		p.item(c.CommandPath() + " COMMAND [flags]")
	} else {
		p.item(c.UseLine())
	}
	if c.HasExample() {
		p.title("Examples:")
		p.buffer.WriteString(c.Example + "\n")
	}
	if c.HasAvailableSubCommands() {
		p.title("Commands:")
		var rows [][2]string
		for _, sub := range c.Commands() {
			if sub.IsAvailableCommand() {
				rows = append(rows, [2]string{sub.Name(), sub.Short})
			}
		}
		p.terms(rows)
	}
	p.flagHelp("Flags:", c.LocalFlags())
	p.flagHelp("Flags of every command:", c.InheritedFlags())
	_, err := c.OutOrStderr().Write(p.buffer.Bytes())
	return err
}

// flagHelp lists flags and what they do.
func (p *page) flagHelp(title string, flags *pflag.FlagSet) {
	var rows [][2]string
	flags.VisitAll(func(f *pflag.Flag) {
		if f.Hidden {
			return
		}
		name, help := pflag.UnquoteUsage(f)
		if f.Value.Type() == "bool" {
			name = ""
		}
		rows = append(rows, [2]string{strings.TrimSpace("--" + f.Name + " " + name), help})
	})
	if rows != nil {
		p.title(title)
		p.terms(rows)
	}
}

// terms lists terms and what they mean, the meanings in a column of their own.
func (p *page) terms(rows [][2]string) {
	column := 0
	for _, row := range rows {
		column = max(column, utf8.RuneCountInString(row[0]))
	}
	for _, row := range rows {
		gap := strings.Repeat(" ", column-utf8.RuneCountInString(row[0])+2)
		p.wrap("  "+row[0]+gap, strings.Repeat(" ", column+4), row[1])
	}
}
