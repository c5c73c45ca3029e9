package plan

import (
	"errors"
	"fmt"
	"reflect"
	"sort"
	"strconv"
	"strings"

	"footing/importers"
	"footing/internal/finding"

	"go.yaml.in/yaml/v4"
)

// decoder puts a parsed YAML document into a File. It knows every key by the File's own tags, goes on after a mistake
// and collects all of them with line and column.
type decoder struct {
	file     string
	problems finding.Problems
	at       map[string]finding.Place // where each key's value stands, by its path: "study: alpha"
}

func (d *decoder) bad(n *yaml.Node, kind, what, mend string) {
	d.problems = append(d.problems, finding.Finding{Severity: finding.Error, Kind: kind, Place: d.place(n), What: what, Mend: mend})
}

func (d *decoder) place(n *yaml.Node) finding.Place {
	return finding.Place{File: d.file, Line: n.Line, Column: n.Column}
}

// syntaxProblems turns what the YAML reader says into problems.
func (d *decoder) syntaxProblems(err error) {
	say := func(line, column int, what string) {
		what = strings.TrimPrefix(strings.TrimSpace(what), "yaml: ")
		p := finding.Place{File: d.file, Line: line, Column: column}
		d.problems = append(d.problems, finding.Finding{Severity: finding.Error, Kind: "yaml-syntax", Place: p,
			What: "this is no valid YAML: " + what, Mend: "look at the indentation, the colons and the quotation marks there"})
	}
	var many *yaml.LoadErrors
	var one *yaml.LoadError
	switch {
	case errors.As(err, &many):
		for _, e := range many.Errors {
			say(e.Mark.Line, e.Mark.Column, e.Message)
		}
	case errors.As(err, &one):
		say(one.Mark.Line, one.Mark.Column, one.Message)
	default:
		say(0, 0, err.Error())
	}
}

func resolve(n *yaml.Node) *yaml.Node {
	for n.Kind == yaml.AliasNode && n.Alias != nil {
		n = n.Alias
	}
	return n
}

func isNull(n *yaml.Node) bool {
	return n.Kind == yaml.ScalarNode && (n.Tag == "!!null" || n.Tag == "" && n.Style == 0 && (n.Value == "" || n.Value == "null" || n.Value == "~"))
}

// put sets v from n; path names the key for messages.
func (d *decoder) put(v reflect.Value, n *yaml.Node, path string) {
	n = resolve(n)
	if isNull(n) {
		return // a key without a value is a key not given
	}
	d.at[path] = d.place(n)
	switch v.Kind() {
	case reflect.Pointer:
		p := reflect.New(v.Type().Elem())
		d.put(p.Elem(), n, path)
		v.Set(p)
	case reflect.Struct:
		d.putStruct(v, n, path)
	case reflect.Slice:
		d.putSlice(v, n, path)
	case reflect.Map:
		d.putMap(v, n, path)
	default:
		d.putScalar(v, n, path)
	}
}

func (d *decoder) wrongType(n *yaml.Node, path, want string) {
	have := "a list"
	switch n.Kind {
	case yaml.MappingNode:
		have = "a mapping"
	case yaml.ScalarNode:
		have = strconv.Quote(n.Value)
	}
	d.bad(n, "wrong-type", fmt.Sprintf("%s: %s stands where %s belongs", path, have, want), "write "+want)
}

func (d *decoder) putScalar(v reflect.Value, n *yaml.Node, path string) {
	want := map[reflect.Kind]string{reflect.String: "words", reflect.Bool: "true or false", reflect.Float64: "a number",
		reflect.Int: "a whole number", reflect.Uint64: "a whole number from 0 up"}[v.Kind()]
	if n.Kind != yaml.ScalarNode {
		d.wrongType(n, path, want)
		return
	}
	plain := n.Style&(yaml.SingleQuotedStyle|yaml.DoubleQuotedStyle|yaml.LiteralStyle|yaml.FoldedStyle) == 0
	ok := false
	switch v.Kind() {
	case reflect.String:
		v.SetString(n.Value)
		ok = true
	case reflect.Bool:
		switch strings.ToLower(n.Value) {
		case "true", "yes":
			v.SetBool(true)
			ok = plain
		case "false", "no":
			ok = plain
		}
	case reflect.Float64:
		x, err := strconv.ParseFloat(n.Value, 64)
		if ok = plain && err == nil && plainNumber(n.Value); ok {
			v.SetFloat(x)
		}
	case reflect.Int:
		x, err := strconv.Atoi(n.Value)
		if ok = plain && err == nil; ok {
			v.SetInt(int64(x))
		}
	case reflect.Uint64:
		x, err := strconv.ParseUint(n.Value, 10, 64)
		if ok = plain && err == nil; ok {
			v.SetUint(x)
		}
	}
	if !ok {
		d.wrongType(n, path, want)
	}
}

// plainNumber keeps infinities, hexadecimal figures and digit separators out of a plan file.
func plainNumber(s string) bool {
	return s != "" && strings.Trim(s, "+-.0123456789eE") == ""
}

func (d *decoder) putSlice(v reflect.Value, n *yaml.Node, path string) {
	list := n.Content
	if n.Kind != yaml.SequenceNode {
		if n.Kind == yaml.MappingNode || v.Type().Elem().Kind() == reflect.Struct {
			d.wrongType(n, path, "a list")
			return
		}
		list = []*yaml.Node{n} // a single word where a list of words belongs
	}
	out := reflect.MakeSlice(v.Type(), len(list), len(list))
	for i, e := range list {
		d.put(out.Index(i), e, fmt.Sprintf("%s: %d", path, i+1))
	}
	v.Set(out)
}

func (d *decoder) putMap(v reflect.Value, n *yaml.Node, path string) {
	if n.Kind != yaml.MappingNode {
		d.wrongType(n, path, "a mapping of names to values")
		return
	}
	out := reflect.MakeMap(v.Type())
	d.pairs(n, func(key string, k, value *yaml.Node) {
		e := reflect.New(v.Type().Elem()).Elem()
		d.put(e, value, join(path, key))
		out.SetMapIndex(reflect.ValueOf(key), e)
	})
	v.Set(out)
}

// pairs visits the keys of a mapping and refuses one that stands twice.
func (d *decoder) pairs(n *yaml.Node, visit func(key string, k, value *yaml.Node)) {
	seen := map[string]int{}
	for i := 0; i+1 < len(n.Content); i += 2 {
		k := resolve(n.Content[i])
		if k.Kind != yaml.ScalarNode {
			d.bad(k, "key-not-words", "a key must be words", "write key: value")
			continue
		}
		if line, twice := seen[k.Value]; twice {
			d.bad(k, "key-twice", fmt.Sprintf("%q stands here a second time (first in line %d)", k.Value, line), "delete one of them")
			continue
		}
		seen[k.Value] = k.Line
		visit(k.Value, k, n.Content[i+1])
	}
}

func join(path, key string) string {
	if path == "" {
		return key
	}
	return path + ": " + key
}

var assumedType = reflect.TypeFor[Assumed]()

func (d *decoder) putStruct(v reflect.Value, n *yaml.Node, path string) {
	if v.Type() == assumedType {
		v.FieldByName("Line").SetInt(int64(n.Line))
		v.FieldByName("Column").SetInt(int64(n.Column))
		if n.Kind == yaml.ScalarNode {
			d.putScalar(v.FieldByName("Value"), n, path)
			return
		}
	}
	if n.Kind != yaml.MappingNode {
		want := "a mapping of keys to values"
		if v.Type() == assumedType {
			want = "a number or {value: .., low: .., high: .., source: ..}"
		}
		d.wrongType(n, path, want)
		return
	}
	fields, names := keysOf(v.Type())
	hasValue := false
	d.pairs(n, func(key string, k, value *yaml.Node) {
		i, known := fields[key]
		if !known {
			d.unknownKey(k, key, names)
			return
		}
		hasValue = hasValue || key == "value" || key == "pool"
		d.put(v.Field(i), value, join(path, key))
	})
	if v.Type() == assumedType && !hasValue {
		d.bad(n, "value-missing", path+": no value is given", "add value: .. (or pool: .. to take it from the evidence sheet)")
	}
}

func (d *decoder) unknownKey(k *yaml.Node, key string, names []string) {
	what := fmt.Sprintf("%q is not a key here", key)
	if near := importers.Nearest(key, names); near != "" {
		d.bad(k, "unknown-key", what, fmt.Sprintf("did you mean %q?", near))
		return
	}
	for _, n := range names { // "SD: 4" and "standarddeviation" are near in another sense
		if strings.EqualFold(strings.NewReplacer(" ", "", "-", "", "_", "").Replace(key), strings.ReplaceAll(n, " ", "")) {
			d.bad(k, "unknown-key", what, fmt.Sprintf("did you mean %q?", n))
			return
		}
	}
	if name, where := elsewhere(key); where != "" {
		mend := fmt.Sprintf("it belongs under %q", where)
		if name != key {
			mend = fmt.Sprintf("did you mean %q, which belongs under %q?", name, where)
		}
		d.bad(k, "unknown-key", what, mend)
		return
	}
	d.bad(k, "unknown-key", what, "the keys here are "+strings.Join(names, ", "))
}

// elsewhere names the section of a plan that has the key, or one near it.
func elsewhere(key string) (name, section string) {
	t := reflect.TypeFor[File]()
	for _, near := range []bool{false, true} {
		for i := 0; i < t.NumField(); i++ {
			f := t.Field(i)
			if f.Type.Kind() != reflect.Struct {
				continue
			}
			fields, names := keysOf(f.Type)
			if _, ok := fields[key]; ok {
				return key, f.Tag.Get("yaml") + ":"
			}
			if n := importers.Nearest(key, names); near && n != "" {
				return n, f.Tag.Get("yaml") + ":"
			}
		}
	}
	return "", ""
}

// keysOf lists the keys of a struct by its yaml tags, in the order of its fields.
func keysOf(t reflect.Type) (fields map[string]int, names []string) {
	fields = map[string]int{}
	for i := 0; i < t.NumField(); i++ {
		tag := t.Field(i).Tag.Get("yaml")
		if tag == "" || tag == "-" {
			continue
		}
		fields[tag] = i
		names = append(names, tag)
	}
	return fields, names
}

// sorted orders the problems by where they stand.
func (d *decoder) sorted() finding.Problems {
	sort.SliceStable(d.problems, func(i, j int) bool {
		a, b := d.problems[i].Place, d.problems[j].Place
		return a.Line < b.Line || a.Line == b.Line && a.Column < b.Column
	})
	return d.problems
}
