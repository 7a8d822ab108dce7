package pipeline

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"time"
	"unicode"

	"boughwork/cmd/boughwork/internal/brief"
	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
	"boughwork/lp"
)

// Job is what to grow.
type Job struct {
	Brief     string          // file of the brief
	Overrides brief.Overrides // pairs key=value above the file and the environment
	Out       string          // folder of the results; "": Folder(title)
	MadeBy    string          // program and version, for the record
}

// Outcome is what came of a job. Fields are filled as far as the stages got.
type Outcome struct {
	Study     *brief.Study
	Site      *geom.Site
	Structure *ground.Structure
	Record    *layout.Record
	Verdict   *layout.Report // of the record, by itself
	Issues    geom.Issues    // all of them, in the order in which they were found
	Dir       string
	Files     []string // names of the files in Dir
	Summary   string   // what a person reads first, in lines
	Took      time.Duration
}

// ErrInput says that an issue of severity error stopped the work; Outcome.Issues has been told to the observer.
var ErrInput = errors.New("the input cannot be used")

// Grow does all stages of a job. It returns ErrInput for wrong input, and other errors for files that cannot be written
// or a solver that cannot be had; a layout that does not exist, or a study that was stopped, is no error but a status of
// the record. obs may be nil.
func Grow(ctx context.Context, job Job, obs Observer) (*Outcome, error) {
	if obs == nil {
		obs = quiet{}
	}
	g := &growth{job: job, obs: obs, out: &Outcome{}}
	begun := time.Now()
	err := g.run(ctx)
	g.out.Took = time.Since(begun)
	return g.out, err
}

// Prepare does the stages of a job before the layout. The outcome then holds study, site, structure and issues, and the
// solver is the one that the brief asks for. Errors are those of Grow.
func Prepare(ctx context.Context, job Job) (*Outcome, lp.Solver, error) {
	g := &growth{job: job, obs: quiet{}, out: &Outcome{}}
	for _, do := range []func(context.Context) (string, error){g.readBrief, g.readSite, g.build} {
		if _, err := do(ctx); err != nil {
			return g.out, nil, err
		}
	}
	return g.out, g.solver, nil
}

// growth is a job on its way.
type growth struct {
	job    Job
	obs    Observer
	out    *Outcome
	solver lp.Solver
}

// run is the order of the stages.
func (g *growth) run(ctx context.Context) error {
	for _, s := range []struct {
		name string
		do   func(context.Context) (string, error)
	}{
		{StageBrief, g.readBrief},
		{StageSite, g.readSite},
		{StageGround, g.build},
		{StageLayout, g.layout},
		{StageVerify, g.verify},
		{StageFiles, g.write},
	} {
		g.obs.Begin(s.name)
		begun := time.Now()
		result, err := s.do(ctx)
		if err != nil {
			g.obs.End(s.name, "stopped", time.Since(begun))
			return err
		}
		g.obs.End(s.name, result, time.Since(begun))
	}
	return nil
}

// take keeps issues, tells them, and returns ErrInput if one is an error.
func (g *growth) take(issues geom.Issues) error {
	for _, i := range issues {
		g.obs.Issue(i)
	}
	g.out.Issues = append(g.out.Issues, issues...)
	if issues.Err() != nil {
		return ErrInput
	}
	return nil
}

func (g *growth) readBrief(context.Context) (string, error) {
	study, issues := brief.Read(g.job.Brief, g.job.Overrides)
	if err := g.take(issues); err != nil {
		return "", err
	}
	g.out.Study = study
	var err error
	if g.solver, err = Solver(study.Solve.Solver); err != nil {
		return "", err
	}
	g.out.Dir = g.job.Out
	if g.out.Dir == "" {
		g.out.Dir = Folder(study.Title)
	}
	return study.Title, nil
}

func (g *growth) readSite(context.Context) (string, error) {
	study := g.out.Study
	f, err := os.Open(study.Site.File)
	if err != nil {
		var issues geom.Issues
		issues.Add(geom.Error, "brief", "site.file", "%s cannot be read: %v", study.Site.File, errors.Unwrap(err))
		return "", g.take(issues)
	}
	defer f.Close()
	var own geom.Issues
	opt := geom.SiteOptions{Metric: study.Site.Metres, Surface: study.Roof.Of(&own)}
	if study.Site.EPSG != 0 {
		opt.CRS = fmt.Sprintf("EPSG:%d", study.Site.EPSG)
	}
	site, issues := geom.ReadSite(f, opt)
	issues = append(own, issues...)
	if site != nil {
		issues = append(issues, study.CheckZones(site)...)
	}
	if err := g.take(issues); err != nil {
		return "", err
	}
	g.out.Site = site
	return fmt.Sprintf("%s, %s, %s", count(len(site.Roofs), "roof"), count(len(site.Footings), "footing zone"),
		count(len(site.KeepClear), "keep-clear")), nil
}

func (g *growth) build(context.Context) (string, error) {
	spec, issues := g.out.Study.Spec(g.out.Site.Frame)
	if err := g.take(issues); err != nil {
		return "", err
	}
	s, issues := ground.Build(g.out.Site, spec)
	if err := g.take(issues); err != nil {
		return "", err
	}
	g.out.Structure = s
	var byRole [4]int
	for _, n := range s.Nodes {
		byRole[n.Role]++
	}
	return fmt.Sprintf("%d nodes (%d roof, %d inner, %d foot, %d wall), %s", len(s.Nodes), byRole[ground.RoofPt],
		byRole[ground.Inner], byRole[ground.Footing], byRole[ground.Wall], count(len(s.Cases), "case")), nil
}

func (g *growth) layout(ctx context.Context) (string, error) {
	study := g.out.Study
	res, err := layout.Solve(ctx, g.out.Structure, layout.Options{
		Gap: study.Solve.Gap, Solver: g.solver, MaxRounds: study.Solve.Rounds,
		Progress: func(p layout.Progress) {
			part, done := layoutPart(p)
			g.obs.Step(Step{Stage: StageLayout, Part: part, Done: done, Round: p.Round, Cases: p.Cases, AllOf: p.AllOf,
				Bars: p.Bars, Volume: p.Volume, Bound: p.Bound, Gap: p.Gap})
		},
	})
	if err != nil {
		return "", err
	}
	g.out.Record = layout.NewRecord(g.out.Structure, res, layout.Meta{
		MadeBy: g.job.MadeBy, BriefSHA256: study.SHA256, Context: sketchSite(g.out.Site),
	})
	c := g.out.Record.Certificate
	switch {
	case res.Status == lp.NoEquilibrium:
		return "no layout exists", nil
	case len(res.Bars) == 0 && res.Status != lp.Optimal:
		return fmt.Sprintf("%s: no layout that carries all cases yet, bound %.4g m3", res.Status, c.BoundM3), nil
	}
	return fmt.Sprintf("%s: volume %.4g m3, bound %.4g m3, gap %.2g %%, %s", res.Status, c.VolumeM3, c.BoundM3, 100*c.Gap,
		count(len(g.out.Record.Bars), "bar")), nil
}

// shareOfTidying is how much of the layout stage is left when the gap is reached, for the bar.
const shareOfTidying = 0.1

// layoutPart names what the layout stage is at, and estimates the share of the stage that is done. Checking the cases
// and tidying have a share of their own; the stage as a whole moves with the gap.
func layoutPart(p layout.Progress) (part string, done float64) {
	switch p.Stage {
	case "candidates":
		return "counting candidates", 0
	case "layout":
		return "", p.Done * (1 - shareOfTidying)
	case "cases":
		return fmt.Sprintf("checking cases, %.0f %%", 100*p.Done), 0
	case "tidying":
		return "tidying", 1 - shareOfTidying*(1-p.Done)
	}
	return p.Stage, 0
}

// count writes a number with its noun.
func count(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

// Folder returns the folder of results of a study that names none: out/ and the title in small letters, in the working
// folder.
func Folder(title string) string {
	var b strings.Builder
	for _, r := range strings.ToLower(title) {
		switch {
		case unicode.IsLetter(r) || unicode.IsDigit(r):
			b.WriteRune(r)
		case b.Len() > 0 && !strings.HasSuffix(b.String(), "-"):
			b.WriteByte('-')
		}
	}
	slug := []rune(strings.Trim(b.String(), "-"))
	if len(slug) > longestSlug {
		slug = slug[:longestSlug]
	}
	if len(slug) == 0 {
		slug = []rune("untitled")
	}
	return filepath.Join("out", string(slug))
}

// longestSlug bounds the name of a folder, in letters: file systems allow 255 bytes, and four bytes make a letter.
const longestSlug = 60
