package main

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"footing/plan"

	"github.com/santhosh-tekuri/jsonschema/v6"
)

// TestDocumentsMeetTheirSchema holds what the commands print against the schema that they publish.
func TestDocumentsMeetTheirSchema(t *testing.T) {
	dir := exampleFolder(t)
	if err := os.WriteFile(filepath.Join(dir, "one.csv"), []byte("study,estimate,standard error\nAsh,0.4,0.2\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(dir, "bare.yaml"), []byte("range: {smallest worthwhile effect: 0.4}\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ schema, args string }{
		{"read", "read evidence.xlsx --json"},
		{"read", "read plan.yaml --json"},
		{"read", "read one.csv --json"},
		{"extractions", "read evidence.xlsx --against new.csv --json"},
		{"pool", "pool evidence.xlsx --json"},
		{"pool", "pool one.csv --json"},
		{"pool", "pool ../binary/evidence.xlsx --json"},
		{"size", "size --effect 0.2,0.5 --json"},
		{"size", "size --effect 0,0.5 --json"},
		{"size", "size --outcome binary --control-risk 0.3 --effect 0.7 --test fisher-exact --json"},
		{"plan", "plan plan.yaml --json --no-files"},
		{"plan", "plan bare.yaml --json --no-files"},
		{"plan", "plan ../binary/plan.yaml --json --no-files"},
		{"compare", "compare plan.yaml --json"},
		{"methods", "methods --json"},
	} {
		t.Run(c.args, func(t *testing.T) {
			out, errOut, code := execute(dir, strings.Fields(c.args))
			if code > exitNo {
				t.Fatalf("exit code %d: %s", code, errOut)
			}
			validate(t, c.schema, out)
		})
	}
}

func validate(t *testing.T, name, document string) {
	t.Helper()
	schema, err := jsonschema.UnmarshalJSON(bytes.NewReader(plan.Schema(name)))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	if err := c.AddResource(name+".json", schema); err != nil {
		t.Fatal(err)
	}
	compiled, err := c.Compile(name + ".json")
	if err != nil {
		t.Fatal(err)
	}
	if !json.Valid([]byte(document)) {
		t.Fatal("no JSON")
	}
	value, err := jsonschema.UnmarshalJSON(strings.NewReader(document))
	if err != nil {
		t.Fatal(err)
	}
	if err := compiled.Validate(value); err != nil {
		t.Error(err)
	}
	// a document of another kind must not pass, or the schema says nothing
	if compiled.Validate(map[string]any{"schema": "x"}) == nil {
		t.Errorf("the schema %s takes anything", name)
	}
}
