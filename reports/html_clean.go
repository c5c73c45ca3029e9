package reports

import (
	"reflect"
	"strings"
	"unicode"
	"unicode/utf8"

	"footing/plan/result"
)

// cleanPlan copies a result with every text made fit to be shown: whatever a person typed may hold anything.
func cleanPlan(p *result.Plan) *result.Plan {
	return cleanValue(reflect.ValueOf(p)).Interface().(*result.Plan)
}

// cleanValue copies a value of the result types, texts cleaned on the way.
func cleanValue(v reflect.Value) reflect.Value {
	switch v.Kind() {
	case reflect.Pointer:
		if v.IsNil() {
			return v
		}
		c := reflect.New(v.Type().Elem())
		c.Elem().Set(cleanValue(v.Elem()))
		return c
	case reflect.Struct:
		c := reflect.New(v.Type()).Elem()
		for i := 0; i < v.NumField(); i++ {
			if v.Type().Field(i).IsExported() {
				c.Field(i).Set(cleanValue(v.Field(i)))
			}
		}
		return c
	case reflect.Slice:
		if v.IsNil() || v.Type().Elem().Kind() == reflect.Float64 {
			return v
		}
		c := reflect.MakeSlice(v.Type(), v.Len(), v.Len())
		for i := 0; i < v.Len(); i++ {
			c.Index(i).Set(cleanValue(v.Index(i)))
		}
		return c
	case reflect.Map:
		if v.IsNil() {
			return v
		}
		c := reflect.MakeMapWithSize(v.Type(), v.Len())
		for it := v.MapRange(); it.Next(); {
			c.SetMapIndex(cleanValue(it.Key()), cleanValue(it.Value()))
		}
		return c
	case reflect.String:
		c := reflect.New(v.Type()).Elem()
		c.SetString(cleanText(v.String()))
		return c
	}
	return v
}

// cleanText makes a text fit to be shown: control characters and what turns the reading direction of the text around
// it become the replacement mark, line breaks and tabs become spaces, and a text that runs from right to left is
// isolated from its surroundings. Cleaning a clean text changes nothing.
func cleanText(s string) string {
	plain := true
	for i := 0; i < len(s); i++ {
		if s[i] < 0x20 || s[i] >= 0x7f {
			plain = false
			break
		}
	}
	if plain {
		return s
	}
	if isolated(s) {
		inner := strings.TrimSuffix(strings.TrimPrefix(s, "\u2068"), "\u2069")
		if c := cleanText(inner); isolated(c) {
			return c
		}
		return s
	}
	var b strings.Builder
	rtl := false
	for i, r := range s {
		switch {
		case r == utf8.RuneError && !strings.HasPrefix(s[i:], "\uFFFD"):
			b.WriteRune('\uFFFD')
		case r == '\n' || r == '\t' || r == '\r' || r == '\u2028' || r == '\u2029' || r == '\u0085':
			b.WriteByte(' ')
		case unicode.Is(unicode.Cc, r), r >= 0x202A && r <= 0x202E, r >= 0x2066 && r <= 0x2069, r&0xFFFE == 0xFFFE, unicode.Is(unicode.Cs, r):
			b.WriteRune('\uFFFD')
		default:
			rtl = rtl || unicode.In(r, unicode.Hebrew, unicode.Arabic, unicode.Syriac, unicode.Thaana, unicode.Nko) || r == '\u200F' || r == '\u061C'
			b.WriteRune(r)
		}
	}
	if rtl { // U+2068 and U+2069: first strong isolate, and its end
		return "\u2068" + b.String() + "\u2069"
	}
	return b.String()
}

// isolated says whether a text is one that cleanText has set apart already: an isolate around a text without another.
func isolated(s string) bool {
	return strings.HasPrefix(s, "\u2068") && strings.HasSuffix(s, "\u2069") && strings.Count(s, "\u2068") == 1 && strings.Count(s, "\u2069") == 1
}
