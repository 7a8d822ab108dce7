package pipeline

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"boughwork/ground/layout"
)

// file is one of the results: its name and what writes it from a record.
type file struct {
	name  string
	write func(io.Writer, *layout.Record) error
}

// results are the files of a study in the order in which a person looks for them.
var results = []file{
	{"layout.json", layout.Write},
}

// write makes the folder and all files. A folder that holds earlier results gets new files of the same names.
func (g *growth) write(context.Context) (string, error) {
	if err := os.MkdirAll(g.out.Dir, 0o777); err != nil {
		return "", fmt.Errorf("cannot make the folder of the results: %w", err)
	}
	g.summarise()
	list := append(results[:len(results):len(results)], file{"summary.txt", func(w io.Writer, _ *layout.Record) error {
		_, err := io.WriteString(w, g.out.Summary)
		return err
	}})
	for i, f := range list {
		if err := writeWhole(filepath.Join(g.out.Dir, f.name), func(w io.Writer) error { return f.write(w, g.out.Record) }); err != nil {
			return "", err
		}
		g.obs.Step(Step{Stage: StageFiles, Part: f.name, Done: float64(i+1) / float64(len(list))})
	}
	return fmt.Sprintf("%s in %s", count(len(list), "file"), g.out.Dir), nil
}

// writeWhole writes a file beside its place and moves it there when it is whole, so that nobody reads half of one.
func writeWhole(path string, write func(io.Writer) error) (err error) {
	f, err := os.CreateTemp(filepath.Dir(path), ".part-*")
	if err != nil {
		return fmt.Errorf("cannot write %s: %w", path, err)
	}
	defer func() {
		if err != nil {
			err = errors.Join(fmt.Errorf("cannot write %s: %w", path, err), os.Remove(f.Name()))
		}
	}()
	b := bufio.NewWriter(f)
	if err := errors.Join(write(b), b.Flush(), f.Chmod(0o644), f.Close()); err != nil {
		return err
	}
	return os.Rename(f.Name(), path)
}
