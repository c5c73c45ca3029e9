package edition

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"

	"footing/plan/result"
)

// made is an edition of an invented plan; text tells one from another.
func made(text string, evidence []byte) *Edition {
	sum := sha256.Sum256(evidence)
	p := &result.Plan{Schema: "footing/plan/1", Tool: result.Tool{Name: "footing", Version: "0"}, File: "plan.yaml", SHA256: hashOf([]byte(text)),
		Pool: &result.Pool{Evidence: result.Evidence{File: "evidence.csv", SHA256: hex.EncodeToString(sum[:])}}}
	e := Of(p, []byte(text), []result.NamedText{{Name: "title", Text: text}})
	e.Date, e.By, e.Why = "2026-11-03", "AB", "<why> & \u2028 \"so\""
	return e
}

func store(t *testing.T) Store {
	t.Helper()
	return Beside(filepath.Join(t.TempDir(), "plan.yaml"))
}

func keep(t *testing.T, s Store, texts ...string) {
	t.Helper()
	for _, x := range texts {
		ev := []byte("study\n" + x + "\n")
		if err := s.Keep(made(x, ev), ev, false); err != nil {
			t.Fatal(err)
		}
	}
}

func TestEditionsComeBackAsTheyWere(t *testing.T) {
	s := store(t)
	keep(t, s, "title: a\nline two\n", "title: b")
	all, err := s.Read()
	if err != nil || len(all) != 2 {
		t.Fatalf("%d editions, %v", len(all), err)
	}
	if string(all[0].Plan.Text()) != "title: a\nline two\n" || all[1].Previous != all[0].Hash || all[1].Number != 2 || all[0].Why != "<why> & \u2028 \"so\"" {
		t.Errorf("%+v", all[0])
	}
	copied, err := os.ReadFile(filepath.Join(s.Dir, all[1].Evidence.Copy))
	if err != nil || string(copied) != "study\ntitle: b\n" {
		t.Errorf("%q %v", copied, err)
	}
	if filepath.Base(s.Dir) != "plan.editions" {
		t.Errorf("store in %s", s.Dir)
	}
}

func TestNoStoreIsNoEdition(t *testing.T) {
	if all, err := store(t).Read(); all != nil || err != nil {
		t.Errorf("%v %v", all, err)
	}
}

func TestUnchangedIsRefused(t *testing.T) {
	s := store(t)
	keep(t, s, "a")
	ev := []byte("study\na\n")
	if err := s.Keep(made("a", ev), ev, false); !errors.Is(err, Unchanged) {
		t.Errorf("got %v", err)
	}
	if err := s.Keep(made("a", ev), ev, true); err != nil {
		t.Errorf("got %v", err)
	}
}

func TestEvidenceThatChangedMeanwhileIsRefused(t *testing.T) {
	s := store(t)
	if err := s.Keep(made("a", []byte("x")), []byte("y"), false); err == nil || !strings.Contains(err.Error(), "changed while") {
		t.Errorf("got %v", err)
	}
}

func TestEveryDamageIsNamed(t *testing.T) {
	edit := func(name, from, to string) func(t *testing.T, s Store) {
		return func(t *testing.T, s Store) {
			path := filepath.Join(s.Dir, name)
			data, err := os.ReadFile(path)
			if err != nil || !strings.Contains(string(data), from) {
				t.Fatalf("%s: no %q in it (%v)", name, from, err)
			}
			if err := os.WriteFile(path, []byte(strings.Replace(string(data), from, to, 1)), 0o600); err != nil {
				t.Fatal(err)
			}
		}
	}
	for name, c := range map[string]struct {
		damage func(t *testing.T, s Store)
		want   string
	}{
		"edited":  {edit("002.json", `"by": "AB"`, `"by": "CD"`), "002.json: edition 2 is broken: its text was changed"},
		"hash":    {edit("002.json", `"hash": "`, `"hash": "0`), "002.json: edition 2 is broken"},
		"cut off": {func(t *testing.T, s Store) { os.Truncate(filepath.Join(s.Dir, "003.json"), 500) }, "003.json: edition 3 is broken"},
		"empty":   {func(t *testing.T, s Store) { os.Truncate(filepath.Join(s.Dir, "001.json"), 0) }, "001.json: edition 1 is broken"},
		"missing": {func(t *testing.T, s Store) { os.Remove(filepath.Join(s.Dir, "002.json")) }, "002.json: edition 2 is missing"},
		"evidence gone": {func(t *testing.T, s Store) {
			all, _ := s.Read()
			os.Remove(filepath.Join(s.Dir, all[0].Evidence.Copy))
		}, "edition 1: its copy of the evidence"},
		"evidence edited": {func(t *testing.T, s Store) {
			all, _ := s.Read()
			os.WriteFile(filepath.Join(s.Dir, all[2].Evidence.Copy), []byte("other"), 0o600)
		}, "was changed"},
		"replaced by a true edition of another plan": {func(t *testing.T, s Store) {
			other := store(t)
			keep(t, other, "x", "y")
			data, _ := os.ReadFile(filepath.Join(other.Dir, "002.json"))
			os.WriteFile(filepath.Join(s.Dir, "002.json"), data, 0o600)
		}, "does not follow the edition before it"},
		"swapped": {func(t *testing.T, s Store) {
			a, b := filepath.Join(s.Dir, "001.json"), filepath.Join(s.Dir, "002.json")
			os.Rename(a, a+"x")
			os.Rename(b, a)
			os.Rename(a+"x", b)
		}, "edition 1 calls itself 2"},
	} {
		t.Run(name, func(t *testing.T) {
			s := store(t)
			keep(t, s, "a", "b", "c")
			c.damage(t, s)
			_, err := s.Read()
			if err == nil || !strings.Contains(err.Error(), c.want) {
				t.Errorf("got %v, want %s", err, c.want)
			}
			ev := []byte("d")
			if err := s.Keep(made("d", ev), ev, false); err == nil {
				t.Error("an edition was kept on top of a broken chain")
			}
		})
	}
}

func TestLineEndsOfVersionControlAreNoDamage(t *testing.T) {
	s := store(t)
	keep(t, s, "a", "b")
	path := filepath.Join(s.Dir, "002.json")
	data, _ := os.ReadFile(path)
	os.WriteFile(path, []byte(strings.ReplaceAll(string(data), "\n", "\r\n")), 0o600)
	if _, err := s.Read(); err != nil {
		t.Error(err)
	}
}

func TestManyAtOnceGetOneNumberEach(t *testing.T) {
	s := store(t)
	const n = 12
	var group sync.WaitGroup
	errs := make([]error, n)
	for i := range n {
		group.Add(1)
		go func() {
			defer group.Done()
			ev := []byte(strings.Repeat("x", i+1))
			errs[i] = s.Keep(made(strings.Repeat("p", i+1), ev), ev, false)
		}()
	}
	group.Wait()
	for _, err := range errs {
		if err != nil {
			t.Error(err)
		}
	}
	if all, err := s.Read(); err != nil || len(all) != n {
		t.Errorf("%d editions, %v", len(all), err)
	}
}
