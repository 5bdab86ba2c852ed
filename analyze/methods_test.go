package analyze

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"sashlog/analyze/method"
)

// Whatever documents itself as a method is listed, once, with all its parts;
// and whatever an audit runs documents itself.
func TestMethodsAreComplete(t *testing.T) {
	listed := map[string]int{}
	for _, d := range Methods() {
		listed[d.Title]++
		if d.Title == "" || d.Question == "" || d.Formula == "" || len(d.Limits) == 0 || len(d.Sources) == 0 {
			t.Errorf("incomplete: %+v", d)
		}
		if d.Standing != method.Published && d.Standing != method.FromMemory && d.Standing != method.OurAssumption {
			t.Errorf("%s: standing %q", d.Title, d.Standing)
		}
	}
	documented := map[string]bool{}
	files := token.NewFileSet()
	err := filepath.WalkDir(".", func(path string, e fs.DirEntry, err error) error {
		if err != nil || e.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return err
		}
		f, err := parser.ParseFile(files, path, nil, 0)
		if err != nil {
			return err
		}
		ast.Inspect(f, func(n ast.Node) bool {
			lit, ok := n.(*ast.CompositeLit)
			if !ok {
				return true
			}
			if sel, ok := lit.Type.(*ast.SelectorExpr); !ok || sel.Sel.Name != "Doc" {
				return true
			}
			for _, el := range lit.Elts {
				kv, ok := el.(*ast.KeyValueExpr)
				if !ok || kv.Key.(*ast.Ident).Name != "Title" {
					continue
				}
				title, err := strconv.Unquote(kv.Value.(*ast.BasicLit).Value)
				if err != nil || listed[title] != 1 {
					t.Errorf("%s: %q is listed %d times", path, title, listed[title])
				}
				documented[filepath.Dir(path)] = true
			}
			return true
		})
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	// These hold no method: what they use is documented where it lives.
	none := map[string]string{
		"calendar": "local clock and holidays", "cores": "runs parts side by side", "indoor": "operative temperature is in comfort",
		"answerable": "asks which points are there", "advice": "orders what others found", "method": "the form itself",
	}
	run, err := parser.ParseFile(files, "run.go", nil, parser.ImportsOnly)
	if err != nil {
		t.Fatal(err)
	}
	for _, imp := range run.Imports {
		path, _ := strconv.Unquote(imp.Path.Value)
		name, ok := strings.CutPrefix(path, "sashlog/analyze/")
		if ok && !documented[name] && none[name] == "" {
			t.Errorf("an audit runs %s, which documents no method", name)
		}
	}
}
