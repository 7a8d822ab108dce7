// Package starter holds the brief and the site plan that `boughwork new` writes.
package starter

import (
	"embed"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
)

//go:embed brief.yaml site.geojson
var files embed.FS

// names lists the files in the order in which a person reads them.
var names = []string{"brief.yaml", "site.geojson"}

// Write writes the starter files into dir, which is made if need be, and returns their paths, the brief first. If one
// of them is there already nothing is written.
func Write(dir string) ([]string, error) {
	var paths []string
	for _, name := range names {
		path := filepath.Join(dir, name)
		switch _, err := os.Lstat(path); {
		case err == nil:
			return nil, fmt.Errorf("%s is there already and is not overwritten; name another folder, or move it away", path)
		case !errors.Is(err, fs.ErrNotExist):
			return nil, fmt.Errorf("cannot look for %s: %w", path, err)
		}
		paths = append(paths, path)
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return nil, fmt.Errorf("cannot make the folder: %w", err)
	}
	for i, name := range names {
		data, err := files.ReadFile(name)
		if err != nil {
			return nil, err
		}
		if err := writeNew(paths[i], data); err != nil {
			return nil, err
		}
	}
	return paths, nil
}

// writeNew writes a file that must not be there yet, even if it came to be since the check.
func writeNew(path string, data []byte) error {
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return fmt.Errorf("cannot write: %w", err)
	}
	_, err = f.Write(data)
	return errors.Join(err, f.Close())
}
