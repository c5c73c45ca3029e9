package reports

import (
	"context"
	"fmt"
	"net/url"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/emulation"
	cdplog "github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
)

// browser is one browser of a test. All use of the browser library stands in this file.
type browser struct {
	t   *testing.T
	ctx context.Context
	*heard
}

// heard is what pages reported and asked for since the last open.
type heard struct {
	mu    sync.Mutex
	said  []string // console messages, exceptions, violations of the policy
	asked []string // addresses
}

// in is the same browser for a subtest.
func (b *browser) in(t *testing.T) *browser { return &browser{t: t, ctx: b.ctx, heard: b.heard} }

// newBrowser starts a browser. Without one the test is skipped and says so, unless FOOTING_REQUIRE_BROWSER is 1.
func newBrowser(t *testing.T) *browser {
	t.Helper()
	exe := ""
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome"} {
		if found, err := exec.LookPath(name); err == nil {
			exe = found
			break
		}
	}
	if exe == "" {
		if os.Getenv("FOOTING_REQUIRE_BROWSER") == "1" {
			t.Fatal("FOOTING_REQUIRE_BROWSER is 1 and there is no browser")
		}
		t.Skip("no chromium on this machine: the page was not opened in a browser")
	}
	options := append(chromedp.DefaultExecAllocatorOptions[:],
		chromedp.ExecPath(exe), chromedp.UserDataDir(t.TempDir()), chromedp.Flag("no-sandbox", true), chromedp.Flag("disable-gpu", true),
		chromedp.Flag("disable-quic", true), chromedp.Flag("no-first-run", true), chromedp.Flag("disable-background-networking", true),
		chromedp.Flag("disable-component-update", true), chromedp.Flag("disable-sync", true))
	ctx, cancelTime := context.WithTimeout(context.Background(), 120*time.Second)
	ctx, cancelAllocator := chromedp.NewExecAllocator(ctx, options...)
	ctx, cancel := chromedp.NewContext(ctx)
	t.Cleanup(func() { cancel(); cancelAllocator(); cancelTime() })
	b := &browser{t: t, ctx: ctx, heard: &heard{}}
	b.check(chromedp.Listen(ctx, b.hear))
	if _, err := chromedp.Call(ctx, cdplog.Enable, cdp.Empty{}); err != nil {
		t.Fatal(err)
	}
	if _, err := chromedp.Call(ctx, network.Enable, network.EnableParams{}); err != nil {
		t.Fatal(err)
	}
	return b
}

func (b *browser) hear(event any) {
	b.mu.Lock()
	defer b.mu.Unlock()
	switch e := event.(type) {
	case *runtime.EventConsoleAPICalled:
		b.said = append(b.said, "console: "+string(e.Type))
	case *runtime.EventExceptionThrown:
		b.said = append(b.said, fmt.Sprintf("exception: %+v", e.ExceptionDetails))
	case *cdplog.EventEntryAdded:
		b.said = append(b.said, "log: "+e.Entry.Text)
	case *network.EventRequestWillBeSent:
		b.asked = append(b.asked, e.Request.URL)
	}
}

func (b *browser) check(err error) {
	b.t.Helper()
	if err != nil {
		b.t.Fatal(err)
	}
}

// open writes a page to a file and opens it at a width; it gives the file's address.
func (b *browser) open(page []byte, width int) string {
	b.t.Helper()
	file := filepath.Join(b.t.TempDir(), "report.html")
	b.check(os.WriteFile(file, page, 0o644))
	b.mu.Lock()
	b.said, b.asked = nil, nil
	b.mu.Unlock()
	address := (&url.URL{Scheme: "file", Path: file}).String()
	b.check(chromedp.Do(b.ctx, chromedp.EmulateViewport(int64(width), 900), chromedp.Navigate(address)))
	return address
}

// dark asks pages for their dark colours, or takes that back.
func (b *browser) dark(on bool) {
	b.t.Helper()
	value := "light"
	if on {
		value = "dark"
	}
	_, err := chromedp.Call(b.ctx, emulation.SetEmulatedMedia, emulation.SetEmulatedMediaParams{Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: value}}})
	b.check(err)
}

// quiet fails the test when the page reported anything or asked for anything but itself.
func (b *browser) quiet(address string) {
	b.t.Helper()
	b.mu.Lock()
	defer b.mu.Unlock()
	for _, s := range b.said {
		b.t.Errorf("the page reported: %.300s", s)
	}
	for _, a := range b.asked {
		if a != address && !strings.HasPrefix(a, "data:") {
			b.t.Errorf("the page asked for %.200s", a)
		}
	}
}

// text evaluates an expression that gives a text.
func (b *browser) text(expression string) string {
	b.t.Helper()
	s, err := chromedp.Run(b.ctx, chromedp.Evaluate[string](expression))
	if err != nil {
		b.t.Fatalf("%.120s: %v", expression, err)
	}
	return s
}

// number evaluates an expression that gives a number.
func (b *browser) number(expression string) float64 {
	b.t.Helper()
	x, err := chromedp.Run(b.ctx, chromedp.Evaluate[float64](expression))
	if err != nil {
		b.t.Fatalf("%.120s: %v", expression, err)
	}
	return x
}

// picture writes a picture of the whole page.
func (b *browser) picture(file string) {
	b.t.Helper()
	png, err := chromedp.Run(b.ctx, chromedp.FullScreenshot(100))
	b.check(err)
	b.check(os.WriteFile(file, png, 0o644))
}

// pdf prints the page.
func (b *browser) pdf(file string, paper chromedp.PaperSize) {
	b.t.Helper()
	pdf, err := chromedp.Run(b.ctx, chromedp.PrintToPDF(chromedp.PDFPaper(paper), chromedp.PDFPrintBackground(), chromedp.PDFMargin(0.5)))
	b.check(err)
	b.check(os.WriteFile(file, pdf, 0o644))
}
