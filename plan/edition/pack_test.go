package edition

import (
	"archive/zip"
	"bytes"
	"os"
	"path/filepath"
	"testing"
)

func TestPackComesBack(t *testing.T) {
	dir := t.TempDir()
	from, to := Store{Dir: filepath.Join(dir, "a.editions")}, Store{Dir: filepath.Join(dir, "b.editions")}
	if pack, err := from.Pack(); err != nil || pack != nil {
		t.Errorf("a store that does not exist gives %d bytes, %v", len(pack), err)
	}
	if err := os.Mkdir(from.Dir, 0o755); err != nil {
		t.Fatal(err)
	}
	want := map[string]string{"001.json": "{}\n", "002.json": "{\"a\":1}\n", "evidence-0123456789ab.xlsx": "cells"}
	for name, text := range want {
		if err := os.WriteFile(filepath.Join(from.Dir, name), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	for _, other := range []string{".lock", "notes.txt"} {
		if err := os.WriteFile(filepath.Join(from.Dir, other), []byte("x"), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	pack, err := from.Pack()
	if err != nil {
		t.Fatal(err)
	}
	if again, err := from.Pack(); err != nil || !bytes.Equal(pack, again) {
		t.Errorf("packed twice, the bytes differ (%v)", err)
	}
	if err := to.Unpack(pack); err != nil {
		t.Fatal(err)
	}
	entries, err := os.ReadDir(to.Dir)
	if err != nil || len(entries) != len(want) {
		t.Fatalf("%d files (%v)", len(entries), err)
	}
	for name, text := range want {
		if got, err := os.ReadFile(filepath.Join(to.Dir, name)); err != nil || string(got) != text {
			t.Errorf("%s: %q (%v)", name, got, err)
		}
	}
}

func TestAPackPutsNothingElsewhere(t *testing.T) {
	for _, name := range []string{"../001.json", "/tmp/001.json", "sub/001.json", `..\001.json`, "001.json.exe", ""} {
		var b bytes.Buffer
		w := zip.NewWriter(&b)
		part, err := w.Create(name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := part.Write([]byte("x")); err != nil {
			t.Fatal(err)
		}
		w.Close()
		dir := t.TempDir()
		if err := (Store{Dir: filepath.Join(dir, "s.editions")}).Unpack(b.Bytes()); err == nil {
			t.Errorf("%q was taken", name)
		}
		if entries, _ := os.ReadDir(dir); len(entries) > 1 {
			t.Errorf("%q left %v", name, entries)
		}
	}
	if err := (Store{Dir: filepath.Join(t.TempDir(), "s")}).Unpack([]byte("no zip")); err == nil {
		t.Error("no zip, no error")
	}
}
