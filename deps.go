//go:build deps

package footing

import (
	_ "github.com/chromedp/chromedp"
	_ "github.com/go-echarts/go-echarts/v2/charts"
	_ "github.com/gofrs/flock"
	_ "github.com/google/go-cmp/cmp"
	_ "github.com/invopop/jsonschema"
	_ "github.com/jedib0t/go-pretty/v6/table"
	_ "github.com/richardlehane/mscfb"
	_ "github.com/rogpeppe/go-internal/testscript"
	_ "github.com/santhosh-tekuri/jsonschema/v6"
	_ "github.com/spf13/cobra"
	_ "github.com/xuri/excelize/v2"
	_ "go.yaml.in/yaml/v4"
	_ "golang.org/x/image/vector"
	_ "golang.org/x/term"
	_ "golang.org/x/text/encoding/htmlindex"
	_ "gonum.org/v1/gonum/mat"
	_ "pgregory.net/rapid"
)
