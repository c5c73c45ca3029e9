package edition

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
)

// tempPattern names the files that a write goes through; one that is left behind belongs to a write that was cut off.
const tempPattern = ".footing-*.part"

// WriteFile puts data at path whole or not at all: into a new file of the same folder, onto the disk, then in place of
// what was there. The file is readable by everybody and writable by its owner, as far as the system's mask allows.
func WriteFile(path string, data []byte) (err error) {
	dir := filepath.Dir(path)
	t, err := os.CreateTemp(dir, tempPattern)
	if err != nil {
		return plain(path, err)
	}
	defer func() {
		if err != nil {
			t.Close()
			os.Remove(t.Name())
		}
	}()
	if _, err = t.Write(data); err != nil {
		return plain(path, err)
	}
	if err = t.Chmod(0o644); err != nil && !errors.Is(err, errors.ErrUnsupported) {
		return plain(path, err)
	}
	if err = t.Sync(); err != nil {
		return plain(path, err)
	}
	if err = t.Close(); err != nil {
		return plain(path, err)
	}
	if err = os.Rename(t.Name(), path); err != nil {
		return plain(path, err)
	}
	syncFolder(dir)
	return nil
}

// syncFolder makes the new name last; systems that can't sync a folder keep it by themselves.
func syncFolder(dir string) {
	if d, err := os.Open(dir); err == nil {
		_ = d.Sync()
		d.Close()
	}
}

// plain says in one line what went wrong, by the name that the caller used.
func plain(path string, err error) error {
	var pe *fs.PathError
	var le *os.LinkError
	switch {
	case errors.As(err, &pe):
		err = pe.Err
	case errors.As(err, &le):
		err = le.Err
	}
	return fmt.Errorf("%s: can't be written: %w", path, err)
}
