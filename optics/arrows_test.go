package optics_test

import (
	"fmt"
	"go/parser"
	"go/token"
	"io/fs"
	"maps"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// layers are the packages of optics: each imports only packages with a lower number.
var layers = map[string]int{
	"unit":     0,
	"vergence": 1,
	"surface":  2,
	"cornea":   3,
	"lens":     3,
	"tear":     4,
	"fitting":  5,
}

// pure are the packages of the standard library that optics may use: none reads a file, a clock or an
// unseeded generator, and none writes but fmt, which has a rule of its own.
var pure = []string{
	"cmp", "errors", "fmt", "iter", "maps", "math", "math/bits", "math/cmplx", "slices", "sort", "strconv",
	"strings", "unicode", "unicode/utf8",
}

// imports are the imports of one package, its tests left out.
type imports struct {
	path string
	of   []string
}

// importProblems says which imports of a package point the wrong way.
func importProblems(p imports) []string {
	var problems []string
	inside := strings.TrimPrefix(p.path, module+"/")
	room, rest, _ := strings.Cut(inside, "/")
	layer, known := layers[rest]
	if room == "optics" && rest != "" && !known {
		problems = append(problems, p.path+" is not in the list of layers in optics/architecture_test.go: give it its place")
	}
	for _, path := range p.of {
		to, ours := strings.CutPrefix(path, module+"/")
		toRoom, toRest, _ := strings.Cut(to, "/")
		allowed := true
		switch room {
		case "optics":
			toLayer, toKnown := layers[toRest]
			allowed = ours && toRoom == "optics" && toKnown && known && toLayer < layer ||
				!ours && (slices.Contains(pure, path) || strings.HasPrefix(path, "gonum.org/v1/gonum/"))
		case "proto":
			allowed = !ours || toRoom == "proto"
		case "client":
			if ours {
				embedded := within(inside, "client/embedded")
				allowed = toRoom == "proto" || toRoom == "client" || to == "optics/unit" ||
					embedded && (toRoom == "server" || toRoom == "optics")
			}
			if within(to, "client/embedded") && inside == "client" {
				allowed = false // Every user of the client would link the server.
			}
		case "server":
			allowed = !ours || toRoom == "server" || toRoom == "optics" || toRoom == "proto"
		case "cmd":
			own, _, _ := strings.Cut(rest, "/")
			allowed = !ours || toRoom != "cmd" || within(to, "cmd/"+own)
		}
		if !allowed {
			problems = append(problems, p.path+" imports "+path)
		}
	}
	return problems
}

// within reports whether a package is the one named or lies below it.
func within(path, root string) bool { return path == root || strings.HasPrefix(path, root+"/") }

// linked are all packages of the module that a package imports, directly or through others.
func linked(all []imports, path string) []string {
	var found []string
	for _, p := range all {
		if p.path != path {
			continue
		}
		for _, to := range p.of {
			if strings.HasPrefix(to, module+"/") && !slices.Contains(found, to) {
				found = append(append(found, to), linked(all, to)...)
			}
		}
	}
	slices.Sort(found)
	return slices.Compact(found)
}

// readImports gives the imports of every package of the module. It reads the files itself: what a test
// reads decides whether its result may be reused, and what a command reads for it does not.
func readImports(t *testing.T) []imports {
	t.Helper()
	found := map[string][]string{}
	err := filepath.WalkDir("..", func(path string, entry fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		name := entry.Name()
		if entry.IsDir() {
			if name != ".." && (name == "testdata" || strings.HasPrefix(name, ".") || strings.HasPrefix(name, "_")) {
				return fs.SkipDir
			}
			return nil
		}
		if filepath.Ext(name) != ".go" || strings.HasSuffix(name, "_test.go") {
			return nil
		}
		file, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		dir, err := filepath.Rel("..", filepath.Dir(path))
		if err != nil {
			return err
		}
		from := module + "/" + filepath.ToSlash(dir)
		var of []string
		for _, spec := range file.Imports {
			to, err := strconv.Unquote(spec.Path.Value)
			if err != nil {
				return err
			}
			of = append(of, to)
		}
		found[from] = append(found[from], of...)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	var all []imports
	for _, path := range slices.Sorted(maps.Keys(found)) {
		slices.Sort(found[path])
		all = append(all, imports{path, slices.Compact(found[path])})
	}
	return all
}

func TestArchitectureImportsPointOneWay(t *testing.T) {
	t.Parallel()
	all := readImports(t)
	for _, p := range all {
		for _, problem := range importProblems(p) {
			t.Error(problem)
		}
	}
	for name := range layers {
		if !slices.ContainsFunc(all, func(p imports) bool { return p.path == module+"/optics/"+name }) {
			t.Errorf("optics/%s is in the list of layers and does not exist", name)
		}
	}
	for _, path := range linked(all, module+"/client") {
		to := strings.TrimPrefix(path, module+"/")
		if within(to, "server") || within(to, "optics") && to != "optics/unit" {
			t.Errorf("an app that uses the client links %s", to)
		}
	}
}

func TestArchitectureImportRulesReportWhatBreaksThem(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		from, to string
		wrong    bool
	}{
		{"optics/vergence", module + "/optics/unit", false},
		{"optics/vergence", "math", false},
		{"optics/fitting", "gonum.org/v1/gonum/integrate/quad", false},
		{"optics/unit", module + "/optics/vergence", true},
		{"optics/cornea", module + "/optics/lens", true},
		{"optics/cornea", module + "/optics/cornea", true},
		{"optics/fitting", module + "/proto/meniscus/v1", true},
		{"optics/fitting", module + "/server", true},
		{"optics/fitting", module + "/optics", true},
		{"optics/astrology", "math", true},
		{"optics/unit", "os", true},
		{"optics/unit", "time", true},
		{"optics/unit", "log/slog", true},
		{"optics/unit", "math/rand/v2", true},
		{"optics/unit", "google.golang.org/grpc", true},
		{"proto/meniscus/v1", "google.golang.org/protobuf/proto", false},
		{"proto/meniscus/v1", module + "/optics/unit", true},
		{"server", module + "/optics/fitting", false},
		{"server", module + "/client", true},
		{"server", module + "/cmd/meniscus", true},
		{"client", module + "/proto/meniscus/v1", false},
		{"client", module + "/optics/unit", false},
		{"client", module + "/optics/fitting", true},
		{"client", module + "/server", true},
		{"client", module + "/client/embedded", true},
		{"client/mobile", module + "/server", true},
		{"client/embedded", module + "/server", false},
		{"cmd/meniscus", module + "/client/embedded", false},
		{"cmd/meniscus", module + "/cmd/meniscus/internal/table", false},
		{"cmd/meniscus", module + "/cmd/meniscusd", true},
	} {
		got := importProblems(imports{path: module + "/" + c.from, of: []string{c.to}})
		if c.wrong != (got != nil) {
			t.Errorf("%s imports %s: got %q, want a problem: %v", c.from, c.to, got, c.wrong)
		}
	}
	chain := []imports{{"m/a", nil}, {module + "/client", []string{module + "/client/x", "fmt"}},
		{module + "/client/x", []string{module + "/server"}}}
	if got, want := fmt.Sprint(linked(chain, module+"/client")), "[meniscus.example/client/x meniscus.example/server]"; got != want {
		t.Errorf("linked gives %s, want %s", got, want)
	}
}
