package main

import (
	"path/filepath"
	"strings"
	"testing"
)

// faulty is an input that no program survives unguarded.
type faulty struct{}

func (faulty) Read([]byte) (int, error) { panic("first line\nsecond line") }

// TestAFaultIsOneLine: whatever goes wrong inside, the person sees one line and exit code 3, never a stack trace.
func TestAFaultIsOneLine(t *testing.T) {
	dir := exampleFolder(t)
	var out, errOut strings.Builder
	code := run([]string{"add", filepath.Join(dir, "plan.yaml"), "--from", filepath.Join(dir, "new.csv")}, faulty{}, &out, &errOut)
	said := errOut.String()
	said = said[strings.LastIndex(said, "footing: "):]
	if code != exitFault || strings.Count(said, "\n") != 1 || !strings.Contains(said, "first line;") || strings.Contains(errOut.String(), "goroutine") {
		t.Errorf("exit code %d, stderr %q", code, errOut.String())
	}
}

func TestAFaultBesideIsCaughtToo(t *testing.T) {
	if m := making(func() ([]byte, error) { panic("x\ny") }); m.err == nil || strings.Contains(m.err.Error(), "\n") {
		t.Errorf("%v", m.err)
	}
	d := guarded(func() demoDone { panic("x") })
	var errOut strings.Builder
	if code := (&app{err: &errOut}).finish(d.err); code != exitFault || !strings.HasPrefix(errOut.String(), "footing: a fault of the program: x") {
		t.Errorf("exit code %d, %q", code, errOut.String())
	}
}
