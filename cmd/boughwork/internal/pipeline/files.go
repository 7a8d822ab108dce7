package pipeline

import (
	"context"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"boughwork/export"
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
	{"overlay.geojson", export.Overlay},
	{"sheet.svg", export.Sheet},
	{"bars.csv", export.BarsCSV},
	{"joints.csv", export.JointsCSV},
	{"reactions.csv", export.ReactionsCSV},
	{"cases.csv", export.CasesCSV},
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
		if err := export.WriteFile(filepath.Join(g.out.Dir, f.name), func(w io.Writer) error { return f.write(w, g.out.Record) }); err != nil {
			return "", err
		}
		g.obs.Step(Step{Stage: StageFiles, Part: f.name, Done: float64(i+1) / float64(len(list))})
	}
	return fmt.Sprintf("%s in %s", count(len(list), "file"), g.out.Dir), nil
}
