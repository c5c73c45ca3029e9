package reports

import (
	"math"

	"footing/plan/result"
)

// effectScale writes effects of one analysed scale as people read them.
type effectScale struct{ result.ScaleInfo }

// shown turns a value of the analysed scale into the one that people read.
func (s effectScale) shown(x float64) float64 {
	switch {
	case s.Log:
		return math.Exp(x)
	case s.Name == "fisher-z" || s.Name == "partial-fisher-z":
		return math.Tanh(x)
	case s.Name == "logit-proportion":
		return 1 / (1 + math.Exp(-x))
	}
	return x
}

// text writes a value of the analysed scale as people read it.
func (s effectScale) text(x float64) string {
	if s.Name == "risk-difference" || s.Name == "rate-difference" {
		return fixed(s.shown(x), 3) // two decimals would hide one in two hundred
	}
	return effectText(s.shown(x))
}

// number writes a value that may be missing.
func (s effectScale) number(x *float64) string {
	if x == nil {
		return "–"
	}
	return s.text(*x)
}

// interval writes "0.18 to 0.60", the smaller shown value first.
func (s effectScale) interval(lo, hi float64) string {
	return s.text(lo) + " to " + s.text(hi)
}

// unit is what stands after a number in a sentence: "standard deviations", or nothing.
func (s effectScale) unit() string {
	if s.Name == "standardized-mean-difference" {
		return "standard deviations"
	}
	return ""
}

// phrase names an effect in a sentence: "0.39 standard deviations", "an odds ratio of 0.72".
func (s effectScale) phrase(x float64) string {
	if u := s.unit(); u != "" {
		return s.text(x) + " " + u
	}
	if s.Words == "" {
		return s.text(x)
	}
	return article(s.Words) + " " + s.Words + " of " + s.text(x)
}

// axisWords names an effect axis: "in standard deviations", "odds ratio".
func (s effectScale) axisWords() string {
	if u := s.unit(); u != "" {
		return "in " + u
	}
	return s.Words
}

// direction says on which side of an axis the favoured effects lie, and in the user's words.
func (s effectScale) direction() (text string, right bool) {
	words := s.Favours
	if words == "" {
		words = "favours treatment"
	}
	if s.HigherBetter {
		return clipRunes(words, 60) + " →", true
	}
	return "← " + clipRunes(words, 60), false
}

// ticks are round values for an axis of this scale, as the reader's numbers; values are on the analysed scale.
func (s effectScale) ticks(lo, hi float64, count int) []tick {
	switch {
	case s.Log:
		return ratioTicks(lo, hi, count)
	case s.shown(1) != 1:
		var out []tick
		for _, t := range linearTicks(s.shown(lo), s.shown(hi), count) {
			if v, ok := s.analysed(t.Value); ok && v >= lo-1e-9 && v <= hi+1e-9 {
				out = append(out, tick{v, t.Text})
			}
		}
		return out
	}
	return linearTicks(lo, hi, count)
}

// analysed is the inverse of shown; ok is false where there is none.
func (s effectScale) analysed(v float64) (x float64, ok bool) {
	switch {
	case s.Log:
		return math.Log(v), v > 0
	case s.Name == "fisher-z" || s.Name == "partial-fisher-z":
		return math.Atanh(v), v > -1 && v < 1
	case s.Name == "logit-proportion":
		return math.Log(v / (1 - v)), v > 0 && v < 1
	}
	return v, true
}

func article(noun string) string {
	if noun != "" {
		switch noun[0] {
		case 'a', 'e', 'i', 'o', 'u', 'A', 'E', 'I', 'O', 'U':
			return "an"
		}
	}
	return "a"
}
