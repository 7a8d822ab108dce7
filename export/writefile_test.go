package export

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestWriteFile(t *testing.T) {
	broken := errors.New("half way")
	half := func(w io.Writer) error {
		if _, err := io.WriteString(w, strings.Repeat("half a file ", 10000)); err != nil {
			return err
		}
		return broken
	}
	whole := func(w io.Writer) error {
		_, err := io.WriteString(w, "new")
		return err
	}
	for _, c := range []struct {
		name  string
		old   bool
		write func(io.Writer) error
		want  string
		err   error
	}{
		{"a new file", false, whole, "new", nil},
		{"in place of an old one", true, whole, "new", nil},
		{"fails half way", true, half, "old", broken},
		{"fails half way, no old file", false, half, "", broken},
	} {
		t.Run(c.name, func(t *testing.T) {
			dir := t.TempDir()
			path := filepath.Join(dir, "a.csv")
			if c.old {
				if err := os.WriteFile(path, []byte("old"), 0o600); err != nil {
					t.Fatal(err)
				}
			}
			err := WriteFile(path, c.write)
			if !errors.Is(err, c.err) || (err != nil && !strings.Contains(err.Error(), path)) {
				t.Errorf("error %v, want %v with the path", err, c.err)
			}
			got, _ := os.ReadFile(path)
			if string(got) != c.want {
				t.Errorf("the file holds %.20q, want %q", got, c.want)
			}
			entries, _ := os.ReadDir(dir)
			if want := map[bool]int{true: 1}[c.want != ""]; len(entries) != want {
				t.Errorf("%d files are left in the folder, want %d", len(entries), want)
			}
			if info, err := os.Stat(path); err == nil && c.old && info.Mode().Perm() != 0o600 {
				t.Errorf("mode %v, want that of the old file", info.Mode())
			}
		})
	}
}

// A panic in the writer leaves no temporary file either.
func TestWriteFilePanic(t *testing.T) {
	dir := t.TempDir()
	func() {
		defer func() { recover() }()
		WriteFile(filepath.Join(dir, "a"), func(io.Writer) error { panic("writer") })
	}()
	if entries, _ := os.ReadDir(dir); len(entries) != 0 {
		t.Errorf("left behind: %v", entries)
	}
}

func TestWriteFileNowhere(t *testing.T) {
	dir := t.TempDir()
	never := func(io.Writer) error { t.Error("the writer was called"); return nil }
	if err := WriteFile(filepath.Join(dir, "no", "such", "folder"), never); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("error %v, want that the folder is missing", err)
	}
	// Where a folder is in the way the temporary file is removed again.
	path := filepath.Join(dir, "taken")
	if err := os.MkdirAll(filepath.Join(path, "inside"), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := WriteFile(path, func(io.Writer) error { return nil }); err == nil {
		t.Error("wrote over a folder")
	}
	if entries, _ := os.ReadDir(dir); len(entries) != 1 {
		t.Errorf("left behind: %v", entries)
	}
}

func TestWriteFileReadOnlyFolder(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a")
	if err := os.WriteFile(path, []byte("old"), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(dir, 0o555); err != nil {
		t.Fatal(err)
	}
	defer os.Chmod(dir, 0o755)
	if probe, err := os.Create(filepath.Join(dir, "probe")); err == nil {
		probe.Close()
		os.Remove(probe.Name())
		t.Skip("this user may write in a read-only folder, so nothing can be told here")
	}
	if err := WriteFile(path, func(io.Writer) error { return nil }); !errors.Is(err, os.ErrPermission) {
		t.Errorf("error %v, want that the folder is read-only", err)
	}
	if got, _ := os.ReadFile(path); string(got) != "old" {
		t.Errorf("the file holds %q", got)
	}
}
