package pipeline

import (
	"context"
	"errors"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"boughwork/cmd/boughwork/internal/brief"
	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
)

// sites is the folder of the small studies; demo is the brief of the demo.
const (
	sites = "../../../../testdata/sites"
	demo  = "../../../../testdata/demo/brief.yaml"
)

// diary writes down what an observer is told.
type diary struct {
	begun, ended []string
	issues       geom.Issues
	onStep       func(Step)
}

func (d *diary) Begin(stage string)                   { d.begun = append(d.begun, stage) }
func (d *diary) End(stage, _ string, _ time.Duration) { d.ended = append(d.ended, stage) }
func (d *diary) Issue(i geom.Issue)                   { d.issues = append(d.issues, i) }
func (d *diary) Step(s Step) {
	if d.onStep != nil {
		d.onStep(s)
	}
}

// Every stage begins and ends once and in order: a bar on the terminal and a line on the page hang on it.
func TestStagesInOrder(t *testing.T) {
	d := &diary{}
	out, err := Grow(t.Context(), Job{Brief: sites + "/metres/brief.yaml", Out: t.TempDir(), MadeBy: "test"}, d)
	if err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(d.begun, Stages) || !slices.Equal(d.ended, Stages) {
		t.Errorf("begun %v, ended %v", d.begun, d.ended)
	}
	if out.Record.MadeBy != "test" || out.Record.BriefSHA256 != out.Study.SHA256 || len(out.Study.SHA256) != 64 {
		t.Errorf("made by %q from %q", out.Record.MadeBy, out.Record.BriefSHA256)
	}
	if got := out.Record.Frame.CRS; got != "EPSG:25832" {
		t.Errorf("the label of the site became %q", got)
	}
	if len(out.Record.Context.Roof) != 1 || len(out.Record.Context.Footings) != 2 {
		t.Errorf("context of the drawings: %+v", out.Record.Context)
	}
}

// A stage that fails ends too, and none after it begins.
func TestStopsAtWrongInput(t *testing.T) {
	d := &diary{}
	_, err := Grow(t.Context(), Job{Brief: sites + "/metres/brief.yaml", Overrides: brief.Overrides{"site.file=none.geojson"}, Out: t.TempDir()}, d)
	if !errors.Is(err, ErrInput) {
		t.Fatalf("error %v", err)
	}
	if want := []string{StageBrief, StageSite}; !slices.Equal(d.begun, want) || !slices.Equal(d.ended, want) {
		t.Errorf("begun %v, ended %v", d.begun, d.ended)
	}
	if len(d.issues) != 1 || d.issues[0].Path != "site.file" {
		t.Errorf("issues %v", d.issues)
	}
}

// Ctrl-C in the middle of the layout: the study ends with the status, a bound that holds, and all files.
func TestCancelledInTheMiddle(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	defer cancel()
	d := &diary{onStep: func(s Step) {
		if s.Stage == StageLayout && s.Round >= 2 {
			cancel()
		}
	}}
	out, err := Grow(ctx, Job{Brief: sites + "/court/brief.yaml", Out: t.TempDir()}, d)
	if err != nil {
		t.Fatal(err)
	}
	if out.Record.Status != lp.Cancelled.String() {
		t.Errorf("status %q", out.Record.Status)
	}
	if !slices.Equal(d.ended, Stages) {
		t.Errorf("ended %v", d.ended)
	}
	if !out.Verdict.OK() {
		t.Errorf("the record of a cancelled study does not hold: %+v", out.Verdict.Checks)
	}
}

// The demo must stay what the README says it is, and its brief and site must raise no warning.
func TestDemoIsWhatItSays(t *testing.T) {
	g := &growth{job: Job{Brief: demo}, obs: quiet{}, out: &Outcome{}}
	for _, stage := range []func(context.Context) (string, error){g.readBrief, g.readSite, g.build} {
		if _, err := stage(t.Context()); err != nil {
			t.Fatal(err, g.out.Issues)
		}
	}
	if len(g.out.Issues) > 0 {
		t.Errorf("issues: %v", g.out.Issues)
	}
	s, site := g.out.Structure, g.out.Site
	if len(s.Cases) < 8 || s.Deck != ground.DeckDiaphragm || len(s.Diaphragms) != 1 {
		t.Errorf("%d cases, deck %v", len(s.Cases), s.Deck)
	}
	if len(site.Footings) < 2 || len(site.KeepClear) < 2 || !site.Frame.Geographic {
		t.Errorf("%d footing zones, %d keep-clears", len(site.Footings), len(site.KeepClear))
	}
	lo, hi := 1e9, -1e9
	for _, n := range s.Nodes {
		if n.Role == ground.RoofPt {
			lo, hi = min(lo, n.At.Z), max(hi, n.At.Z)
		}
	}
	if hi-lo < 1 {
		t.Errorf("the roof lies between %g m and %g m: it is flat", lo, hi)
	}
	if !strings.Contains(site.Name, "invented") {
		t.Errorf("the site is called %q and does not say that it is invented", site.Name)
	}
}

// The folder of the results must be one that every system can make.
func TestFolder(t *testing.T) {
	for title, want := range map[string]string{
		"Vellmouth landing canopy": "vellmouth-landing-canopy",
		"../../etc/passwd":         "etc-passwd",
		"  A / B \\ C: \"D\"  ":    "a-b-c-d",
		"Überdachung 7":            "überdachung-7",
		"***":                      "untitled",
		"":                         "untitled",
		strings.Repeat("x", 500):   strings.Repeat("x", longestSlug),
	} {
		if got := Folder(title); got != filepath.Join("out", want) {
			t.Errorf("%q: %s, want out/%s", title, got, want)
		}
	}
}

// A motion is told in the words of a compass: x is east, y north.
func TestTowards(t *testing.T) {
	for _, c := range []struct {
		v    geom.Vec
		want string
	}{
		{geom.Vec{X: 1}, "the east"}, {geom.Vec{Y: 1}, "the north"}, {geom.Vec{X: -1}, "the west"}, {geom.Vec{Y: -1}, "the south"},
		{geom.Vec{X: 1, Y: 1}, "the north-east"}, {geom.Vec{X: -1, Y: 1, Z: 1}, "the north-west"}, {geom.Vec{X: -1, Y: -1}, "the south-west"},
		{geom.Vec{X: 0.1, Z: -1}, "the ground"}, {geom.Vec{Z: 1}, "the sky"},
	} {
		if got := towards(c.v); got != c.want {
			t.Errorf("%v: %s, want %s", c.v, got, c.want)
		}
	}
}
