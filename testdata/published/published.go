package published

import (
	"embed"
	"encoding/json"
	"fmt"
	"math"
	"sort"
	"strconv"
	"strings"
	"sync"
)

//go:embed *.json
var files embed.FS

// Value is one published value.
type Value struct {
	ID                string         `json:"id"`
	Topic             string         `json:"topic"`
	Source            string         `json:"source"` // key of Sources
	Where             string         `json:"where"`
	KnownBy           string         `json:"known_by"`
	Inputs            map[string]any `json:"inputs"`
	Quantity          string         `json:"quantity"`
	Printed           string         `json:"printed"` // the digits as published
	Recomputed        float64        `json:"recomputed"`
	Status            string         `json:"status"`
	How               string         `json:"how"`
	Note              string         `json:"note"`
	SignificantDigits int            `json:"significant_digits"`
}

// Input is a numeric input by its name; a missing one panics, since a test names it.
func (v Value) Input(name string) float64 {
	x, ok := v.Inputs[name].(float64)
	if !ok {
		panic(fmt.Sprintf("published: %s has no numeric input %q", v.ID, name))
	}
	return x
}

// Text is a text input by its name, "" when there is none.
func (v Value) Text(name string) string {
	s, _ := v.Inputs[name].(string)
	return s
}

// Source is where values come from.
type Source struct {
	Citation string `json:"citation"`
	KnownBy  string `json:"known_by"`
}

// Dataset is a published table of studies.
type Dataset struct {
	Source  string   `json:"source"`
	KnownBy string   `json:"known_by"`
	Columns []string `json:"columns"`
	Rows    [][]any  `json:"rows"`
	Note    string   `json:"note"`
}

// Column gives the numbers of one column; a missing or non-numeric one panics, since a test names it.
func (d Dataset) Column(name string) []float64 {
	at := d.index(name)
	out := make([]float64, len(d.Rows))
	for i, row := range d.Rows {
		x, ok := row[at].(float64)
		if !ok {
			panic(fmt.Sprintf("published: column %q, row %d is no number", name, i+1))
		}
		out[i] = x
	}
	return out
}

// Labels gives a column as text.
func (d Dataset) Labels(name string) []string {
	at := d.index(name)
	out := make([]string, len(d.Rows))
	for i, row := range d.Rows {
		out[i] = fmt.Sprint(row[at])
	}
	return out
}

func (d Dataset) index(name string) int {
	for i, c := range d.Columns {
		if c == name {
			return i
		}
	}
	panic(fmt.Sprintf("published: no column %q; there are %s", name, strings.Join(d.Columns, ", ")))
}

type library struct {
	values   []Value
	byID     map[string]Value
	sources  map[string]Source
	datasets map[string]Dataset
}

var load = sync.OnceValue(func() library {
	lib := library{byID: map[string]Value{}}
	read := func(name string, into any) {
		data, err := files.ReadFile(name)
		if err == nil {
			err = json.Unmarshal(data, into)
		}
		if err != nil {
			panic("published: " + name + ": " + err.Error())
		}
	}
	entries, err := files.ReadDir(".")
	if err != nil {
		panic("published: " + err.Error())
	}
	for _, e := range entries {
		if strings.HasPrefix(e.Name(), "checks_") {
			var part []Value
			read(e.Name(), &part)
			lib.values = append(lib.values, part...)
		}
	}
	read("sources.json", &lib.sources)
	read("datasets.json", &lib.datasets)
	sort.SliceStable(lib.values, func(i, j int) bool { return lib.values[i].ID < lib.values[j].ID })
	for _, v := range lib.values {
		lib.byID[v.ID] = v
	}
	return lib
})

// All lists every value, by id.
func All() []Value { return load().values }

// Check is one value by its id.
func Check(id string) (Value, bool) {
	v, ok := load().byID[id]
	return v, ok
}

// Must is one value by its id; an unknown id panics.
func Must(id string) Value {
	v, ok := Check(id)
	if !ok {
		panic("published: no value " + id)
	}
	return v
}

// Topic lists the values of one topic.
func Topic(topic string) []Value {
	var out []Value
	for _, v := range load().values {
		if v.Topic == topic {
			out = append(out, v)
		}
	}
	return out
}

// SourceOf is where a value comes from.
func SourceOf(v Value) Source { return load().sources[v.Source] }

// Data is one dataset by its name; an unknown name panics.
func Data(name string) Dataset {
	d, ok := load().datasets[name]
	if !ok {
		panic("published: no dataset " + name)
	}
	return d
}

// slips are the four values whose printed digits do not follow from their own inputs; each one's Note says why. They are held against what the inputs give.
var slips = map[string]bool{"borenstein2009-15": true, "borenstein2009-57": true, "raudenbush-10": true, "jennison_turnbull-20": true}

// Meets reports whether a computed value reproduces this one: within half a unit of the last printed digit. The values whose own note says that the
// printed digits do not follow from the printed inputs are compared with what those inputs give, to six digits.
func (v Value) Meets(computed float64) bool {
	if slips[v.ID] {
		return math.Abs(computed-v.Recomputed) <= 1e-6*math.Abs(v.Recomputed)
	}
	return Meets(v.Printed, computed)
}

// Meets reports whether computed lies within half a unit of the last digit of printed ("0.5970", "1.2e-3", "−0.35"). A hair is allowed for the rounding of binary
// numbers at the edge itself.
func Meets(printed string, computed float64) bool {
	want, unit, err := parse(printed)
	if err != nil || math.IsNaN(computed) {
		return false
	}
	return math.Abs(computed-want) <= unit/2*(1+1e-9)
}

func parse(printed string) (value, unit float64, err error) {
	s := strings.NewReplacer("−", "-", " ", "", ",", "").Replace(strings.TrimSpace(printed))
	if value, err = strconv.ParseFloat(s, 64); err != nil {
		return 0, 0, fmt.Errorf("published: %q is no printed number", printed)
	}
	mantissa, exponent := s, 0
	if i := strings.IndexAny(s, "eE"); i >= 0 {
		mantissa = s[:i]
		if exponent, err = strconv.Atoi(s[i+1:]); err != nil {
			return 0, 0, err
		}
	}
	decimals := 0
	if i := strings.IndexByte(mantissa, '.'); i >= 0 {
		decimals = len(mantissa) - i - 1
	}
	return value, math.Pow(10, float64(exponent-decimals)), nil
}
