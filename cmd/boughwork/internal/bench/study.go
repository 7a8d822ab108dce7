package bench

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"boughwork/cmd/boughwork/internal/brief"
	"boughwork/cmd/boughwork/internal/pipeline"
	"boughwork/geom"
	"boughwork/ground"
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
	study, issues := brief.Read(path, nil)
	if issues.Err() != nil {
		return Job{}, issues, nil
	}
	solver, err := pipeline.Solver(study.Solve.Solver)
	if err != nil {
		return Job{}, issues, err
	}
	s, more := structure(study)
	issues = append(issues, more...)
	return Job{Name: path, Structure: s, Options: layout.Options{Gap: study.Solve.Gap, Solver: solver, MaxRounds: study.Solve.Rounds}}, issues, nil
}

// structure reads the site of a study and builds its ground structure; nil if an issue is an error.
func structure(study *brief.Study) (*ground.Structure, geom.Issues) {
	var issues geom.Issues
	f, err := os.Open(study.Site.File)
	if err != nil {
		issues.Add(geom.Error, "brief", "site.file", "%s cannot be read: %v", study.Site.File, errors.Unwrap(err))
		return nil, issues
	}
	defer f.Close()
	opt := geom.SiteOptions{Metric: study.Site.Metres, Surface: study.Roof.Of(&issues)}
	if study.Site.EPSG != 0 {
		opt.CRS = fmt.Sprintf("EPSG:%d", study.Site.EPSG)
	}
	site, more := geom.ReadSite(f, opt)
	issues = append(issues, more...)
	if site != nil {
		issues = append(issues, study.CheckZones(site)...)
	}
	if issues.Err() != nil {
		return nil, issues
	}
	spec, more := study.Spec(site.Frame)
	if issues = append(issues, more...); issues.Err() != nil {
		return nil, issues
	}
	s, more := ground.Build(site, spec)
	return s, append(issues, more...)
}
