package proto_test

import (
	"fmt"
	"os"
	"slices"
	"strings"
	"testing"
)

// headings are the parts of each release in CHANGES.md, in their order.
var headings = []string{"Added", "Changed", "Values", "Deprecated", "Fixed", "Breaking"}

// headingProblems says where a list of changes leaves its fixed form.
func headingProblems(text string) []string {
	var problems []string
	var releases []string
	parts := map[string][]string{}
	for _, line := range strings.Split(text, "\n") {
		if release, ok := strings.CutPrefix(line, "## "); ok {
			releases = append(releases, release)
		} else if part, ok := strings.CutPrefix(line, "### "); ok {
			if len(releases) == 0 {
				return []string{fmt.Sprintf("%q stands before any release", part)}
			}
			release := releases[len(releases)-1]
			parts[release] = append(parts[release], part)
		}
	}
	if len(releases) == 0 || releases[0] != "Unreleased" {
		problems = append(problems, "does not begin with Unreleased")
	}
	for _, release := range releases {
		if !slices.Equal(parts[release], headings) {
			problems = append(problems, fmt.Sprintf("%s has the headings %q, and not %q", release, parts[release], headings))
		}
	}
	return problems
}

func TestChangesKeepTheirHeadings(t *testing.T) {
	t.Parallel()
	text, err := os.ReadFile("CHANGES.md")
	if err != nil {
		t.Fatal(err)
	}
	for _, problem := range headingProblems(string(text)) {
		t.Errorf("CHANGES.md %s", problem)
	}
	all := "### Added\n### Changed\n### Values\n### Deprecated\n### Fixed\n### Breaking\n"
	for _, wrong := range []string{
		"", "## 1.0.0\n" + all, "### Added\n", "## Unreleased\n", "## Unreleased\n### Fixed\n" + all,
		"## Unreleased\n" + all + "## 1.0.0\n### Added\n",
	} {
		if headingProblems(wrong) == nil {
			t.Errorf("nothing is reported for %q", wrong)
		}
	}
}
