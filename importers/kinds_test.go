package importers

import (
	"go/ast"
	"go/parser"
	"go/token"
	"strconv"
	"strings"
	"testing"
)

// Every kind that the code makes is listed, and every listed one is made.
func TestKindsAreListed(t *testing.T) {
	pkgs, err := parser.ParseDir(token.NewFileSet(), ".", nil, 0)
	if err != nil {
		t.Fatal(err)
	}
	at := map[string]int{"problem": 0, "note": 1, "tell": 1, "add": 1, "addAt": 1}
	made := map[string]bool{}
	literal := func(e ast.Expr) string {
		if l, ok := e.(*ast.BasicLit); ok && l.Kind == token.STRING {
			s, _ := strconv.Unquote(l.Value)
			return s
		}
		return ""
	}
	for name, f := range pkgs["importers"].Files {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		ast.Inspect(f, func(n ast.Node) bool {
			switch n := n.(type) {
			case *ast.CallExpr:
				fn := ""
				switch f := n.Fun.(type) {
				case *ast.Ident:
					fn = f.Name
				case *ast.SelectorExpr:
					fn = f.Sel.Name
				}
				if i, ok := at[fn]; ok && i < len(n.Args) {
					if s := literal(n.Args[i]); s != "" && !strings.Contains(s, " ") {
						made[s] = true
					}
				}
			case *ast.KeyValueExpr:
				if k, ok := n.Key.(*ast.Ident); ok && k.Name == "Kind" {
					if s := literal(n.Value); s != "" {
						made[s] = true
					}
				}
			}
			return true
		})
	}
	for _, m := range []Meaning{RiskOfBias, Direction, SidesOfP, ScaleOf, Better} {
		made[strings.ReplaceAll(string(m), " ", "-")+"-not-understood"] = true
	}
	for k := range made {
		if kinds[k] == "" {
			t.Errorf("the kind %q is not listed", k)
		}
	}
	for k := range kinds {
		if !made[k] {
			t.Errorf("the kind %q is listed but never made", k)
		}
	}
}
