package reports

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/chromedp/chromedp"
)

// hostile are labels that a spreadsheet may hold: each has broken some page or chart somewhere.
var hostile = []string{
	`</script><script>document.documentElement.dataset.pwned=1</script>`,
	`__f__document.documentElement.dataset.pwned=1__f__`,
	`__f__(function(){document.documentElement.dataset.pwned=1})()__f__`,
	`Smith __f__`,
	`x__f__`,
	`a__f__b`,
	`<!--<script>`,
	`&lt;b&gt; &amp; &quot;`,
	`"quoted" and 'single'`,
	`back\slash \u003cscript\u003e`,
	"line\u2028separator\u2029here",
	"bad \xff\xfe utf-8",
	`<img src=x onerror="document.documentElement.dataset.pwned=1">`,
	`<svg onload="document.documentElement.dataset.pwned=1">`,
	"`${document.documentElement.dataset.pwned=1}`",
	`{b} {c} {@value}`,
	`]]> --> {{.}} javascript:document.documentElement.dataset.pwned=1`,
	`=HYPERLINK("http://example.invalid/","x")`,
	"\u202eright to left override and \u05e9\u05dc\u05d5\u05dd",
	"bell\a null\x00 escape\x1b[31m tab\t newline\n c1\u0085",
	strings.Repeat("long label ", 1000),
}

// TestInBrowser opens reports in one browser.
func TestInBrowser(t *testing.T) {
	b := newBrowser(t)
	for _, c := range []struct {
		name string
		test func(*testing.T, *browser)
	}{{"page", testPageInBrowser}, {"figures", testFigureTextsDoNotCollide}, {"panel", testPanelReacts}, {"hostile", testHostileLabels}, {"audit", testAudit}, {"pictures", testPictures}} {
		t.Run(c.name, func(t *testing.T) {
			c.test(t, b.in(t))
		})
	}
}

func testPageInBrowser(t *testing.T, b *browser) {
	for _, log := range []bool{false, true} {
		address := b.open(mustHTML(t, 12, log), 1100)
		b.quiet(address)
		if n := b.number(`[...document.querySelectorAll("figure .wide svg")].filter(s => s.getBoundingClientRect().height > 80).length`); n < 9 {
			t.Errorf("%v figures are visible", n)
		}
		if n := b.number(`document.documentElement.scrollWidth - innerWidth`); n > 0 {
			t.Errorf("the page is %v pixels wider than the window", n)
		}
	}
	b.open(mustHTML(t, 12, false), 390)
	if n := b.number(`document.documentElement.scrollWidth - innerWidth`); n > 0 {
		t.Errorf("on a telephone the page is %v pixels too wide:\n%s", n, b.text(tooWide))
	}
	if n := b.number(`[...document.querySelectorAll("figure .narrow svg text")].filter(s => s.getBoundingClientRect().width > 0 && s.getBoundingClientRect().height < 9).length`); n > 0 {
		t.Errorf("%v texts of figures are too small on a telephone", n)
	}
}

// collisions names the texts of drawings that leave their drawing or lie on another.
const collisions = `(() => { const bad = [];
	for (const svg of document.querySelectorAll("figure svg")) { const f = svg.getBoundingClientRect(); if (!f.width) continue;
	 const boxes = [...svg.querySelectorAll("text")].map(e => { const r = e.getBoundingClientRect(); const d = r.height * 0.22; return {s: e.lastChild ? e.lastChild.textContent : "", l: r.left, r: r.right, t: r.top + d, b: r.bottom - d}; });
	 for (const a of boxes) { if (a.l < f.left - 2 || a.r > f.right + 2 || a.b > f.bottom + 2 || a.t < f.top - 2) bad.push("out: " + a.s); }
	 for (let i = 0; i < boxes.length; i++) for (let j = i + 1; j < boxes.length; j++) { const a = boxes[i], c = boxes[j];
	  if (a.l < c.r - 1 && c.l < a.r - 1 && a.t < c.b - 1 && c.t < a.b - 1) bad.push(a.s + " | " + c.s); } }
	return bad.join("\n"); })()`

// No text of a figure may leave its drawing or lie on another text.
func testFigureTextsDoNotCollide(t *testing.T, b *browser) {
	for _, c := range []struct {
		k   int
		log bool
	}{{3, false}, {12, true}, {20, false}} {
		for _, width := range []int{1100, 390} {
			b.open(mustHTML(t, c.k, c.log), width)
			if bad := b.text(collisions); bad != "" {
				t.Errorf("%d studies, log %v, width %d:\n%s", c.k, c.log, width, bad)
			}
		}
	}
}

func testPanelReacts(t *testing.T, b *browser) {
	p := inventedPlan(12, false)
	page, err := HTML(p)
	if err != nil {
		t.Fatal(err)
	}
	address := b.open(page, 1100)
	if h := b.number(`document.getElementById("try").getBoundingClientRect().height`); h < 300 {
		t.Fatalf("the panel is %v pixels high", h)
	}
	if n := b.number(`document.querySelectorAll("#try-chart-place svg path").length`); n < 4 {
		t.Errorf("the panel's chart has %v paths", n)
	}
	before := b.text(`document.getElementById("try-has").textContent`)
	if want := percentText(p.Size.Chosen.Power); before != want {
		t.Errorf("at the start the panel reads power %q, the plan has %q", before, want)
	}
	set := func(id, value, event string) {
		b.text(fmt.Sprintf(`(() => { const e = document.getElementById("try-%s"); e.value = %q; e.dispatchEvent(new Event(%q)); return ""; })()`, id, value, event))
	}
	// At a grid point the panel must give the grid's own value.
	g := p.Size.Grid
	i, j := len(g.Effects)-8, len(g.Ns)-8
	set("n", fmt.Sprint(g.Ns[j]), "input")
	b.text(fmt.Sprintf(`(() => { const e = document.getElementById("try-effect"); e.step = "any"; e.value = %v; e.dispatchEvent(new Event("input")); return ""; })()`, g.Effects[i]))
	layer := 0
	for l := range g.Layers {
		if g.Layers[l].Alpha == 0.05 && g.Layers[l].Allocation == "1:1" {
			layer = l
		}
	}
	if got, want := b.text(`document.getElementById("try-has").textContent`), percentText(g.Layers[layer].Power[i][j]); got != want {
		t.Errorf("at a grid point the panel reads %q, the grid has %q", got, want)
	}
	enrol := b.text(`document.getElementById("try-enrols").textContent`)
	set("dropout", "0.4", "input")
	if got := b.text(`document.getElementById("try-enrols").textContent`); got == enrol {
		t.Error("dropout changes nothing")
	}
	b.text(`(document.getElementById("try-reset").click(), "")`)
	if got := b.text(`document.getElementById("try-has").textContent`); got != before {
		t.Errorf("back at the plan the panel reads %q, not %q", got, before)
	}
	// The keyboard alone moves a control.
	b.text(`(document.getElementById("try-n").focus(), "")`)
	b.check(chromedp.Do(b.ctx, chromedp.KeyEvent("\uE012"), chromedp.KeyEvent("\uE012")))
	b.quiet(address)
}

func testHostileLabels(t *testing.T, b *browser) {
	p := inventedPlan(21, false)
	for i := range p.Pool.Studies {
		h := hostile[i%len(hostile)]
		s := &p.Pool.Studies[i]
		s.Study, s.Route, s.Subgroup = h, h, h
		s.Notes = []string{h}
		s.Cells[0].Text = h
		if i < len(p.Pool.Influence) {
			p.Pool.Influence[i].Study = h
		}
	}
	for i := range p.Range.Scenarios {
		p.Range.Scenarios[i].Words, p.Range.Scenarios[i].Why = hostile[i], hostile[i+5]
	}
	for i := range p.Size.Levers {
		p.Size.Levers[i].Words, p.Size.Levers[i].Price = hostile[i+8], hostile[i+12]
	}
	p.Title, p.Question, p.File = hostile[0], hostile[12], hostile[18]
	p.Size.Scale.Favours, p.Pool.Scale.Favours = hostile[6], hostile[13]
	p.Size.Study.Groups = []string{hostile[0], hostile[20]}
	p.Size.Study.Cost.Currency = hostile[0]
	p.Size.Grid.Accuracy = hostile[0]
	p.Size.Grid.Layers[0].Allocation = hostile[0]
	p.Findings[0].What, p.Findings[0].Study = hostile[2], hostile[20]
	page, err := HTML(p, Enclose(hostile[0], []byte(hostile[0])))
	if err != nil {
		t.Fatal(err)
	}
	for _, width := range []int{1100, 390} {
		address := b.open(page, width)
		if b.text(`document.documentElement.dataset.pwned || ""`) != "" {
			t.Error("a label ran")
		}
		b.quiet(address)
		if n := b.number(`document.documentElement.scrollWidth - innerWidth`); n > 0 {
			t.Errorf("labels make the page %v pixels too wide at %d:\n%s", n, width, b.text(tooWide))
		}
		if n := b.number(`document.querySelectorAll("script").length`); n != 5 {
			t.Errorf("the page has %v scripts, not 5", n)
		}
	}
	text := b.text(`document.body.textContent`)
	for _, want := range []string{hostile[0], "a__f__b", hostile[13], `=HYPERLINK("http://example.invalid/","x")`, "escape\uFFFD[31m"} {
		if !strings.Contains(text, want) {
			t.Errorf("the page does not show %q", want)
		}
	}
	if whole := strings.TrimSpace(hostile[20]); b.number(fmt.Sprintf(`[...document.querySelectorAll("[title]")].filter(e => e.title.trim().length === %d).length`, len(whole))) == 0 {
		t.Error("the whole of a long label stands nowhere")
	}
}

// tooWide names the elements that stick out of the window, for the message of a failed test.
const tooWide = `(() => { const out = [], walk = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT), r = document.createRange();
	for (let n; (n = walk.nextNode()) && out.length < 8;) { r.selectNodeContents(n); const e = n.parentElement;
	 if (r.getBoundingClientRect().right > innerWidth + 1 && !e.closest(".scroll, script")) out.push(e.tagName + "." + (e.className.baseVal ?? e.className) + "#" + e.id + " " + n.data.slice(0, 60)); }
	return out.join("\n"); })()`

// testPictures writes pictures of reports into the folder that FOOTING_FIGURES names, to be looked at.
func testPictures(t *testing.T, b *browser) {
	dir := os.Getenv("FOOTING_FIGURES")
	if dir == "" {
		t.Skip("FOOTING_FIGURES names no folder")
	}
	page := mustHTML(t, 12, false)
	b.open(page, 1100)
	b.picture(filepath.Join(dir, "page-1100.png"))
	b.pdf(filepath.Join(dir, "page-a4.pdf"), chromedp.PaperA4)
	b.pdf(filepath.Join(dir, "page-letter.pdf"), chromedp.PaperLetter)
	b.dark(true)
	b.open(page, 1100)
	b.picture(filepath.Join(dir, "page-dark.png"))
	b.dark(false)
	b.open(page, 390)
	b.picture(filepath.Join(dir, "page-390.png"))
	for _, k := range []int{3, 1000} {
		b.open(mustHTML(t, k, false), 1100)
		b.picture(filepath.Join(dir, fmt.Sprintf("page-%d-studies.png", k)))
	}
	b.open(mustHTML(t, 80, false), 1100)
	b.pdf(filepath.Join(dir, "page-80.pdf"), chromedp.PaperA4)
}
