package plan

import (
	"bytes"
	"encoding/json"
	"flag"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"footing/plan/result"

	"github.com/invopop/jsonschema"
)

var update = flag.Bool("update", false, "write the generated schemas")

// documents are the types that the commands print.
var documents = map[string]any{"read": result.Reading{}, "pool": result.Pool{}, "size": result.Size{}, "plan": result.Plan{},
	"compare": result.Comparison{}, "methods": result.Manual{}, "extractions": result.Extractions{}, "check": result.Check{}}

// schemaOf generates the schema of a document. Pointers, slices and maps may be null, as encoding/json writes them.
func schemaOf(t *testing.T, name string, v any) []byte {
	t.Helper()
	r := &jsonschema.Reflector{ExpandedStruct: true, Anonymous: true}
	for base, dir := range map[string]string{"footing/plan": "./result", "footing/internal": "../internal/finding"} {
		if err := r.AddGoComments(base, dir); err != nil {
			t.Fatal(err)
		}
	}
	s := r.Reflect(v)
	s.Title = "footing/" + name + "/1"
	nullable(s, s.Definitions, reflect.TypeOf(v), map[reflect.Type]bool{}, true)
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetIndent("", "  ")
	if err := enc.Encode(s); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func nullable(s *jsonschema.Schema, defs jsonschema.Definitions, t reflect.Type, done map[reflect.Type]bool, root bool) {
	for t.Kind() == reflect.Pointer || t.Kind() == reflect.Slice || t.Kind() == reflect.Map {
		t = t.Elem()
	}
	if t.Kind() != reflect.Struct || done[t] {
		return
	}
	done[t] = true
	if !root {
		s = defs[t.Name()]
	}
	for i := 0; i < t.NumField(); i++ {
		f := t.Field(i)
		name, _, _ := strings.Cut(f.Tag.Get("json"), ",")
		if p, ok := s.Properties.Get(name); ok {
			switch f.Type.Kind() {
			case reflect.Pointer, reflect.Slice, reflect.Map:
				description := p.Description
				p.Description = ""
				s.Properties.Set(name, &jsonschema.Schema{AnyOf: []*jsonschema.Schema{p, {Type: "null"}}, Description: description})
			}
		}
		nullable(s, defs, f.Type, done, false)
	}
}

func TestSchemaIsUpToDate(t *testing.T) {
	for name, v := range documents {
		path := filepath.Join("schema", name+".json")
		want := schemaOf(t, name, v)
		if *update {
			if err := os.WriteFile(path, want, 0o644); err != nil {
				t.Fatal(err)
			}
			continue
		}
		have, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(have, want) {
			t.Errorf("%s does not match the result types: run go generate ./plan", path)
		}
		if !bytes.Equal(Schema(name), have) && !*update {
			t.Errorf("%s: the embedded schema differs from the file", name)
		}
	}
}
