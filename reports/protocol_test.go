package reports

import (
	"fmt"
	"regexp"
	"strings"
	"testing"
)

// Each entry is something that a standard asks for in the paragraph, and the words that show it in the invented plan.
func TestProtocolCarriesWhatTheStandardsAsk(t *testing.T) {
	p := inventedPlan(12, false)
	w := WordsOf(p)
	ch := p.Size.Chosen
	for _, c := range []struct{ asks, words string }{
		{"DELTA2, primary outcome", "The primary outcome is words recalled after a week."},
		{"DELTA2, target difference", "standardized mean difference of 0.22"},
		{"DELTA2, a standardized difference alone is not enough", "[State the difference and the standard deviation in the units of the outcome"},
		{"DELTA2, who says that it matters", "judged by the board of the school trust (panel of teachers, 2025)"},
		{"DELTA2, error rates", "two-sided significance level of 0.05"},
		{"DELTA2, power", "give 80.1% power"},
		{"DELTA2, allocation ratio", "allocation 1:1"},
		{"DELTA2, formula", "exact, noncentral t; Borm, Fransen & Lemmens 2007"},
		{"DELTA2, each allowance", fmt.Sprintf("To allow for 12%% dropping out, %d people will be enrolled (split lesson %d, whole lesson %d)", ch.ToEnrol.Total, ch.ToEnrol.Groups[0], ch.ToEnrol.Groups[1])},
		{"DELTA2, earlier research", "Pooling 12 earlier studies"},
		{"ICH E9, a range of sizes", "the number to enrol runs from"},
		{"ICH E9, origin of each value", "Baseline correlation 0.5 (0.35 to 0.65): pilot 2024."},
		{"SPIRIT 2025 item 19, assumptions marked", "Dropout 0.12: assumed."},
		{"SPIRIT 2025 item 19, both powers", fmt.Sprintf("80%% power would need %d people analysed, 90%% power %d", p.Size.Cases[2].At80.Total, p.Size.Cases[2].At90.Total)},
		{"CONSORT 2025 item 16a, size by group", fmt.Sprintf("%d in the split lesson group and %d in the whole lesson group", ch.N.Groups[0], ch.N.Groups[1])},
		{"kind of justification", "The size is justified by: smallest effect of interest."},
		{"search", "The literature was searched on 2 October 2026"},
	} {
		if !strings.Contains(w.Protocol, c.words) {
			t.Errorf("%s: %q is not in\n%s", c.asks, c.words, w.Protocol)
		}
	}
	effect, size := strings.Index(w.Protocol, "planned for"), strings.Index(w.Protocol, "in the split lesson group")
	if effect < 0 || size < effect {
		t.Errorf("the effect has to come before the size: %d, %d", effect, size)
	}
	if want := fmt.Sprintf("The sample size of %d (%d to be analysed)", ch.ToEnrol.Total, ch.N.Total); !strings.HasPrefix(w.Results, want) || !strings.HasSuffix(w.Results, "stands in the protocol.") {
		t.Errorf("results paper: %s", w.Results)
	}
	for _, want := range []string{fmt.Sprintf("We will enrol %d people.", ch.ToEnrol.Total), "(1) The studies differ.", "(3) If the score at the start"} {
		if !strings.Contains(w.Grant, want) {
			t.Errorf("grant: %q is not in %s", want, w.Grant)
		}
	}
}

func TestProtocolOfProportionsGivesBothAndTheLeadingMeasure(t *testing.T) {
	p := inventedPlan(12, true)
	p.Size.Study.Outcome = "binary"
	for i := range p.Size.Cases {
		p.Size.Cases[i].ControlRisk, p.Size.Cases[i].TreatedRisk = num(0.21), num(0.166)
	}
	words := WordsOf(p).Protocol
	for _, want := range []string{"an odds ratio of 0.75 (16.6% against 21.0% in the whole lesson group)", "The odds ratio leads; the proportions follow from it."} {
		if !strings.Contains(words, want) {
			t.Errorf("%q is not in\n%s", want, words)
		}
	}
}

func TestProtocolWithoutASizeAndWithoutEvidence(t *testing.T) {
	p := inventedPlan(12, false)
	p.Size.Chosen, p.Size.Why = nil, "the scenario lies at or beyond no effect"
	if w := WordsOf(p); w.Protocol != "No sample size can be stated: the scenario lies at or beyond no effect." || w.Results+w.Grant != "" {
		t.Errorf("%+v", w)
	}
	p = inventedPlan(12, false)
	p.Pool, p.Range.SmallestWorthwhile, p.Size.Study.Estimand = nil, nil, nil
	words := WordsOf(p).Protocol
	for _, want := range []string{"[Name the primary outcome", "No earlier studies were pooled for it.", "[State the smallest difference that would matter"} {
		if !strings.Contains(words, want) {
			t.Errorf("%q is not in\n%s", want, words)
		}
	}
}

// The text is plain: no control characters, no marks that turn the reading direction, no typographic minus, no doubled stops.
func TestProtocolIsPlainText(t *testing.T) {
	for _, log := range []bool{false, true} {
		p := inventedPlan(12, log)
		p.Size.Study.Groups = []string{"split\x1b[31m\n\u202elesson", "whole"}
		text := Protocol(p)
		for _, r := range text {
			if r != '\n' && r < 0x20 || r == 0x202e || r == '−' || r == '\u2009' {
				t.Errorf("%U in the text", r)
			}
		}
		if bad := regexp.MustCompile(`\.\.|:;| \.(\s|$)|  |%!|<nil>|NaN`).FindString(text); bad != "" {
			t.Errorf("%q in\n%s", bad, text)
		}
		if !strings.HasPrefix(text, "Invented data\n") || !strings.Contains(text, "ethics review") {
			t.Errorf("neither marked as invented nor with its cautions:\n%s", text)
		}
	}
}
