package plan

import (
	"embed"
	"strings"
)

//go:generate go test -run TestSchemaIsUpToDate . -update

// schemas holds the JSON Schema of every document, generated from the result types.
//
//go:embed schema/*.json
var schemas embed.FS

// SchemaNames lists the documents that have a schema: "plan", "pool", "size", ...
func SchemaNames() []string {
	entries, err := schemas.ReadDir("schema")
	if err != nil {
		panic("plan: " + err.Error()) // embedded at build time
	}
	out := make([]string, len(entries))
	for i, e := range entries {
		out[i] = strings.TrimSuffix(e.Name(), ".json")
	}
	return out
}

// Schema is the JSON Schema of a document, nil where there is none of that name.
func Schema(name string) []byte {
	data, err := schemas.ReadFile("schema/" + name + ".json")
	if err != nil {
		return nil
	}
	return data
}
