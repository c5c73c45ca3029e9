package main

import (
	"reflect"
	"strings"
	"testing"

	"footing/plan"
)

// TestTheNewPlanExplainsEveryKey: a key that a plan can have stands in the plan that footing new writes, in use or as a
// comment.
func TestTheNewPlanExplainsEveryKey(t *testing.T) {
	var walk func(t reflect.Type) []string
	walk = func(typ reflect.Type) (keys []string) {
		for typ.Kind() == reflect.Pointer || typ.Kind() == reflect.Slice {
			typ = typ.Elem()
		}
		if typ.Kind() != reflect.Struct {
			return nil
		}
		for i := 0; i < typ.NumField(); i++ {
			if tag := typ.Field(i).Tag.Get("yaml"); tag != "" && tag != "-" {
				keys = append(append(keys, tag), walk(typ.Field(i).Type)...)
			}
		}
		return keys
	}
	var text strings.Builder
	for _, s := range starters {
		if err := newPlan.Execute(&text, s); err != nil {
			t.Fatal(err)
		}
	}
	for _, key := range walk(reflect.TypeFor[plan.File]()) {
		if !strings.Contains(text.String(), key+":") {
			t.Errorf("texts/new.yaml does not explain %q", key)
		}
	}
}
