package optics_test

import (
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"go/types"
	"regexp"
	"slices"
	"strings"
	"sync"
	"testing"

	"golang.org/x/tools/go/packages"
)

const module = "meniscus.example"

// code is a package, parsed and with its types.
type code struct {
	path  string
	fset  *token.FileSet
	files []*ast.File
	info  *types.Info
}

// loadOptics gives the packages of optics without their tests, and every package that they import, by path.
var loadOptics = sync.OnceValues(func() ([]code, map[string]*types.Package) {
	loaded, err := packages.Load(&packages.Config{
		Mode: packages.NeedName | packages.NeedFiles | packages.NeedCompiledGoFiles | packages.NeedImports |
			packages.NeedSyntax | packages.NeedTypes | packages.NeedTypesInfo,
	}, "./...")
	if err != nil {
		return nil, nil
	}
	var all []code
	known := map[string]*types.Package{}
	broken := false
	packages.Visit(loaded, nil, func(p *packages.Package) {
		broken = broken || len(p.Errors) > 0
		if p.Types != nil {
			known[p.PkgPath] = p.Types
		}
	})
	if broken {
		return nil, nil
	}
	for _, p := range loaded {
		all = append(all, code{p.PkgPath, p.Fset, p.Syntax, p.TypesInfo})
	}
	return all, known
})

// opticsCode gives what loadOptics found, and fails the test where it found nothing to look at.
func opticsCode(t *testing.T) ([]code, map[string]*types.Package) {
	t.Helper()
	all, known := loadOptics()
	if len(all) < len(layers) {
		t.Fatalf("%d packages of optics could be loaded; go build ./optics/... says why not more", len(all))
	}
	return all, known
}

// known imports from a map.
type known map[string]*types.Package

// Import finds a package.
func (k known) Import(path string) (*types.Package, error) {
	if p := k[path]; p != nil {
		return p, nil
	}
	return nil, fmt.Errorf("no package of optics imports %q", path)
}

// check gives the types of a package that exists as text only, and what is wrong with them.
func check(t *testing.T, path, text string) (code, []types.Error) {
	t.Helper()
	_, packages := opticsCode(t)
	c := code{path: path, fset: token.NewFileSet(), info: &types.Info{
		Types: map[ast.Expr]types.TypeAndValue{}, Defs: map[*ast.Ident]types.Object{}, Uses: map[*ast.Ident]types.Object{},
	}}
	file, err := parser.ParseFile(c.fset, "text.go", text, parser.ParseComments|parser.SkipObjectResolution)
	if err != nil {
		t.Fatalf("%v in:\n%s", err, text)
	}
	c.files = []*ast.File{file}
	var errs []types.Error
	conf := types.Config{Importer: known(packages), Error: func(err error) { errs = append(errs, err.(types.Error)) }}
	_, err = conf.Check(path, c.fset, c.files, c.info) // Every error also goes to conf.Error.
	if (err != nil) != (errs != nil) {
		t.Fatal(err)
	}
	return c, errs
}

// problem is what a rule reports, with its place.
func (c code) problem(n ast.Node, format string, args ...any) string {
	return fmt.Sprintf("%s: %s", c.fset.Position(n.Pos()), fmt.Sprintf(format, args...))
}

// exported calls f for every function that users of the package can call: exported, and, where it is a method, of an
// exported type.
func (c code) exported(f func(*ast.FuncDecl)) {
	for _, file := range c.files {
		for _, d := range file.Decls {
			fn, ok := d.(*ast.FuncDecl)
			if !ok || !fn.Name.IsExported() {
				continue
			}
			if fn.Recv != nil {
				signature := c.info.Defs[fn.Name].Type().(*types.Signature)
				if named := namedOf(signature.Recv().Type()); named == nil || !named.Obj().Exported() {
					continue
				}
			}
			f(fn)
		}
	}
}

// namedOf gives the defined type that a type is or points to, and nil where there is none.
func namedOf(t types.Type) *types.Named {
	if p, ok := types.Unalias(t).(*types.Pointer); ok {
		t = p.Elem()
	}
	named, _ := types.Unalias(t).(*types.Named)
	return named
}

// unitOf gives the type of optics/unit that an expression has as a number, and nil where it has none.
func (c code) unitOf(e ast.Expr) *types.Named {
	named, ok := types.Unalias(c.info.Types[e].Type).(*types.Named)
	if !ok || named.Obj().Pkg() == nil || named.Obj().Pkg().Path() != module+"/optics/unit" {
		return nil
	}
	if basic, ok := named.Underlying().(*types.Basic); !ok || basic.Info()&types.IsNumeric == 0 {
		return nil
	}
	return named
}

// constant reports whether the compiler knows the value of an expression.
func (c code) constant(e ast.Expr) bool { return c.info.Types[e].Value != nil }

var sourceLine = regexp.MustCompile(`(?m)^Source: \S`)

// unsourced: every exported function says where its formula comes from.
func unsourced(c code) []string {
	var problems []string
	c.exported(func(fn *ast.FuncDecl) {
		if !sourceLine.MatchString(fn.Doc.Text()) {
			problems = append(problems, c.problem(fn, "%s has no line that begins with Source: in its comment", fn.Name.Name))
		}
	})
	return problems
}

// bare: outside unit, an exported function takes and gives quantities with a unit. What has none says that it is
// dimensionless.
func bare(c code) []string {
	if c.path == module+"/optics/unit" {
		return nil
	}
	var problems []string
	c.exported(func(fn *ast.FuncDecl) {
		signature := c.info.Defs[fn.Name].Type().(*types.Signature)
		if hasFloat(signature.Params()) || hasFloat(signature.Results()) {
			if !strings.Contains(fn.Doc.Text(), "dimensionless") {
				problems = append(problems, c.problem(fn, "%s has a float without a unit, and does not say that it is dimensionless",
					fn.Name.Name))
			}
		}
	})
	return problems
}

// hasFloat reports whether a type holds a float that is no defined type: itself, an element, a type argument, a parameter
// or a result. It does not look into structs, whose fields have names and comments of their own.
func hasFloat(t types.Type) bool {
	switch t := types.Unalias(t).(type) {
	case *types.Basic:
		return t.Info()&(types.IsFloat|types.IsComplex) != 0
	case *types.Named:
		for i := range t.TypeArgs().Len() {
			if hasFloat(t.TypeArgs().At(i)) {
				return true
			}
		}
	case *types.Slice:
		return hasFloat(t.Elem())
	case *types.Array:
		return hasFloat(t.Elem())
	case *types.Pointer:
		return hasFloat(t.Elem())
	case *types.Map:
		return hasFloat(t.Key()) || hasFloat(t.Elem())
	case *types.Signature:
		return hasFloat(t.Params()) || hasFloat(t.Results())
	case *types.Tuple:
		for i := range t.Len() {
			if hasFloat(t.At(i).Type()) {
				return true
			}
		}
	}
	return false
}

// multiplied: outside unit, quantities are not multiplied or divided with each other by an operator, whose
// result would have a wrong unit. Unit has a method for each product that means something.
func multiplied(c code) []string {
	if c.path == module+"/optics/unit" {
		return nil
	}
	var problems []string
	look := func(n ast.Node, op token.Token, x, y ast.Expr) {
		switch op {
		case token.MUL, token.QUO, token.MUL_ASSIGN, token.QUO_ASSIGN:
			if c.unitOf(x) != nil && c.unitOf(y) != nil && !c.constant(x) && !c.constant(y) {
				problems = append(problems, c.problem(n, "%v between two quantities in %s gives one of the same unit",
					op, c.unitOf(x).Obj().Name()))
			}
		}
	}
	for _, file := range c.files {
		ast.Inspect(file, func(n ast.Node) bool {
			switch n := n.(type) {
			case *ast.BinaryExpr:
				look(n, n.Op, n.X, n.Y)
			case *ast.AssignStmt:
				if len(n.Lhs) == 1 && len(n.Rhs) == 1 {
					look(n, n.Tok, n.Lhs[0], n.Rhs[0])
				}
			}
			return true
		})
	}
	return problems
}

// relabelled are the functions that may give a number another unit by a conversion, each with its reason.
var relabelled = map[string]string{
	"surface.Curvature.Rotate": "a curvature turns as a power vector does, and goes back to 1/m",
	"surface.Curvature.Radii":  "a curvature has its principal meridians as a power vector has, and goes back to 1/m",
}

// relabels: outside unit, a conversion does not give a quantity another unit with the same number: that is what the
// methods of unit compute.
func relabels(c code) []string {
	if c.path == module+"/optics/unit" {
		return nil
	}
	var problems []string
	for _, file := range c.files {
		for _, d := range file.Decls {
			fn, ok := d.(*ast.FuncDecl)
			if ok {
				if _, ok := relabelled[c.nameOf(fn)]; ok {
					continue
				}
			}
			ast.Inspect(d, func(n ast.Node) bool {
				call, ok := n.(*ast.CallExpr)
				if !ok || len(call.Args) != 1 || !c.info.Types[call.Fun].IsType() || c.constant(call.Args[0]) {
					return true
				}
				from, to := c.unitOf(call.Args[0]), c.unitOf(call)
				if from != nil && to != nil && from.Obj() != to.Obj() {
					problems = append(problems, c.problem(call, "a conversion makes %s of %s without changing the number",
						to.Obj().Name(), from.Obj().Name()))
				}
				return true
			})
		}
	}
	return problems
}

// nameOf gives package.Function or package.Type.Method.
func (c code) nameOf(fn *ast.FuncDecl) string {
	name := fn.Name.Name
	if fn.Recv != nil {
		if named := namedOf(c.info.Defs[fn.Name].Type().(*types.Signature).Recv().Type()); named != nil {
			name = named.Obj().Name() + "." + name
		}
	}
	return c.path[strings.LastIndex(c.path, "/")+1:] + "." + name
}

// silent are the functions of fmt that give text back and write nothing.
var silent = regexp.MustCompile(`^(Sprint|Sprintf|Sprintln|Errorf|Append|Appendf|Appendln|Stringer|State|Formatter)$`)

// writes: optics has no output.
func writes(c code) []string {
	var problems []string
	for ident, object := range c.info.Uses {
		_, builtin := object.(*types.Builtin)
		if builtin && strings.HasPrefix(object.Name(), "print") ||
			object.Pkg() != nil && object.Pkg().Path() == "fmt" && object.Parent() == object.Pkg().Scope() && !silent.MatchString(object.Name()) {
			problems = append(problems, c.problem(ident, "%s writes or reads", object.Name()))
		}
	}
	slices.Sort(problems)
	return problems
}

// rules are the rules that optics keeps.
var rules = map[string]func(code) []string{
	"every exported function has its source":        unsourced,
	"no exported function has a float without unit": bare,
	"no operator multiplies two quantities":         multiplied,
	"no conversion changes a unit":                  relabels,
	"nothing is written":                            writes,
}

func TestArchitectureOpticsKeepsItsRules(t *testing.T) {
	t.Parallel()
	all, _ := opticsCode(t)
	named := map[string]bool{}
	for name, rule := range rules {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			for _, c := range all {
				for _, problem := range rule(c) {
					t.Error(problem)
				}
			}
		})
	}
	for _, c := range all {
		c.exported(func(fn *ast.FuncDecl) { named[c.nameOf(fn)] = true })
	}
	for name := range relabelled {
		if !named[name] {
			t.Errorf("%s is on the list of those that may change a unit and does not exist", name)
		}
	}
}

// Each rule is shown code that breaks it, and the same code mended.
func TestArchitectureRulesReportWhatBreaksThem(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		rule        string
		broken, fit string // declarations
	}{
		{"every exported function has its source",
			"// F gives x.\nfunc F(x unit.Dioptre) unit.Dioptre { return x }",
			"// F gives x.\n//\n// Source: definition.\nfunc F(x unit.Dioptre) unit.Dioptre { return x }"},
		{"every exported function has its source",
			"func F() {}",
			"func f() {}"},
		{"every exported function has its source",
			"type T struct{}\n// M does. Source: is not the beginning of this line.\nfunc (t *T) M() {}",
			"type t struct{}\nfunc (t *t) M() {}"},
		{"every exported function has its source",
			"type T[X any] struct{}\nfunc (t T[X]) M() {}",
			"type T[X any] struct{}\n// Source: definition.\nfunc (t T[X]) M() {}"},
		{"no exported function has a float without unit",
			"// F takes x.\nfunc F(x float64) {}",
			"// F takes x, dimensionless.\nfunc F(x float64) {}"},
		{"no exported function has a float without unit",
			"func F() (unit.Dioptre, []float64) { return 0, nil }",
			"func F() (unit.Dioptre, []unit.Dioptre) { return 0, nil }"},
		{"no exported function has a float without unit",
			"func F(x unit.Optional[float64]) {}",
			"func F(x unit.Optional[unit.Degree]) {}"},
		{"no exported function has a float without unit",
			"func F(f func(x float64) unit.Degree) {}",
			"func F(f func(x unit.Degree) unit.Degree) {}"},
		{"no exported function has a float without unit",
			"func F(x ...float32) {}",
			"func f(x ...float32) {}"},
		{"no operator multiplies two quantities",
			"func f(x, y unit.Dioptre) { _ = x * y }",
			"func f(x, y unit.Dioptre) { _ = 2*x + y/2 }"},
		{"no operator multiplies two quantities",
			"func f(x, y unit.Millimetre) { _ = x / y }",
			"func f(x, y unit.Millimetre) { _ = float64(x) / float64(y) }"},
		{"no operator multiplies two quantities",
			"func f(x, y unit.Millimetre) { x *= y; _ = x }",
			"func f(x, y unit.Millimetre) { x *= 2; _ = x + y }"},
		{"no conversion changes a unit",
			"func f(x unit.Millimetre) unit.Micrometre { return unit.Micrometre(x) }",
			"func f(x unit.Millimetre) unit.Micrometre { return x.Micrometres() }"},
		{"no conversion changes a unit",
			"func f(x unit.Millimetre) unit.Micrometre { return unit.Micrometre(2*x) }",
			"func f(x unit.Millimetre) unit.Millimetre { return unit.Millimetre(2*x) }"},
		{"nothing is written",
			"func f() { fmt.Println() }",
			"func f() { _ = fmt.Sprintln() }"},
		{"nothing is written",
			"func f() { println() }",
			"func f() { println := func() {}; println() }"},
	} {
		const frame = "package p\n\nimport (\n\t\"fmt\"\n\t\"" + module + "/optics/unit\"\n)\n\n" +
			"var _ = fmt.Sprint(unit.Air)\n\n"
		rule := rules[c.rule]
		for text, wrong := range map[string]bool{c.broken: true, c.fit: false} {
			parsed, errs := check(t, module+"/optics/p", frame+text)
			if errs != nil {
				t.Fatalf("%v in:\n%s", errs, text)
			}
			if got := rule(parsed); wrong != (got != nil) {
				t.Errorf("%s: got %q, want a problem: %v, for:\n%s", c.rule, got, wrong, text)
			}
		}
	}
}
