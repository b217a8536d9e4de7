package main

import (
	"bytes"
	"fmt"
	"strings"
	"text/tabwriter"
	"unicode/utf8"
)

// noBreak is a space at which no line is broken: the one between a number and its unit.
const noBreak = "\u00a0"

// width is how many columns a line may have.
const width = 80

// page is a text being laid out.
type page struct {
	buffer bytes.Buffer
	// flags says what on the command line the fields of the request come from.
	flags origins
	// sources is whether the sources are told.
	sources bool
}

// title begins a part.
func (p *page) title(text string) {
	if p.buffer.Len() > 0 {
		p.buffer.WriteByte('\n')
	}
	p.buffer.WriteString(text + "\n")
}

// row is a row of a table, or nothing where there is nothing to show.
func row(has bool, cells ...string) []string {
	if !has {
		return nil
	}
	return cells
}

// table lays out rows of cells in columns. Empty rows are left out.
func (p *page) table(rows ...[]string) {
	w := tabwriter.NewWriter(&p.buffer, 0, 0, 2, ' ', 0)
	for _, row := range rows {
		if len(row) > 0 {
			fmt.Fprintln(w, "  "+strings.Join(row, "\t"))
		}
	}
	_ = w.Flush() // The buffer takes everything.
}

// item writes a text in as many lines as it needs, the first indented by two and the others by four.
func (p *page) item(text string) { p.wrap("  ", "    ", text) }

// wrap writes a text in lines that end within the width, the first after one indent, the others after another. A line is not
// broken at a no-break space. A text without words writes nothing.
func (p *page) wrap(first, others, text string) {
	write := func(line string) { p.buffer.WriteString(strings.ReplaceAll(line, noBreak, " ") + "\n") }
	line, indent := first, true
	for _, word := range strings.FieldsFunc(text, func(r rune) bool { return r == ' ' || r == '\n' }) {
		if !indent && utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) > width {
			write(line)
			line, indent = others, true
		}
		if !indent {
			line += " "
		}
		line += word
		indent = false
	}
	if !indent {
		write(line)
	}
}
