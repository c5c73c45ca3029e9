package edition

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"sort"
	"strconv"
	"strings"

	"footing/internal/finding"

	"github.com/gofrs/flock"
)

// Store is the folder that holds the editions of one plan. It need not exist.
type Store struct {
	Dir string
}

// Beside is the store of a plan file: "plan.editions" for plan.yaml.
func Beside(planPath string) Store {
	return Store{Dir: strings.TrimSuffix(planPath, filepath.Ext(planPath)) + ".editions"}
}

var fileForm = regexp.MustCompile(`^(\d{3,6})\.json$`)

func fileName(number int) string { return fmt.Sprintf("%03d.json", number) }

// Read gives all editions in order. The error, finding.Problems, names every edition that is broken, edited, missing or
// out of the chain; those that can be read are given all the same.
func (s Store) Read() ([]*Edition, error) {
	numbers, err := s.numbers()
	if err != nil {
		return nil, err
	}
	var out []*Edition
	var ps finding.Problems
	bad := func(n int, what, mend string) {
		ps = append(ps, finding.Finding{Severity: finding.Error, Kind: "edition-broken", Place: finding.Place{File: filepath.Join(s.Dir, fileName(n))}, What: what, Mend: mend})
	}
	const restore = "bring it back from your backup or version control"
	previous, expected := "", 1
	for _, n := range numbers {
		for ; expected < n; expected++ {
			bad(expected, fmt.Sprintf("edition %d is missing", expected), restore)
			previous = "?"
		}
		expected = n + 1
		data, err := os.ReadFile(filepath.Join(s.Dir, fileName(n)))
		if err != nil {
			bad(n, fmt.Sprintf("edition %d can't be read", n), "check its permissions")
			previous = "?"
			continue
		}
		e, err := unmarshal(data)
		if err != nil {
			bad(n, fmt.Sprintf("edition %d is broken: %v", n, err), restore)
			previous = "?"
			continue
		}
		if e.Number != n {
			bad(n, fmt.Sprintf("edition %d calls itself %d", n, e.Number), "give it its own name again")
		}
		if previous != "?" && e.Previous != previous {
			bad(n, fmt.Sprintf("edition %d does not follow the edition before it, which is not the one that was there when it was frozen", n), restore)
		}
		if what := s.checkCopy(e); what != "" {
			bad(n, fmt.Sprintf("edition %d: %s", n, what), restore)
		}
		previous = e.Hash
		out = append(out, e)
	}
	if len(ps) > 0 {
		return out, ps
	}
	return out, nil
}

// numbers lists the editions that the folder holds.
func (s Store) numbers() ([]int, error) {
	entries, err := os.ReadDir(s.Dir)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, nil
	}
	if err != nil {
		return nil, finding.Problems{{Severity: finding.Error, Kind: "editions-unreadable", Place: finding.Place{File: s.Dir}, What: "the folder of editions can't be read", Mend: "check its permissions"}}
	}
	var out []int
	for _, e := range entries {
		if m := fileForm.FindStringSubmatch(e.Name()); m != nil {
			n, _ := strconv.Atoi(m[1])
			if n > 0 && e.Name() == fileName(n) {
				out = append(out, n)
			}
		}
	}
	sort.Ints(out)
	return out, nil
}

// checkCopy says what is wrong with the copy of the evidence, "" when nothing is.
func (s Store) checkCopy(e *Edition) string {
	if e.Evidence == nil || e.Evidence.Copy == "" {
		return ""
	}
	if e.Evidence.Copy != filepath.Base(e.Evidence.Copy) {
		return "the name of its evidence copy leaves the folder"
	}
	data, err := os.ReadFile(filepath.Join(s.Dir, e.Evidence.Copy))
	if err != nil {
		return fmt.Sprintf("its copy of the evidence, %s, is missing", e.Evidence.Copy)
	}
	sum := sha256.Sum256(data)
	if hex.EncodeToString(sum[:]) != e.Evidence.SHA256 {
		return fmt.Sprintf("its copy of the evidence, %s, was changed", e.Evidence.Copy)
	}
	return ""
}

// Latest is the last of the editions, nil when there is none.
func Latest(es []*Edition) *Edition {
	if len(es) == 0 {
		return nil
	}
	return es[len(es)-1]
}

// Unchanged says that an edition would hold the same as the last one.
var Unchanged = errors.New("nothing has changed since the last edition")

// Keep appends e as the next edition and fills in its number, its chain and its hash. evidence are the bytes of the
// evidence file, nil where there is none. An edition is on the disk whole or not at all; two that are kept at the same
// time get two numbers. With again false an edition that holds the same as the last is refused with Unchanged.
func (s Store) Keep(e *Edition, evidence []byte, again bool) error {
	if err := os.MkdirAll(s.Dir, 0o755); err != nil {
		return plain(s.Dir, err)
	}
	lock := flock.New(filepath.Join(s.Dir, ".lock"))
	if err := lock.Lock(); err != nil {
		return fmt.Errorf("%s: can't be locked: %w", s.Dir, err)
	}
	defer lock.Unlock()
	s.sweep()
	all, err := s.Read()
	if err != nil {
		return err
	}
	e.Number, e.Previous = 1, ""
	if last := Latest(all); last != nil {
		if !again && sameContent(last, e) {
			return Unchanged
		}
		e.Number, e.Previous = last.Number+1, last.Hash
	}
	if err := s.keepEvidence(e, evidence); err != nil {
		return err
	}
	data, err := e.marshal()
	if err != nil {
		return err
	}
	return WriteFile(filepath.Join(s.Dir, fileName(e.Number)), data)
}

// sweep takes away what writes that were cut off left behind; the caller holds the lock.
func (s Store) sweep() {
	left, _ := filepath.Glob(filepath.Join(s.Dir, tempPattern))
	for _, f := range left {
		os.Remove(f)
	}
}

func sameContent(a, b *Edition) bool {
	same := a.Plan.SHA256 == b.Plan.SHA256 && a.Tool == b.Tool && (a.Evidence == nil) == (b.Evidence == nil)
	return same && (a.Evidence == nil || a.Evidence.SHA256 == b.Evidence.SHA256)
}

// keepEvidence copies the evidence file under a name made of its content.
func (s Store) keepEvidence(e *Edition, evidence []byte) error {
	if e.Evidence == nil || evidence == nil {
		return nil
	}
	sum := sha256.Sum256(evidence)
	if got := hex.EncodeToString(sum[:]); got != e.Evidence.SHA256 {
		return finding.Problems{{Severity: finding.Error, Kind: "evidence-changed", Place: finding.Place{File: e.Evidence.File},
			What: "the file was changed while it was being read", Mend: "run it again"}}
	}
	e.Evidence.Copy = "evidence-" + e.Evidence.SHA256[:12] + strings.ToLower(filepath.Ext(e.Evidence.File))
	path := filepath.Join(s.Dir, e.Evidence.Copy)
	if have, err := os.ReadFile(path); err == nil && string(have) == string(evidence) {
		return nil
	}
	return WriteFile(path, evidence)
}
