package reports

import (
	"io"
	"sync"
)

// Prepare reads the page's templates and style sheet ahead of their first use, which takes longer than writing a page. A command calls it beside the computation; nothing
// depends on it.
func Prepare() { prepare() }

var prepare = sync.OnceFunc(func() {
	// A template's contexts are worked out when it is first executed.
	_ = pageTemplate().ExecuteTemplate(io.Discard, "page", &page{})
	sheet()
})
