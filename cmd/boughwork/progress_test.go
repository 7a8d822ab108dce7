package main

import (
	"bytes"
	"strings"
	"testing"
	"time"

	"boughwork/cmd/boughwork/internal/pipeline"
	"boughwork/geom"
)

// noTerminal is a file descriptor that is none, so that no line is cut.
const noTerminal = -1

// In a pipe a line is at most one a second and one a round; a file full of half-told rounds is no use.
func TestPlainLines(t *testing.T) {
	var b bytes.Buffer
	l := &lines{w: &b}
	l.Begin("layout")
	for range 100 {
		l.Step(pipeline.Step{Stage: "layout", Round: 1, Bars: 5})
	}
	if b.Len() > 0 {
		t.Errorf("within a second of the beginning: %q", b.String())
	}
	for range 100 {
		l.last = time.Time{} // long ago
		l.Step(pipeline.Step{Stage: "layout", Round: 2, Cases: 1, AllOf: 8, Bars: 5, Volume: 0.5, Bound: 0.4, Gap: 0.2})
	}
	l.Issue(geom.Issue{Feature: "roof", Severity: geom.Warning, Text: "low"})
	l.End("layout", "done", 1500*time.Millisecond)
	want := "layout: gap 20 %, volume 0.5 m3, bound 0.4 m3, round 2, 1 of 8 cases, 5 bars\nwarning: roof: low\nlayout: done (1.5 s)\n"
	if b.String() != want {
		t.Errorf("got\n%swant\n%s", b.String(), want)
	}
}

// On a terminal each stage has one line that is drawn over itself; an issue must not be drawn over.
func TestBars(t *testing.T) {
	for _, bold := range []bool{true, false} {
		var w bytes.Buffer
		b := &bars{w: &w, fd: noTerminal, bold: bold}
		b.Begin("layout")
		b.Step(pipeline.Step{Stage: "layout", Done: 0.5})
		b.last = time.Time{}
		b.Step(pipeline.Step{Stage: "layout", Done: 0.25, Part: "checking cases"}) // an estimate that falls back
		b.Issue(geom.Issue{Feature: "roof", Severity: geom.Warning, Text: "low"})
		b.End("layout", "done", time.Second)
		screen := played(w.String())
		lines := strings.Split(screen, "\n")
		if len(lines) != 3 || lines[0] != "warning: roof: low" || lines[1] != "layout           [####################] done (1.0 s)" || lines[2] != "" {
			t.Errorf("the screen shows\n%s", screen)
		}
		if !strings.Contains(w.String(), "[##########..........] checking cases") {
			t.Errorf("the bar fell back: %q", w.String())
		}
		if strings.Contains(w.String(), "\x1b[1m") != bold {
			t.Errorf("bold %v: %q", bold, w.String())
		}
	}
}

// played returns what a terminal would show: a carriage return goes to the beginning of the line, ESC [ K clears the rest.
func played(s string) string {
	for _, style := range []string{"\x1b[1m", "\x1b[0m"} {
		s = strings.ReplaceAll(s, style, "")
	}
	var done []string
	var line []rune
	at := 0
	rs := []rune(s)
	for i := 0; i < len(rs); i++ {
		switch {
		case rs[i] == '\r':
			at = 0
		case rs[i] == '\n':
			done, line, at = append(done, string(line)), nil, 0
		case rs[i] == '\x1b' && i+2 < len(rs) && rs[i+1] == '[' && rs[i+2] == 'K':
			line, i = line[:at], i+2
		case at < len(line):
			line[at], at = rs[i], at+1
		default:
			line, at = append(line, rs[i]), at+1
		}
	}
	return strings.Join(append(done, string(line)), "\n")
}
