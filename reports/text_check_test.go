package reports

import (
	"strings"
	"testing"

	"footing/plan/result"
)

func TestTextCheck(t *testing.T) {
	c := &result.Check{Report: "report.html", Tool: result.Tool{Version: "1.2.3"}, Plan: result.CheckedFile{Name: "plan.yaml"}, Numbers: 900, Reproduced: 899,
		Editions: &result.CheckedFile{Name: "plan.editions.zip"}, Differs: []result.PrintedDiffers{{Section: "What the studies say", Label: "random\x1b[31m effects", Printed: "0.39", Computed: "0.36"}}}
	got := TextCheck(c, TextOptions{})
	for _, want := range []string{"899 of 900 printed numbers reproduced", "printed 0.39, computed 0.36", "What the studies say", "with the editions kept before", "does not hold what its own plan"} {
		if !strings.Contains(got, want) {
			t.Errorf("%q is not in\n%s", want, got)
		}
	}
	if strings.Contains(got, "\x1b") {
		t.Error("a control character got through")
	}
	c.Differs, c.Reproduced = nil, 900
	if got := TextCheck(c, TextOptions{}); !strings.Contains(got, "Printed digits reproduced.") {
		t.Error(got)
	}
}
