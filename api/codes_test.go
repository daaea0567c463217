package api

import (
	"go/ast"
	"go/parser"
	"go/token"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// The page lists every code that the rooms which judge can give, each once, in
// its list, and no other.
func TestEveryStableCodeIsListed(t *testing.T) {
	want := map[string]codeList{}
	for _, room := range []string{"../profile", "../internal/assess", "../internal/radio"} {
		files, err := filepath.Glob(room + "/*.go")
		if err != nil || len(files) == 0 {
			t.Fatalf("%s: %d files, %v", room, len(files), err)
		}
		for _, name := range files {
			if !strings.HasSuffix(name, "_test.go") {
				codesIn(t, name, want)
			}
		}
	}
	got := map[string]codeList{}
	for _, c := range stableCodes() {
		if _, twice := got[c.name]; twice || c.meaning == "" {
			t.Errorf("%s stands twice, or has no meaning", c.name)
		}
		if got[c.name] = c.where; c.where == inChoice {
			got[c.name] = inMissing // one kind of constant gives both
		}
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("codes of the sources (-) and of the page (+): %s", diff)
	}
	if len(want) < 50 || want["line_cut"] != inReasons || want["lightning"] != inCautions || want["work_at_height"] != inCautions {
		t.Errorf("the sources are not understood: %v", want)
	}
}

// codesIn collects the codes of a file: constants by their names or type, and
// what is written out where a caution is made.
func codesIn(t *testing.T, name string, into map[string]codeList) {
	t.Helper()
	file, err := parser.ParseFile(token.NewFileSet(), name, nil, parser.SkipObjectResolution)
	if err != nil {
		t.Fatal(err)
	}
	ast.Inspect(file, func(n ast.Node) bool {
		switch n := n.(type) {
		case *ast.ValueSpec:
			for i, value := range n.Values {
				if list := listOfConstant(n.Names[i].Name); list != "" {
					keep(into, value, list)
				}
			}
		case *ast.CallExpr:
			if called(n.Fun) == "add" && file.Name.Name == "assess" && len(n.Args) > 0 {
				keep(into, n.Args[0], inCautions)
			}
		case *ast.CompositeLit:
			cautionsOf(n, into)
		}
		return true
	})
}

// cautionsOf keeps the codes of a Caution, or of a list of them.
func cautionsOf(literal *ast.CompositeLit, into map[string]codeList) {
	if list, ok := literal.Type.(*ast.ArrayType); ok && called(list.Elt) == "Caution" {
		for _, element := range literal.Elts {
			if one, ok := element.(*ast.CompositeLit); ok && len(one.Elts) > 0 {
				keep(into, one.Elts[0], inCautions)
			}
		}
	}
	if called(literal.Type) == "Caution" && len(literal.Elts) > 0 {
		keep(into, literal.Elts[0], inCautions)
	}
}

func called(e ast.Expr) string {
	if name, ok := e.(*ast.Ident); ok {
		return name.Name
	}
	return ""
}

func listOfConstant(name string) codeList {
	for prefix, list := range map[string]codeList{"Reason": inReasons, "Caution": inCautions, "Missing": inMissing, "Warning": inWarnings} {
		if strings.HasPrefix(name, prefix) {
			return list
		}
	}
	return ""
}

func keep(into map[string]codeList, value ast.Expr, list codeList) {
	if literal, ok := value.(*ast.BasicLit); ok && literal.Kind == token.STRING {
		if code, err := strconv.Unquote(literal.Value); err == nil {
			into[code] = list
		}
	}
}
