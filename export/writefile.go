package export

import (
	"bufio"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

// fileMode is what a new file may be used for: read by all, written by its owner. A file that is there already keeps its
// own.
const fileMode = 0o644

// WriteFile writes a whole file or nothing: write fills a temporary file in the same folder, which is synced to the disk
// and then takes the place of path. If anything fails the file at path stays as it was, the temporary file is removed,
// and the error names path. It does not make folders.
func WriteFile(path string, write func(io.Writer) error) error {
	if err := writeFile(path, write); err != nil {
		return fmt.Errorf("export: %s cannot be written: %w", path, err)
	}
	return nil
}

func writeFile(path string, write func(io.Writer) error) error {
	tmp, err := os.CreateTemp(filepath.Dir(path), "."+filepath.Base(path)+".*.part")
	if err != nil {
		return err
	}
	inPlace := false
	defer func() { // also when write panics
		if !inPlace {
			tmp.Close() // may be closed already; the first error counts
			os.Remove(tmp.Name())
		}
	}()
	buffered := bufio.NewWriter(tmp)
	if err := write(buffered); err != nil {
		return err
	}
	if err := buffered.Flush(); err != nil {
		return err
	}
	mode := os.FileMode(fileMode)
	if old, err := os.Stat(path); err == nil && old.Mode().IsRegular() {
		mode = old.Mode().Perm()
	}
	if err := tmp.Chmod(mode); err != nil {
		return err
	}
	if err := tmp.Sync(); err != nil {
		return err
	}
	if err := tmp.Close(); err != nil {
		return err
	}
	if err := os.Rename(tmp.Name(), path); err != nil {
		return err
	}
	inPlace = true
	return nil
}
