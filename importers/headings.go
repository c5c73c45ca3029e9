package importers

import (
	"slices"
	"strconv"
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"

	"footing/meta/effect"
)

// understood is a heading as understood.
type understood struct {
	meaning Meaning
	rank    int // of candidates for the same meaning: the lowest wins
	scale   effect.Scale
	log     bool
	level   float64
	percent bool
	sides   int
	weakArm bool   // the arm came from a number or a single letter
	rest    string // words that were not understood; the meaning then lacks its arm
}

// headingWords folds a heading to lower-case words: camel case, letter-digit borders and punctuation split, accents and
// apostrophes dropped, Greek letters and signs spelled out.
func headingWords(h string) []string {
	h = norm.NFKD.String(plainText(h))
	h = greek.Replace(h)
	var b strings.Builder
	var last rune
	runes := []rune(h)
	for i, r := range runes {
		switch {
		case unicode.Is(unicode.Mn, r) || r == '\'':
			continue
		case unicode.IsLetter(r):
			next := rune(0)
			if i+1 < len(runes) {
				next = runes[i+1]
			}
			camel := unicode.IsUpper(r) && (unicode.IsLower(last) || unicode.IsUpper(last) && unicode.IsLower(next) && next != 's')
			if camel || unicode.IsDigit(last) {
				b.WriteByte(' ')
			}
			b.WriteRune(unicode.ToLower(r))
		case unicode.IsDigit(r):
			if unicode.IsLetter(last) {
				b.WriteByte(' ')
			}
			b.WriteRune(r)
		case r == '.' && unicode.IsDigit(last) && i+1 < len(runes) && unicode.IsDigit(runes[i+1]):
			b.WriteRune(r)
		case r == '%':
			b.WriteString(" % ")
		default:
			b.WriteByte(' ')
		}
		last = r
	}
	return strings.Fields(b.String())
}

var greek = strings.NewReplacer("χ", " chi ", "Χ", " chi ", "η", " eta ", "α", " alpha ", "β", " beta ", "Δ", " change ", "δ", " change ",
	"ρ", " r ", "θ", " theta ", "µ", "u", "μ", "u", "No.", "number ", "no.", "number ", "№", "number ", "RoB", "rob", "#", "number ", "n/N", "events total", "±", " plus minus ", "+/-", " plus minus ", "CIlo", "CI lo", "CIup", "CI up", "CIhi", "CI hi")

// understand reads a heading. groups are the names of the groups, treatment first, where they are known. A last bracket
// that may be a unit counts as one only where the heading makes no sense with it: "Mean (g)", but "Effect size (g)".
func understand(typed string, groups []string) (understood, bool) {
	u, ok := understandAll(typed, groups)
	if ok && u.rest == "" {
		return u, true
	}
	if short := withoutUnit(typed); short != typed {
		if v, fine := understandAll(short, groups); fine && (v.rest == "" || !ok) {
			return v, true
		}
	}
	return u, ok
}

func understandAll(typed string, groups []string) (understood, bool) {
	words := headingWords(typed)
	if len(words) == 0 || len(words) > 14 {
		return understood{}, false
	}
	var u understood
	words = u.takeLevel(words)
	words, arm := takeGroup(words, groups)
	fs, rest := match(words)
	u.rest = strings.Join(rest, " ")
	if arm != "" {
		fs = append(fs, feature{arm: arm})
	}
	if u.composeSeveral(fs, strings.ContainsAny(typed, "([/,;±+&"), strings.Contains(typed, "/") || strings.Contains(typed, " of ")) || u.compose(fs) {
		if u.meaning == Relevance || u.meaning == Notes {
			u.rest = "" // "relevance to our setting", "notes on extraction"
		}
		return u, true
	}
	return understood{}, false
}

// takeGroup takes the name of a group out of the words; of two names that both stand there the longer one counts
// ("break", "no break").
func takeGroup(words []string, groups []string) (rest []string, arm string) {
	best, bestAt, longest := -1, 0, 0
	for i, g := range groups[:min(len(groups), 2)] {
		gw := headingWords(g)
		if at := indexWords(words, gw); len(gw) > longest && len(gw) < len(words) && at >= 0 {
			best, bestAt, longest = i, at, len(gw)
		}
	}
	if best < 0 {
		return words, ""
	}
	return slices.Concat(words[:bestAt], words[bestAt+longest:]), [2]string{"treatment", "control"}[best]
}

// withoutUnit drops a last bracket that holds only a unit: "Mean (ms)".
func withoutUnit(h string) string {
	t := strings.TrimSpace(plainText(h))
	for _, pair := range []string{"()", "[]"} {
		open := strings.LastIndexByte(t, pair[0])
		if open > 0 && strings.HasSuffix(t, pair[1:]) {
			inside := strings.ToLower(t[open+1 : len(t)-1])
			if units[inside] || units[strings.Join(headingWords(inside), " ")] {
				return t[:open]
			}
		}
	}
	return h
}

// takeLevel takes "95 %" before or behind "ci" out of the words and keeps it as the level.
func (u *understood) takeLevel(words []string) []string {
	for i, w := range words {
		v, err := strconv.ParseFloat(w, 64)
		if err != nil || v < 50 || v >= 100 {
			continue
		}
		percent := i+1 < len(words) && words[i+1] == "%"
		if percent || slices.Contains(words, "ci") || slices.Contains(words, "cl") {
			u.level = v / 100
			end := i + 1
			if percent {
				end++
			}
			return slices.Concat(words[:i], words[end:])
		}
	}
	return words
}

func indexWords(words, part []string) int {
	for i := 0; i+len(part) <= len(words); i++ {
		if slices.Equal(words[i:i+len(part)], part) {
			return i
		}
	}
	return -1
}

// match splits words into known phrases, the longest first from the left, and the words that are in none.
func match(words []string) (fs []feature, rest []string) {
	for i := 0; i < len(words); {
		found := false
		for n := min(6, len(words)-i); n > 0 && !found; n-- {
			p := strings.Join(words[i:i+n], " ")
			if f, ok := phrases[p]; ok {
				fs = append(fs, f.alternative(p, n, len(words)))
				i += n
				found = true
			}
		}
		if found {
			continue
		}
		if !filler[words[i]] {
			rest = append(rest, words[i])
		}
		i++
	}
	return fs, rest
}

// alternative decides the few phrases that mean one thing alone and another beside a figure.
func (f feature) alternative(phrase string, n, all int) feature {
	if n == all {
		switch phrase {
		case "t":
			return feature{base: "t"}
		}
	}
	return f
}

// bases maps the sorted figures of a heading to the meaning; "arm " before it takes an arm, "side " a side.
var bases = map[string]string{
	"study": "study",
	"year":  "year", "risk": "risk of bias", "relevance": "relevance", "subgroup": "subgroup", "status": "status",
	"notes": "notes", "direction": "direction", "better": "higher is better", "scale": "scale", "sides": "sides", "p+sides": "p",
	"mean": "arm mean", "sd": "arm sd", "se": "arm se", "n": "arm n", "total": "arm n", "n+total": "arm n",
	"mean+sd": "", "mean+se": "arm se", "clustersize+mean": "cluster size", "median": "arm median", "q1": "arm q1", "q3": "arm q3", "min": "arm min", "max": "arm max",
	"events": "arm events", "events+n": "arm events", "nonevents": "arm non-events", "n+nonevents": "arm non-events",
	"events+total": "total events", "proportion": "arm proportion", "events+proportion": "arm proportion", "rate": "arm rate",
	"events+rate": "arm rate", "persontime": "arm person-time", "estimate": "estimate", "variance": "variance", "estimate+variance": "variance",
	"estimate+se": "standard error", "ci": "side ci", "ci+estimate": "side ci", "ci+mean": "arm side ci", "level": "ci level", "ci+level": "ci level",
	"difference": "mean difference", "difference+mean": "mean difference", "difference+estimate": "mean difference", "difference+sd": "difference sd",
	"difference+se": "difference se", "ci+difference": "side difference ci", "t": "t", "f": "f", "z": "z", "chi": "chi-square",
	"df": "df", "df1": "numerator df", "p": "p", "r": "r", "pbr": "point-biserial r", "eta": "eta-squared",
	"covariates": "covariates", "prepostr": "pre-post correlation", "coefficient": "coefficient", "beta": "standardized beta",
	"coefficient+se": "standard error", "beta+se": "standard error", "ci+coefficient": "side ci", "beta+ci": "side ci", "r+se": "standard error",
	"outcomesd": "outcome sd", "oe": "observed minus expected", "lrvariance": "log-rank variance", "oe+variance": "log-rank variance",
	"logrank": "log-rank chi-square", "icc": "icc", "clustersize": "cluster size", "clusters": "clusters", "alpha": "alpha", "items": "items",
	"df+t": "df", "df+f": "df",
}

// compose joins the features of a heading to one meaning.
func (u *understood) compose(fs []feature) bool {
	var f feature
	var list []string
	percent := false
	maybe, weakSide := "", ""
	for _, g := range fs {
		if g.arm != "" && g.base == "" {
			if f.arm != "" && f.arm != g.arm {
				return false
			}
			if f.arm == "" {
				u.weakArm = g.weak
			}
			f.arm = g.arm
			continue
		}
		if g.arm != "" && g.base != "" { // "t": an arm beside a figure, else the statistic
			if len(fs) > 1 && f.arm == "" {
				f.arm, u.weakArm = g.arm, true
				continue
			}
		}
		percent = percent || g.percent
		if g.maybe != "" {
			maybe = g.maybe
		}
		if !g.weak || g.base != "" {
			f.side += g.side
		} else {
			weakSide += g.side
		}
		f.time += g.time
		f.log = f.log || g.log
		if g.scale != "" {
			f.scale = g.scale
		}
		if g.sides != 0 {
			u.sides = g.sides
		}
		if g.base != "" && !slices.Contains(list, g.base) {
			list = append(list, g.base)
		}
	}
	if f.arm == "" && maybe != "" {
		f.arm, u.weakArm = maybe, true
	}
	if f.side == "" && slices.Contains(list, "ci") {
		f.side = weakSide
	}
	slices.Sort(list)
	if len(list) > 1 && !slices.Contains(list, "n") && !slices.Contains(list, "events") {
		list = slices.DeleteFunc(list, func(b string) bool { return b == "total" }) // "overall" beside another figure
	}
	list = u.labels(list)
	key := strings.Join(list, "+")
	u.scale, u.log = f.scale, f.log
	return u.name(key, f, percent)
}

// labels joins "author", "year" and their like to the one word study; the plainest word decides the rank.
func (u *understood) labels(list []string) []string {
	best := 10
	for _, b := range list {
		rank, ok := labelRanks[b]
		if !ok && b != "year" {
			return list
		}
		if ok {
			best = min(best, rank)
		}
	}
	if best == 10 {
		return list
	}
	u.rank = best
	return []string{"study"}
}

var labelRanks = map[string]int{"study": 0, "study2": 1, "study3": 2, "study4": 3}

// name turns the sorted figures, arm, side and time of a heading into its meaning.
func (u *understood) name(key string, f feature, percent bool) bool {
	switch {
	case percent && (key == "" || key == "events" || key == "n" && f.arm != "" || key == "proportion"):
		if key == "n" || key == "" && f.arm == "" {
			return false
		}
		u.percent, key = true, "proportion"
	case key == "" && f.side != "" && f.arm == "" && f.time == "":
		key = "ci"
	case key == "" && f.side != "" && f.arm != "":
		key = "ci+mean"
	case (key == "estimate" || key == "difference" || key == "mean" || key == "coefficient" || key == "beta") && f.side != "":
		key = map[string]string{"estimate": "ci+estimate", "difference": "ci+difference", "mean": "ci+mean", "coefficient": "ci+coefficient", "beta": "beta+ci"}[key]
	case key == "se" && f.arm == "" && f.time == "":
		key = "estimate+se"
	}
	form := bases[key]
	if form == "" {
		return false
	}
	form, armed := strings.CutPrefix(form, "arm ")
	form, sided := strings.CutPrefix(form, "side ")
	if key == "ci" && f.arm != "" {
		armed = true
	}
	if sided != (f.side == "lower" || f.side == "upper") || f.arm != "" && !armed {
		return false
	}
	if sided {
		form += " " + f.side
	}
	switch f.time {
	case "", "post":
	case "pre", "change":
		if f.time == "change" && form == "n" || form != "mean" && form != "sd" {
			return false
		}
		form = f.time + " " + form
	default:
		return false
	}
	if f.arm != "" {
		form = f.arm + " " + form
	}
	u.meaning = Meaning(form)
	return true
}
