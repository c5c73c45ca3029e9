package footing_test

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path"
	"path/filepath"
	"sort"
	"strconv"
	"strings"
	"testing"
)

// arrows is the whole table of imports between the project's packages. Every package may import internal/num and
// internal/finding besides, except those two themselves. A package that is not in the table fails the test, so that a
// new one is placed on purpose.
var arrows = map[string][]string{
	"internal/num":       {},
	"internal/finding":   {},
	"meta/effect":        {},
	"meta":               {"meta/effect"},
	"meta/smallstudy":    {"meta", "meta/effect"},
	"meta/prior":         {"meta", "meta/smallstudy", "meta/effect"},
	"power":              {},
	"importers":          {"meta/effect"},
	"plan/result":        {},
	"plan/choices":       {"plan/result"},
	"plan/edition":       {"plan/result"},
	"plan":               {"importers", "meta", "meta/effect", "meta/smallstudy", "meta/prior", "power", "plan/result", "plan/choices", "plan/edition"},
	"plan/qualify":       {"importers", "meta", "meta/effect", "meta/smallstudy", "meta/prior", "power", "plan", "plan/result", "testdata/published"},
	"reports":            {"plan", "plan/result", "plan/edition", "plan/qualify"},
	"reports/check":      {"plan", "plan/result", "plan/edition", "reports"},
	"testdata/published": {},
	"cmd/footing":        {"plan", "plan/result", "plan/edition", "plan/qualify", "reports", "reports/check", "importers", "testdata/published"},
}

// groundFloor may be imported by every package but itself.
var groundFloor = []string{"internal/num", "internal/finding"}

// fromTests may be imported by the tests of any package.
var fromTests = []string{"testdata/published"}

func TestArrowsBetweenPackages(t *testing.T) {
	seen := map[string]bool{}
	err := filepath.WalkDir(".", func(file string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && (strings.HasPrefix(d.Name(), ".") && file != "." || d.Name() == "node_modules") {
			return fs.SkipDir
		}
		if d.IsDir() || !strings.HasSuffix(file, ".go") {
			return nil
		}
		pkg := path.Dir(filepath.ToSlash(file))
		if pkg == "." {
			return nil
		}
		allowed, known := arrows[pkg]
		if !known {
			t.Errorf("%s: package %s is not in the table of arrows (arrows_test.go); place it there", file, pkg)
			return nil
		}
		seen[pkg] = true
		parsed, err := parser.ParseFile(token.NewFileSet(), file, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		for _, imported := range parsed.Imports {
			to, _ := strconv.Unquote(imported.Path.Value)
			if !strings.HasPrefix(to, "footing/") {
				continue
			}
			to = strings.TrimPrefix(to, "footing/")
			isTest := strings.HasSuffix(file, "_test.go")
			if !mayImport(pkg, to, allowed, isTest) {
				t.Errorf("%s: %s must not import %s (allowed: %s)", file, pkg, to, strings.Join(allowed, ", "))
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	for _, pkg := range []string{"internal/num", "meta/effect", "meta", "power", "importers", "plan", "reports", "cmd/footing"} {
		if !seen[pkg] {
			t.Errorf("package %s holds no Go file: is the test run at the top of the module?", pkg)
		}
	}
}

func mayImport(from, to string, allowed []string, isTest bool) bool {
	for _, ground := range groundFloor {
		if to == ground {
			return from != "internal/num" && from != "internal/finding" || isTest && from == to
		}
	}
	if isTest {
		if from == to {
			return true // an external test package of the same folder
		}
		for _, open := range fromTests {
			if to == open {
				return true
			}
		}
	}
	for _, a := range allowed {
		if a == to {
			return true
		}
	}
	return false
}

// TestArrowsHaveNoCycle checks the table itself: a cycle in it would not compile, but would be found late.
func TestArrowsHaveNoCycle(t *testing.T) {
	const (
		open = 1
		done = 2
	)
	state := map[string]int{}
	var visit func(pkg string, trail []string)
	visit = func(pkg string, trail []string) {
		switch state[pkg] {
		case done:
			return
		case open:
			t.Errorf("the table of arrows has a cycle: %s", strings.Join(append(trail, pkg), " -> "))
			return
		}
		state[pkg] = open
		for _, to := range arrows[pkg] {
			if _, known := arrows[to]; !known {
				t.Errorf("the table lets %s import %s, which it does not hold", pkg, to)
			}
			visit(to, append(trail, pkg))
		}
		state[pkg] = done
	}
	packages := make([]string, 0, len(arrows))
	for pkg := range arrows {
		packages = append(packages, pkg)
	}
	sort.Strings(packages)
	for _, pkg := range packages {
		visit(pkg, nil)
	}
}
