package result

import "footing/internal/finding"

// Finding is re-exported so that results can be read without another import.
type Finding = finding.Finding

// Place is where something stands in a file.
type Place = finding.Place

// Tool names the program that made a result.
type Tool struct {
	Name    string `json:"name"`
	Version string `json:"version"`
}

// Interval is a confidence or prediction interval on the analysed scale.
type Interval struct {
	Level  float64 `json:"level"` // 0..1
	Lower  float64 `json:"lower"`
	Upper  float64 `json:"upper"`
	Method string  `json:"method"` // e.g. "normal", "hartung-knapp-floored", "henmi-copas", "student-t"
}

// Shown is an estimate on the scale that people read: a ratio in place of its log, r in place of z.
type Shown struct {
	Scale    string   `json:"scale"` // e.g. "odds ratio", "standardized mean difference", "correlation"
	Estimate float64  `json:"estimate"`
	Lower    *float64 `json:"lower"`
	Upper    *float64 `json:"upper"`
}

// ScaleInfo says what the numbers are.
type ScaleInfo struct {
	Name         string  `json:"name"`         // analysed scale, as effect.Scale
	Words        string  `json:"words"`        // "standardized mean difference", "odds ratio": what people read
	Log          bool    `json:"log"`          // analysed as a natural logarithm
	NoEffect     float64 `json:"noEffect"`     // on the analysed scale, mostly 0
	HigherBetter bool    `json:"higherBetter"` // true when a larger value favours the treatment
	Favours      string  `json:"favours"`      // the direction in the user's words: "better with a break"
}

// Assumption is a value that went in without being computed from the evidence.
type Assumption struct {
	Name    string   `json:"name"`
	Value   string   `json:"value"` // as printed
	Number  *float64 `json:"number"`
	Low     *float64 `json:"low"`
	High    *float64 `json:"high"`
	Source  string   `json:"source"`
	Why     string   `json:"why"`
	Who     string   `json:"who"`
	Assumed bool     `json:"assumed"` // true when no source was given: printed as "assumed"
	Place   Place    `json:"place"`
}
