package reports

import (
	"os"
	"path/filepath"
	"testing"

	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
)

// testAudit runs the accessibility rules of axe-core over the page, light and dark, wide and narrow. The rules come
// from the development packages of chartscript (npm ci there); without them the audit is skipped.
func testAudit(t *testing.T, b *browser) {
	if testing.Short() {
		t.Skip("the audit takes seconds")
	}
	rules, err := os.ReadFile(filepath.Join("chartscript", "node_modules", "axe-core", "axe.min.js"))
	if err != nil {
		t.Skip("the audit's rules are not here: run npm ci in reports/chartscript")
	}
	page := mustHTML(t, 12, false)
	for _, dark := range []bool{false, true} {
		width := map[bool]int{false: 1100, true: 390}[dark]
		b.dark(dark)
		b.open(page, width)
		b.text(string(rules) + `;""`)
		wait := func(p *runtime.EvaluateParams) { yes := true; p.AwaitPromise = &yes }
		found, err := chromedp.Run(b.ctx, chromedp.Evaluate[string](`axe.run().then(r => r.violations.map(v => v.id + " (" + v.impact + "): " + v.nodes.slice(0, 4).map(n => n.target + " " + (n.any[0] ? n.any[0].message : "")).join(" | ")).join("\n"))`, wait))
		b.check(err)
		if found != "" {
			t.Errorf("dark %v, width %d:\n%s", dark, width, found)
		}
	}
	b.dark(false)
}
