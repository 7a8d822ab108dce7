package bench

import (
	"context"
	"errors"
	"path/filepath"
	"slices"
	"strings"

	"boughwork/cmd/boughwork/internal/pipeline"
	"boughwork/geom"
	"boughwork/ground/layout"
)

// briefEndings are the endings of the names of briefs.
var briefEndings = []string{".yaml", ".yml", ".toml", ".json"}

// IsBrief reports whether a name is that of a brief and not of a problem.
func IsBrief(name string) bool {
	return slices.Contains(briefEndings, strings.ToLower(filepath.Ext(name)))
}

// Study makes a job of the brief in a file: its ground structure and the settings with which it would be grown. The
// environment is above the file, as ever. Issues are what is wrong or worth saying, in the order in which it was found;
// if one is an error, there is no job. The error is that of a solver that cannot be had.
func Study(path string) (Job, geom.Issues, error) {
	out, solver, err := pipeline.Prepare(context.Background(), pipeline.Job{Brief: path})
	switch {
	case errors.Is(err, pipeline.ErrInput):
		return Job{}, out.Issues, nil
	case err != nil:
		return Job{}, out.Issues, err
	}
	solve := out.Study.Solve
	return Job{Name: path, Structure: out.Structure, Options: layout.Options{Gap: solve.Gap, Solver: solver, MaxRounds: solve.Rounds}}, out.Issues, nil
}
