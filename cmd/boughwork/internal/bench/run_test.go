package bench

import (
	"context"
	"maps"
	"math"
	"testing"
	"time"

	"boughwork/ground/layout"
	"boughwork/lp"
)

// Volumes that an earlier trial of the method found for the same problems, and for 10.6 a general linear solver (HiGHS) too,
// within the gap and what those left open.
func TestKnownVolumes(t *testing.T) {
	for _, c := range []struct {
		name   string
		volume float64 // m3
		off    float64 // share
		gap    float64
	}{
		{"cantilever-21x11", 7.0748, 1e-4, 1e-4},
		{"cantilever-41x21", 7.045434, 1e-4, 1e-4},
		{"canopy-2m-1", 10.6, 1e-4, 1e-4},
		{"canopy-2m-3", 10.6, 2e-2, 2e-2}, // loose, as three cases take long to a fine gap
	} {
		f, err := Run(t.Context(), Job{Name: c.name, Structure: build(t, c.name), Options: layout.Options{Gap: c.gap}})
		if err != nil {
			t.Fatal(err)
		}
		if f.Status != "optimal" || f.Volume == nil || math.Abs(*f.Volume/c.volume-1) > c.off || *f.Gap > c.gap {
			t.Fatalf("%s: %+v, want a volume of %g", c.name, f, c.volume)
		}
		if f.Bound > c.volume*(1+1e-6) || f.Bound < *f.Volume*(1-c.gap) {
			t.Errorf("%s: bound %g, volume %g", c.name, f.Bound, *f.Volume)
		}
		sum := 0.0
		for v := range maps.Values(f.Share) {
			sum += v
		}
		if math.Abs(sum-1) > 0.01 || f.Share[stageLayout] <= 0 {
			t.Errorf("%s: shares %v", c.name, f.Share)
		}
		if f.Nodes == 0 || f.Candidates == 0 || f.Rounds == 0 || f.Iterations == 0 || f.CasesSolved == 0 || f.Seconds <= 0 ||
			f.PeakMB <= 0 || f.Runs != 1 || f.Objective != nil {
			t.Errorf("%s: %+v", c.name, f)
		}
	}
}

// Stopped before anything was found: no volume rather than a false one.
func TestStoppedAtOnce(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	f, err := Run(ctx, Job{Name: "x", Structure: build(t, "cantilever-21x11"), Runs: 3})
	if err != nil || f.Outcome != lp.Cancelled || f.Volume != nil || f.Gap != nil || f.Runs != 0 || f.Candidates == 0 {
		t.Errorf("%+v, %v", f, err)
	}
}

// Stopped in the second of three runs: the figures are those of the first.
func TestStoppedInTheSecondRun(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	defer cancel()
	begun := 0
	f, err := Run(ctx, Job{Name: "x", Structure: build(t, "cantilever-21x11"), Runs: 3, Options: layout.Options{
		Progress: func(p layout.Progress) {
			if p.Stage == stageCandidates {
				begun++
			}
			if begun == 2 {
				cancel()
			}
		}}})
	if err != nil || f.Outcome != lp.Cancelled || f.Status != "cancelled" || f.Volume == nil || f.Runs != 1 {
		t.Errorf("%+v, %v", f, err)
	}
}

// Rounds are reported when they end and other stages when they begin; the time goes to the right one.
func TestClock(t *testing.T) {
	begun := time.Now()
	at := func(seconds int) time.Time { return begun.Add(time.Duration(seconds) * time.Second) }
	c := newClock(begun)
	for _, r := range []struct {
		stage string
		at    int
	}{
		{"candidates", 0},
		{"layout", 10}, // counting and the first round
		{"layout", 30}, // a round
		{"cases", 33},  // what leads to the cases is theirs
		{"cases", 37},
		{"tidying", 40},
		{"cases", 45},
		{"layout", 65}, // a round
	} {
		c.report(layout.Progress{Stage: r.stage}, at(r.at))
	}
	c.stop(at(100))
	want := map[string]float64{"candidates": 0.1, "layout": 0.2 + 0.2 + 0.35, "cases": 0.1, "tidying": 0.05}
	if got := c.share(); !maps.Equal(got, want) {
		t.Errorf("shares %v, want %v", got, want)
	}
}

func TestMedian(t *testing.T) {
	for want, v := range map[float64][]float64{3: {3}, 2.5: {4, 1, 3, 2}, 5: {9, 1, 5}} {
		if got := median(v); got != want {
			t.Errorf("median of %v is %g", v, got)
		}
	}
}

func TestRounded(t *testing.T) {
	for _, c := range [][2]float64{{12.34567, 12.35}, {0.000123456, 0.0001235}, {0, 0}, {-99999, -100000}, {math.Inf(1), math.Inf(1)}} {
		if got := rounded(c[0], 4); got != c[1] {
			t.Errorf("%g became %g, want %g", c[0], got, c[1])
		}
	}
}

// The peak is read from the line that has it, in whatever column; a system without that line is no error.
func TestPeak(t *testing.T) {
	if kb, ok := peakOf("Name:\tx\nVmPeak:\t  99 kB\nVmHWM:\t   31420 kB\nVmRSS:\t 1 kB\n"); !ok || kb != 31420 {
		t.Errorf("%g, %v", kb, ok)
	}
	if _, ok := peakOf("Name:\tx\n"); ok {
		t.Error("a peak out of nothing")
	}
	if peak() <= 0 {
		t.Error("a program without memory")
	}
}
