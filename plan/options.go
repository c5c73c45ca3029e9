package plan

import (
	"fmt"
	"reflect"
	"sort"
	"strconv"
	"strings"

	"footing/plan/result"
)

// optionsOf flattens a plan into its keys and values as text, by walking the File's own tags.
func optionsOf(f *File) []result.NamedText {
	var out []result.NamedText
	flatten(reflect.ValueOf(f).Elem(), "", &out)
	return out
}

func flatten(v reflect.Value, path string, out *[]result.NamedText) {
	add := func(text string) {
		if text != "" {
			*out = append(*out, result.NamedText{Name: path, Text: text})
		}
	}
	switch v.Kind() {
	case reflect.Pointer:
		if !v.IsNil() {
			flatten(v.Elem(), path, out)
		}
	case reflect.Struct:
		if v.Type() == assumedType {
			a := v.Interface().(Assumed)
			add(a.text())
			return
		}
		for i := 0; i < v.NumField(); i++ {
			if tag := v.Type().Field(i).Tag.Get("yaml"); tag != "" && tag != "-" {
				flatten(v.Field(i), join(path, tag), out)
			}
		}
	case reflect.Slice:
		for i := 0; i < v.Len(); i++ {
			flatten(v.Index(i), fmt.Sprintf("%s: %d", path, i+1), out)
		}
	case reflect.Map:
		keys := v.MapKeys()
		sort.Slice(keys, func(i, j int) bool { return keys[i].String() < keys[j].String() })
		for _, k := range keys {
			flatten(v.MapIndex(k), join(path, k.String()), out)
		}
	case reflect.String:
		add(v.String())
	case reflect.Bool:
		add(strconv.FormatBool(v.Bool()))
	case reflect.Float64:
		add(strconv.FormatFloat(v.Float(), 'g', -1, 64))
	case reflect.Int, reflect.Int64:
		add(strconv.FormatInt(v.Int(), 10))
	case reflect.Uint64:
		add(strconv.FormatUint(v.Uint(), 10))
	}
}

// text writes an assumption in one line: "0.55 (0.4 to 0.7; pilot 2024)".
func (a Assumed) text() string {
	if a.Pool != "" {
		return "pooled: " + a.Pool
	}
	s := strconv.FormatFloat(a.Value, 'g', -1, 64)
	var more []string
	if a.Low != nil && a.High != nil {
		more = append(more, fmt.Sprintf("%g to %g", *a.Low, *a.High))
	}
	if a.Source != "" {
		more = append(more, a.Source)
	}
	if len(more) > 0 {
		s += " (" + strings.Join(more, "; ") + ")"
	}
	return s
}
