package edition

import (
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
)

// PackEnding is how the name of a pack ends.
const PackEnding = ".editions.zip"

// packed are the names that a store holds: editions and the evidence that they used.
var packed = regexp.MustCompile(`^(\d{3,6}\.json|evidence-[0-9a-f]{6,64}(\.[a-z0-9]{1,8})?)$`)

// mostUnpacked is the size of all files together from which a pack is refused.
const mostUnpacked = 256 << 20

// Pack puts the files of the store into one compressed file; nil where there are none. The same files give the same bytes.
func (s Store) Pack() ([]byte, error) {
	entries, err := os.ReadDir(s.Dir)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, nil
	}
	if err != nil {
		return nil, plain(s.Dir, err)
	}
	var out bytes.Buffer
	w, files := zip.NewWriter(&out), 0
	for _, e := range entries { // in the order of their names
		if !e.Type().IsRegular() || !packed.MatchString(e.Name()) {
			continue
		}
		data, err := os.ReadFile(filepath.Join(s.Dir, e.Name()))
		if err != nil {
			return nil, plain(e.Name(), err)
		}
		part, err := w.CreateHeader(&zip.FileHeader{Name: e.Name(), Method: zip.Deflate})
		if err != nil {
			return nil, err
		}
		if _, err := part.Write(data); err != nil {
			return nil, err
		}
		files++
	}
	if err := w.Close(); err != nil {
		return nil, err
	}
	if files == 0 {
		return nil, nil
	}
	return out.Bytes(), nil
}

// Unpack writes the files of a pack into the store, which must not exist yet. A pack from a stranger can put nothing elsewhere: names that a store does not hold are
// refused, and so is a pack that grows beyond all measure.
func (s Store) Unpack(pack []byte) error {
	z, err := zip.NewReader(bytes.NewReader(pack), int64(len(pack)))
	if err != nil {
		return fmt.Errorf("the packed editions can't be read: %w", err)
	}
	if err := os.Mkdir(s.Dir, 0o755); err != nil {
		return plain(s.Dir, err)
	}
	left := int64(mostUnpacked)
	for _, f := range z.File {
		if !packed.MatchString(f.Name) {
			return fmt.Errorf("the packed editions hold %q, which is none", f.Name)
		}
		r, err := f.Open()
		if err != nil {
			return fmt.Errorf("the packed editions can't be read: %w", err)
		}
		data, err := io.ReadAll(io.LimitReader(r, left+1))
		r.Close()
		if err != nil {
			return fmt.Errorf("the packed edition %s can't be read: %w", f.Name, err)
		}
		if left -= int64(len(data)); left < 0 {
			return errors.New("the packed editions are far too large")
		}
		if err := os.WriteFile(filepath.Join(s.Dir, f.Name), data, 0o600); err != nil {
			return plain(f.Name, err)
		}
	}
	return nil
}
