package main

import (
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"footing/plan"
)

func readme(t *testing.T) string {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("..", "..", "README.md"))
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

// TestReadmeCommandsRun runs every indented footing line of the README in turn, in one folder.
func TestReadmeCommandsRun(t *testing.T) {
	dir := t.TempDir()
	data, err := os.ReadFile(filepath.Join(exampleFolder(t), "evidence.xlsx"))
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(dir, "studies.xlsx"), data, 0o600); err != nil {
		t.Fatal(err)
	}
	ran := 0
	for _, line := range strings.Split(readme(t), "\n") {
		line, _, _ = strings.Cut(line, "#")
		words := strings.Fields(line)
		if !strings.HasPrefix(line, "    ") || len(words) < 2 {
			continue
		}
		if strings.HasPrefix(strings.Join(words, " "), "go run ./cmd/footing ") {
			words = words[2:]
		}
		if name := filepath.Base(words[0]); name != "footing" || strings.Contains(line, "go build") {
			continue
		}
		if _, errOut, code := execute(dir, words[1:]); code != exitDone {
			t.Errorf("%s: exit code %d: %s", strings.TrimSpace(line), code, errOut)
		}
		ran++
	}
	if ran < 4 {
		t.Errorf("only %d commands were found in the README", ran)
	}
}

var yamlBlock = regexp.MustCompile("(?s)```yaml\n(.*?)```")

func TestReadmePlansAreRead(t *testing.T) {
	blocks := yamlBlock.FindAllStringSubmatch(readme(t), -1)
	if len(blocks) == 0 {
		t.Error("the README shows no plan")
	}
	for _, b := range blocks {
		if _, err := plan.Parse("README.md", []byte(b[1])); err != nil {
			t.Errorf("%v in:\n%s", err, b[1])
		}
	}
}

// TestReadmeNamesEveryCommand: the table of commands and the program agree.
func TestReadmeNamesEveryCommand(t *testing.T) {
	text := readme(t)
	for _, c := range (&app{}).root().Commands() {
		if c.Name() != "help" && c.Name() != "completion" && !strings.Contains(text, "| `footing "+c.Name()) {
			t.Errorf("the README's table lacks footing %s", c.Name())
		}
	}
}
