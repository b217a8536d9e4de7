// Package published reads the tables of published values that the tests are held against.
package published

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"runtime"
	"strconv"
	"strings"
	"testing"
)

// Row is one row of a table.
type Row struct {
	t      testing.TB
	values map[string]string
}

// Rows are the rows of a table beside this file. A row without a source, or whose provenance is none of published,
// memory and arithmetic, fails the test.
func Rows(t testing.TB, name string) []Row {
	t.Helper()
	_, here, _, _ := runtime.Caller(0)
	f, err := os.Open(filepath.Join(filepath.Dir(here), name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	lines, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatalf("%s: %v", name, err)
	}
	if len(lines) < 2 {
		t.Fatalf("%s has no rows", name)
	}
	var rows []Row
	for i, line := range lines[1:] {
		r := Row{t, map[string]string{}}
		for j, column := range lines[0] {
			r.values[column] = line[j]
		}
		if strings.TrimSpace(r.Text("source")) == "" {
			t.Errorf("%s, row %d, has no source", name, i+2)
		}
		switch r.Text("provenance") {
		case "published", "memory", "arithmetic":
		default:
			t.Errorf("%s, row %d, has the provenance %q", name, i+2, r.Text("provenance"))
		}
		rows = append(rows, r)
	}
	return rows
}

// Text is the text in a column, which must be there.
func (r Row) Text(column string) string {
	r.t.Helper()
	text, ok := r.values[column]
	if !ok {
		r.t.Fatalf("no column %s", column)
	}
	return text
}

// Number is the number in a column.
func (r Row) Number(column string) float64 {
	r.t.Helper()
	x, err := strconv.ParseFloat(r.Text(column), 64)
	if err != nil {
		r.t.Fatalf("%s: %v", column, err)
	}
	return x
}

// Within reports, as a failure of the test, a number that is not within the tolerance of the row, NaN included.
func (r Row) Within(what string, got, want float64) {
	r.t.Helper()
	diff := got - want
	if diff < 0 {
		diff = -diff
	}
	if tol := r.Number("tolerance"); !(diff <= tol) {
		r.t.Errorf("%s: got %v, want %v ± %v (%s; row %v)", what, got, want, tol, r.Text("source"), r.values)
	}
}
