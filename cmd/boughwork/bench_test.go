package main

import (
	"bytes"
	"context"
	"encoding/json"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"boughwork/cmd/boughwork/internal/bench"
)

// figureKeys are the keys that the README promises.
var figureKeys = []string{"bound", "candidates", "cases", "cases_solved", "gap", "iterations", "name", "nodes", "peak_mb", "rounds", "runs",
	"seconds", "share", "status", "volume"}

// A named problem and a brief: one object a line, in the order asked for, and no files.
func TestBench(t *testing.T) {
	brief := filepath.Join(root, "testdata/sites/metres/brief.yaml")
	code, out, err := runIn(t, t.Context(), "bench", "-q", "--gap", "0.01", "--runs", "2", brief, "cantilever-21x11")
	if code != exitOK || err != "" {
		t.Fatalf("exit status %d\n%s%s", code, out, err)
	}
	rows := strings.Split(strings.TrimSpace(out), "\n")
	if len(rows) != 2 {
		t.Fatalf("%d lines:\n%s", len(rows), out)
	}
	for i, name := range []string{brief, "cantilever-21x11"} {
		var f map[string]any
		if e := json.Unmarshal([]byte(rows[i]), &f); e != nil {
			t.Fatal(e)
		}
		if f["name"] != name || f["status"] != "optimal" || f["runs"] != 2.0 || f["gap"].(float64) > 0.01 {
			t.Errorf("%s", rows[i])
		}
		delete(f, "objective") // only where joints or bars in the roof cost
		if got := slices.Sorted(maps.Keys(f)); !slices.Equal(got, figureKeys) {
			t.Errorf("keys %v, want %v", got, figureKeys)
		}
	}
	if _, e := os.Stat("out"); e == nil {
		t.Error("bench wrote files")
	}
}

// The list has every problem, and nothing is solved.
func TestBenchList(t *testing.T) {
	code, out, err := runIn(t, t.Context(), "bench", "--list")
	if code != exitOK || err != "" || strings.Count(out, "\n") != 1+len(bench.Problems) {
		t.Fatalf("exit status %d\n%s%s", code, out, err)
	}
	for _, want := range []string{"name                nodes  cases  gap\n", "canopy-2m-12        605    12     0.0001\n"} {
		if !strings.Contains(out, want) {
			t.Errorf("no line %q in\n%s", want, out)
		}
	}
}

// Stopped: the line of the problem at hand says so, no other follows, and the exit status is 3.
func TestBenchCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	code, out, err := runIn(t, ctx, "bench", "-q", "cantilever-21x11", "canopy-2m-1")
	if code != exitStopped || strings.Count(out, "\n") != 1 || !strings.Contains(out, `"volume":null,"bound":0,"gap":null`) || err != "" {
		t.Errorf("exit status %d\n%s%s", code, out, err)
	}
}

// A study without a layout has no volume, and the exit status of grow.
func TestBenchImpossible(t *testing.T) {
	code, out, _ := runIn(t, t.Context(), "bench", "-q", filepath.Join(root, "testdata/sites/impossible/brief.yaml"))
	if code != exitNoLayout || !strings.Contains(out, `"volume":null`) || !strings.Contains(out, `"status":"no equilibrium"`) {
		t.Errorf("exit status %d\n%s", code, out)
	}
}

// Wrong input is told before anything is solved.
func TestBenchWrongInput(t *testing.T) {
	for _, c := range []struct {
		args []string
		want string // begins the standard error
	}{
		{[]string{"canopy-2m-1", "canopy-2m-2"}, "error: there is no problem \"canopy-2m-2\"; name a brief (.yaml, .yml, .toml, .json) or one of cantilever-21x11, "},
		{[]string{"canopy-2m-1", "--gap", "2"}, "error: --gap: found \"2\"; want a number from 1e-08 to 0.5\n"},
		{[]string{"canopy-2m-1", "--gap", "NaN"}, "error: --gap: found \"NaN\"; want "},
		{[]string{"canopy-2m-1", "--runs", "0"}, "error: --runs: found 0; want a number from 1 to 1000\n"},
		{[]string{"-q", "canopy-2m-1", "none.yaml"}, "error: brief: none.yaml: cannot be read"},
	} {
		code, out, err := runIn(t, t.Context(), append([]string{"bench"}, c.args...)...)
		if code != exitInput || out != "" || !strings.HasPrefix(err, c.want) {
			t.Errorf("%v: exit status %d, standard output %q, standard error\n%s", c.args, code, out, err)
		}
	}
}

// The README's table of commands has every command.
func TestReadmeCommands(t *testing.T) {
	data, err := os.ReadFile(filepath.Join(root, "README.md"))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range command().Commands() {
		if !bytes.Contains(data, []byte("\n| `boughwork "+c.Name())) {
			t.Errorf("the README's table of commands has no %q", c.Name())
		}
	}
}
