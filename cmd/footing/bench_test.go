package main

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// BenchmarkDemo writes and runs both demonstrations, as footing demo does.
func BenchmarkDemo(b *testing.B) {
	dir := b.TempDir()
	for i := 0; i < b.N; i++ {
		b.StopTimer()
		at := filepath.Join(dir, "demo")
		os.RemoveAll(at)
		b.StartTimer()
		var out, errOut bytes.Buffer
		if code := run([]string{"demo", at}, strings.NewReader(""), &out, &errOut); code != 0 {
			b.Fatal(errOut.String())
		}
	}
}
