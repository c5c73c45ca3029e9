package reports

import (
	"bytes"
	"crypto/sha256"
	"embed"
	"encoding/base64"
	"encoding/hex"
	"fmt"
	"html/template"
	"strings"
	"sync"
	"unicode/utf8"

	"footing/plan/result"
)

//go:embed assets/page.css assets/panel.js assets/chart.js assets/chart.js.sha256
var assets embed.FS

// HTMLOption changes what the HTML report carries.
type HTMLOption func(*page)

// Enclose keeps a file inside the report, so that the report alone is enough to compute it again.
func Enclose(name string, data []byte) HTMLOption {
	return func(p *page) {
		sum := sha256.Sum256(data)
		p.Enclosed = append(p.Enclosed, enclosed{Name: cleanText(name), Data: base64.StdEncoding.EncodeToString(data), Sum: hex.EncodeToString(sum[:])})
	}
}

// HTML writes the whole report of a plan as one page that opens offline: it fetches nothing, prints on A4 and Letter
// and is complete without script. The same result gives the same bytes.
func HTML(p *result.Plan, o ...HTMLOption) ([]byte, error) {
	if p == nil {
		return nil, fmt.Errorf("reports: there is no result to write")
	}
	c := cleanPlan(p)
	v, err := newPage(c)
	if err != nil {
		return nil, err
	}
	for _, f := range o {
		f(v)
	}
	var b bytes.Buffer
	b.Grow(1 << 20)
	if err := pageTemplate().ExecuteTemplate(&b, "page", v); err != nil {
		return nil, fmt.Errorf("reports: the page could not be written: %w", err)
	}
	return b.Bytes(), nil
}

var pageTemplate = sync.OnceValue(func() *template.Template {
	t := template.New("page").Funcs(template.FuncMap{
		"long": func(s string) bool { return utf8.RuneCountInString(s) > longText },
		"clip": func(s string) string { return clipRunes(s, longText) },
	})
	return template.Must(t.ParseFS(templateFiles, "templates/*"))
})

// longText is the number of characters from which on a text on the page is cut; its whole stands in its title.
const longText = 240

// asset reads one of our own files; a missing one is a fault of the build.
func asset(name string) string {
	b, err := assets.ReadFile("assets/" + name)
	if err != nil {
		panic("reports: " + err.Error())
	}
	return string(b)
}

// sheet is the page's style sheet with the inks written into it.
var sheet = sync.OnceValue(func() string {
	list := func(m map[ink]string) string {
		var b strings.Builder
		for _, i := range inkOrder {
			fmt.Fprintf(&b, "--%s:%s;", i, m[i])
		}
		return b.String()
	}
	var marks strings.Builder
	for _, i := range inkOrder {
		fmt.Fprintf(&marks, ".f-%[1]s{fill:var(--%[1]s)}.s-%[1]s{stroke:var(--%[1]s)}", i)
	}
	return fmt.Sprintf(":root{color-scheme:light dark;%s}\n@media screen and (prefers-color-scheme:dark){:root{%s}}\n.f-none{fill:none}%s\n", list(lightInks), list(darkInks), marks.String()) + asset("page.css")
})

// policy lets the page use what stands in it and nothing else.
func policy(style string, scripts ...string) string {
	hash := func(s string) string {
		sum := sha256.Sum256([]byte(s))
		return "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
	}
	src := "'none'"
	if len(scripts) > 0 {
		parts := make([]string, len(scripts))
		for i, s := range scripts {
			parts[i] = hash(s)
		}
		src = strings.Join(parts, " ")
	}
	return "default-src 'none'; script-src " + src + "; style-src " + hash(style) + "; img-src data:; base-uri 'none'; form-action 'none'"
}

// newPage writes every text of the page.
func newPage(p *result.Plan) (*page, error) {
	v := &page{Title: p.Title, Question: p.Question, Kind: "Sample-size plan", Style: template.CSS(sheet())}
	if v.Title == "" {
		v.Title = "Sample-size plan"
	}
	head(v, p)
	v.Answer = answerOf(p)
	var err error
	if v.Panel, err = panelOf(p); err != nil {
		return nil, err
	}
	w := writer{p: p, scale: effectScale{p.Size.Scale}, pens: scenarioPens(p.Range)}
	if w.scale.Name == "" && p.Pool != nil {
		w.scale = effectScale{p.Pool.Scale}
	}
	for _, s := range []*section{w.evidence(), w.inflated(), w.next(), w.size(v.Panel != nil), w.changes(), w.since(), w.words(), w.data()} {
		if s == nil {
			continue
		}
		s.Number = fmt.Sprint(len(v.Sections) + 1)
		v.Sections = append(v.Sections, *s)
	}
	list := w.checklist(v.Sections)
	list.Number = fmt.Sprint(len(v.Sections) + 1)
	v.Sections = append(v.Sections, *list)
	v.Answer.Contents = v.Sections
	v.Policy = policy(string(v.Style))
	if v.Panel != nil {
		v.Chart, v.Boot = template.JS(asset("chart.js")), template.JS(asset("panel.js"))
		v.Policy = policy(string(v.Style), string(v.Chart), string(v.Boot))
	}
	v.Foot = []string{fmt.Sprintf("%s %s. The same plan and evidence give this page again, byte for byte.", p.Tool.Name, p.Tool.Version)}
	return v, nil
}

// writer holds what the sections share.
type writer struct {
	p     *result.Plan
	scale effectScale
	pens  map[string]pen
}

// figure makes a block of one figure.
func (w writer) figure(draw func(*result.Plan, ...FigureOption) Figure, margin ...note) block {
	v, missing := pair(draw(w.p), draw(w.p, Narrow()))
	if missing != "" {
		return block{Missing: missing, Margin: margin}
	}
	return block{Figures: []figurePair{v}, Margin: margin}
}
