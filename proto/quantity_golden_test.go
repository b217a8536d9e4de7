package proto_test

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"google.golang.org/protobuf/proto"

	meniscusv1 "meniscus.example/proto/meniscus/v1"
)

var update = flag.Bool("update", false, "write the listing of quantities instead of comparing it")

// The units, limits, steps and lookalikes are part of the contract, and the check for breaking changes does not
// look at options. The listing makes a change of one visible.
func TestQuantitiesAreThoseOfTheListing(t *testing.T) {
	t.Parallel()
	path := filepath.Join("..", "testdata", "schema", "quantities.txt")
	got := listing(t)
	if *update {
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	want := string(text)
	if got == want {
		return
	}
	t.Errorf("the quantities of the schema differ from %s:\n%s"+
		"A caller that is in the field relies on them. Where the change is meant, note it in proto/CHANGES.md "+
		"under Values, and refresh the listing with: go test ./proto -update", path, difference(want, got))
}

// listing writes one line for each number of the schema, and one for each lookalike.
func listing(t *testing.T) string {
	t.Helper()
	var b strings.Builder
	b.WriteString("# Every number of the schema: unit, limits and step, and what a value outside looks like.\n" +
		"# Refresh with: go test ./proto -update\n")
	for _, message := range messages(t) {
		for i := range message.Fields().Len() {
			fd := message.Fields().Get(i)
			if !proto.HasExtension(fd.Options(), meniscusv1.E_Quantity) {
				continue
			}
			q := proto.GetExtension(fd.Options(), meniscusv1.E_Quantity).(*meniscusv1.Quantity)
			name := strings.TrimPrefix(string(fd.FullName()), "meniscus.v1.")
			if q.HasUnitField() {
				fmt.Fprintf(&b, "%s %v unit_field=%s\n", name, fd.Kind(), q.GetUnitField())
				continue
			}
			fmt.Fprintf(&b, "%s %v %s [%v, %v] step %v\n",
				name, fd.Kind(), q.GetUnit(), q.GetMinimum(), q.GetMaximum(), q.GetStep())
			for _, l := range q.GetLookalikes() {
				fmt.Fprintf(&b, "    [%v, %v] %s\n", l.GetMinimum(), l.GetMaximum(), l.GetLooksLike())
			}
		}
	}
	return b.String()
}

// difference gives the lines of want that are not in got, and the other way round.
func difference(want, got string) string {
	var b strings.Builder
	wants, gots := strings.Split(want, "\n"), strings.Split(got, "\n")
	for _, line := range wants {
		if !slices.Contains(gots, line) {
			fmt.Fprintf(&b, "  - %s\n", line)
		}
	}
	for _, line := range gots {
		if !slices.Contains(wants, line) {
			fmt.Fprintf(&b, "  + %s\n", line)
		}
	}
	if b.Len() == 0 {
		b.WriteString("  the same lines in another order or number\n")
	}
	return b.String()
}
