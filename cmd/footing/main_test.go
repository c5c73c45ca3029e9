package main

import (
	"bytes"
	"flag"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
	"github.com/spf13/cobra"
)

var update = flag.Bool("update", false, "write the expected outputs of the scripts anew")

func TestMain(m *testing.M) {
	testscript.Main(removing{m}, map[string]func(){"footing": main})
}

// removing runs the tests and takes the prepared folder away.
type removing struct{ m *testing.M }

func (r removing) Run() int {
	defer func() {
		if folderMade {
			os.RemoveAll(preparedFolder())
		}
	}()
	return r.m.Run()
}

var folderMade bool

// TestScripts runs every command as a person would, with golden outputs and exit codes.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		UpdateScripts:       *update,
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
		Cmds: map[string]func(ts *testscript.TestScript, neg bool, args []string){
			"exitcode": exitCode,
			"notrace":  noTrace,
		},
	})
}

// exitCode runs footing in the script's folder and holds its exit code against the first argument.
func exitCode(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 1 {
		ts.Fatalf("usage: exitcode CODE ARGUMENT...")
	}
	out, errOut, code := execute(ts.MkAbs("."), args[1:])
	ts.Check(os.WriteFile(ts.MkAbs("stdout.txt"), []byte(out), 0o600))
	ts.Check(os.WriteFile(ts.MkAbs("stderr.txt"), []byte(errOut), 0o600))
	if want := args[0]; want != strconv.Itoa(code) {
		ts.Fatalf("exit code %d, want %s\nstdout:\n%s\nstderr:\n%s", code, want, out, errOut)
	}
}

// execute runs this test program as footing, in a folder of its own process.
func execute(dir string, args []string) (out, errOut string, code int) {
	var o, e strings.Builder
	c := exec.Cmd{Path: os.Args[0], Args: append([]string{"footing"}, args...), Dir: dir, Stdout: &o, Stderr: &e, Env: os.Environ()}
	if abs, err := filepath.Abs(os.Args[0]); err == nil {
		c.Path = abs
	}
	if err := c.Run(); err != nil && c.ProcessState == nil {
		return "", err.Error(), -1
	}
	return o.String(), e.String(), c.ProcessState.ExitCode()
}

// noTrace fails where the last run printed a stack trace or a fault.
func noTrace(ts *testscript.TestScript, neg bool, args []string) {
	for _, f := range []string{"stdout.txt", "stderr.txt"} {
		s := ts.ReadFile(f)
		for _, bad := range []string{"goroutine", "panic", "runtime error", "fault of the program"} {
			if strings.Contains(s, bad) {
				ts.Fatalf("%s holds %q:\n%s", f, bad, s)
			}
		}
	}
}

// TestEveryHelpExampleRuns: a command without help, long text and an example that works fails the build.
func TestEveryHelpExampleRuns(t *testing.T) {
	root := (&app{}).root()
	for _, c := range root.Commands() {
		if c.Hidden || c.Name() == "help" || c.Name() == "completion" {
			continue
		}
		if c.Short == "" || c.Long == "" || c.Example == "" {
			t.Errorf("footing %s lacks help, a long text or an example", c.Name())
		}
		for _, line := range strings.Split(c.Long+"\n"+c.UsageString(), "\n") {
			if len([]rune(line)) > 80 && !strings.HasPrefix(strings.TrimSpace(line), "footing ") {
				t.Errorf("footing %s --help: %d columns: %s", c.Name(), len([]rune(line)), line)
			}
		}
		for _, line := range strings.Split(c.Example, "\n") {
			t.Run(strings.TrimSpace(line), func(t *testing.T) { runExample(t, c, line) })
		}
	}
}

func runExample(t *testing.T, c *cobra.Command, line string) {
	words := shellWords(line)
	if len(words) < 2 || words[0] != "footing" || words[1] != c.Name() {
		t.Fatalf("%q is no example of footing %s", line, c.Name())
	}
	out, errOut, code := execute(exampleFolder(t), words[1:])
	if code != exitDone && !(code == exitNo && c.Name() == "compare") {
		t.Errorf("exit code %d\n%s", code, errOut)
	}
	if out == "" || errOut != "" {
		t.Errorf("printed %q and on stderr %q", out, errOut)
	}
	for _, l := range strings.Split(out, "\n") {
		if n := len([]rune(l)); n > 80 && !strings.Contains(line, "--json") && !strings.Contains(line, "--schema") && !strings.Contains(line, "--line") && !strings.HasSuffix(line, "compare .") {
			t.Errorf("%d columns: %s", n, l)
		}
	}
}

// exampleFolder holds what the examples name: a plan with an edition, and its evidence.
func exampleFolder(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	if err := os.CopyFS(dir, os.DirFS(preparedFolder())); err != nil {
		t.Fatal(err)
	}
	return filepath.Join(dir, "continuous")
}

// preparedFolder is made once: both demonstrations, the continuous one with an edition and a change since.
var preparedFolder = sync.OnceValue(func() string {
	dir, err := os.MkdirTemp("", "footing-examples")
	must(err)
	folderMade = true
	if _, errOut, code := execute(dir, []string{"demo", "."}); code != exitDone {
		panic("demo: " + errOut)
	}
	root := dir
	dir = filepath.Join(dir, "continuous")
	if _, errOut, code := execute(dir, []string{"freeze", "plan.yaml", "--date", "2026-01-01"}); code != exitDone {
		panic("freeze: " + errOut)
	}
	must(os.WriteFile(filepath.Join(dir, "plan.yaml"), bytes.Replace(continuousPlan, []byte("power: 0.80"), []byte("power: 0.85"), 1), 0o600))
	must(os.WriteFile(filepath.Join(dir, "new.csv"), []byte("study,year,treatment n,treatment mean,treatment SD,control n,control mean,control SD\nSaw mill (invented),2026,40,55.1,11.9,41,51.0,12.2\n"), 0o600))
	return root
})

func must(err error) {
	if err != nil {
		panic(err)
	}
}

// shellWords splits a line as a shell does, for the double quotes that examples use.
func shellWords(line string) []string {
	var words []string
	word, quoted, open := "", false, false
	for _, r := range strings.TrimSpace(line) {
		switch {
		case r == '"':
			quoted, open = !quoted, true
		case r == ' ' && !quoted:
			if word != "" || open {
				words = append(words, word)
			}
			word, open = "", false
		default:
			word += string(r)
		}
	}
	if word != "" || open {
		words = append(words, word)
	}
	return words
}
