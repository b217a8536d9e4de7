package optics_test

import (
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
)

// A file of testdata/misuse holds one mistake, on a line that ends with the error that the compiler must give,
//
//	_ = unit.KeratometricPower(power, n) // want: as unit.Millimetre value
//
// and below it the line as it is right,
//
//	// instead: _ = unit.KeratometricPower(radius, n)
//
// with which the file compiles: it fails for the mistake and for nothing else. " ... " in an error stands for any text.
var (
	wantLine    = regexp.MustCompile(`^(\s*)(\S.*) // want: (.+)$`)
	insteadLine = regexp.MustCompile(`^\s*// instead: (.+)$`)
)

// misuseProblems says what a file of testdata/misuse does that it should not.
func misuseProblems(t *testing.T, text string) []string {
	t.Helper()
	lines := strings.Split(text, "\n")
	marked := slices.IndexFunc(lines, wantLine.MatchString)
	if marked < 0 || marked+1 == len(lines) || slices.IndexFunc(lines[marked+1:], wantLine.MatchString) >= 0 {
		return []string{"does not have exactly one line with // want:"}
	}
	instead := insteadLine.FindStringSubmatch(lines[marked+1])
	if instead == nil {
		return []string{"has no line with // instead: below the one with // want:"}
	}
	mistake := wantLine.FindStringSubmatch(lines[marked])

	c, errs := check(t, module+"/misuse", text)
	if len(errs) != 1 {
		return []string{fmt.Sprintf("gives %d errors, want 1: %v", len(errs), errs)}
	}
	var problems []string
	if line := c.fset.Position(errs[0].Pos).Line; line != marked+1 {
		problems = append(problems, fmt.Sprintf("fails on line %d, want line %d: %s", line, marked+1, errs[0].Msg))
	}
	want := strings.ReplaceAll(regexp.QuoteMeta(mistake[3]), regexp.QuoteMeta(" ... "), " .* ")
	if !regexp.MustCompile(want).MatchString(errs[0].Msg) {
		problems = append(problems, fmt.Sprintf("gives %q, want %q in it", errs[0].Msg, mistake[3]))
	}

	lines[marked] = mistake[1] + instead[1]
	if _, errs := check(t, module+"/misuse", strings.Join(lines, "\n")); errs != nil {
		problems = append(problems, fmt.Sprintf("mended, it still does not compile: %v", errs))
	}
	return problems
}

func TestMisuseDoesNotCompile(t *testing.T) {
	t.Parallel()
	files, err := filepath.Glob(filepath.Join("..", "testdata", "misuse", "*.go"))
	if err != nil {
		t.Fatal(err)
	}
	if len(files) == 0 {
		t.Fatal("testdata/misuse is empty")
	}
	for _, file := range files {
		t.Run(strings.TrimSuffix(filepath.Base(file), ".go"), func(t *testing.T) {
			t.Parallel()
			text, err := os.ReadFile(file)
			if err != nil {
				t.Fatal(err)
			}
			for _, problem := range misuseProblems(t, string(text)) {
				t.Errorf("%s %s", file, problem)
			}
		})
	}
}

// The check is shown files that it must not accept.
func TestMisuseCheckReportsWhatItShould(t *testing.T) {
	t.Parallel()
	const frame = "package misuse\n\nimport \"" + module + "/optics/unit\"\n\nfunc misuse(d unit.Dioptre, m unit.Millimetre) {\n"
	const right, wrong = "\t// instead: d = d", "\td = m // want: cannot use m ... as unit.Dioptre value"
	for _, c := range []struct{ body, want string }{
		{wrong + "\n" + right, ""},
		{"\td = d // want: cannot use\n" + right, "gives 0 errors"},
		{"\td = 2 * m // want: something else\n" + right, `want "something else" in it`},
		{"\tm = d\n" + wrong + "\n" + right, "gives 2 errors"},
		{"\tm = d\n\td = d // want: cannot use d ... as unit.Millimetre value\n" + right, "fails on line 6, want line 7"},
		{wrong + "\n\t// instead: d = m", "still does not compile"},
		{wrong, "no line with // instead:"},
		{right, "exactly one line"},
		{wrong + "\n" + right + "\n" + wrong + "\n" + right, "exactly one line"},
	} {
		got := strings.Join(misuseProblems(t, frame+c.body+"\n}\n"), "; ")
		if (c.want == "") != (got == "") || !strings.Contains(got, c.want) {
			t.Errorf("got %q, want %q in it, for:\n%s", got, c.want, c.body)
		}
	}
}
