package starter

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// A starter that overwrote a person's study would be worse than none.
func TestWriteRefusesToOverwrite(t *testing.T) {
	for _, there := range names {
		dir := t.TempDir()
		path := filepath.Join(dir, there)
		if err := os.WriteFile(path, []byte("mine"), 0o600); err != nil {
			t.Fatal(err)
		}
		paths, err := Write(dir)
		if err == nil || paths != nil || !strings.Contains(err.Error(), path+" is there already and is not overwritten") {
			t.Errorf("with %s there: wrote %v, said %v", there, paths, err)
		}
		entries, err := os.ReadDir(dir)
		if err != nil {
			t.Fatal(err)
		}
		data, err := os.ReadFile(path)
		if err != nil || string(data) != "mine" || len(entries) != 1 {
			t.Errorf("with %s there: it holds %q now, beside %d other files (%v)", there, data, len(entries)-1, err)
		}
	}
}

// The folder may be deep and new; the files must come out as they are in the program.
func TestWrite(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "a", "b")
	paths, err := Write(dir)
	if err != nil {
		t.Fatal(err)
	}
	for i, name := range names {
		if paths[i] != filepath.Join(dir, name) {
			t.Errorf("path %d is %s", i, paths[i])
		}
		got, err := os.ReadFile(paths[i])
		want, err2 := files.ReadFile(name)
		if err != nil || err2 != nil || string(got) != string(want) {
			t.Errorf("%s differs from what is in the program (%v, %v)", name, err, err2)
		}
	}
}

// A place that cannot be written must be said.
func TestWriteNowhere(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(file, nil, 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := Write(filepath.Join(file, "below")); err == nil {
		t.Error("a folder inside a file was made")
	}
}
