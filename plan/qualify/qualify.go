package qualify

import (
	"sort"
	"strconv"
	"sync"

	"footing/testdata/published"
)

// Line is one published value beside the computed one.
type Line struct {
	ID         string  `json:"id"`
	Topic      string  `json:"topic"`
	Source     string  `json:"source"` // citation
	Where      string  `json:"where"`
	KnownBy    string  `json:"knownBy"` // "read here" or "recalled from memory"
	Quantity   string  `json:"quantity"`
	Convention string  `json:"convention"` // what was set to follow the source, where that is not the default
	Printed    string  `json:"printed"`
	Computed   float64 `json:"computed"`
	Reproduced bool    `json:"reproduced"`
	Note       string  `json:"note"`
}

// Report is the outcome of a qualification.
type Report struct {
	Schema     string `json:"schema"` // "footing/qualify/1"
	Lines      []Line `json:"lines"`
	Reproduced int    `json:"reproduced"`
	Total      int    `json:"total"`
}

// recipe computes one published value the way a user would.
type recipe struct {
	convention string
	compute    func(v published.Value) float64
}

// Run recomputes every value for which there is a recipe, in order of topic and id.
func Run() Report {
	fill()
	out := Report{Schema: "footing/qualify/1", Lines: []Line{}}
	for _, v := range published.All() {
		r, ok := recipes[v.ID]
		if !ok {
			continue
		}
		x := r.compute(v)
		out.Lines = append(out.Lines, Line{ID: v.ID, Topic: v.Topic, Source: published.SourceOf(v).Citation, Where: v.Where, KnownBy: v.KnownBy, Quantity: v.Quantity,
			Convention: r.convention, Printed: v.Printed, Computed: x, Reproduced: v.Meets(x), Note: v.Note})
	}
	out.Lines = append(out.Lines, oneSidedZ()...)
	sort.SliceStable(out.Lines, func(i, j int) bool { return out.Lines[i].Topic < out.Lines[j].Topic })
	for _, l := range out.Lines {
		out.Total++
		if l.Reproduced {
			out.Reproduced++
		}
	}
	return out
}

// recipes by id; the files of this package fill it when they are first asked for, so that other commands don't wait for it.
var recipes = map[string]recipe{}

// parts are the functions that add recipes, by subject.
var parts = []func(){effectRecipes, pairedRecipes, recoveryRecipes, conversionRecipes, poolingRecipes, distributionRecipes, moreDistributionRecipes, binomialRecipes, powerRecipes, multiplierRecipes, enrolmentRecipes, moreTrialsRecipes}

// fill runs every part's recipes once.
var fill = sync.OnceFunc(func() {
	for _, part := range parts {
		part()
	}
})

func add(convention string, compute func(v published.Value) float64, ids ...string) {
	for _, id := range ids {
		if _, twice := recipes[id]; twice {
			panic("qualify: two recipes for " + id)
		}
		recipes[id] = recipe{convention, compute}
	}
}

// span lists ids with a running two-digit number: span("borenstein2009", 1, 6).
func span(source string, from, to int) []string {
	var out []string
	for i := from; i <= to; i++ {
		n := strconv.Itoa(i)
		if i < 10 {
			n = "0" + n
		}
		out = append(out, source+"-"+n)
	}
	return out
}
