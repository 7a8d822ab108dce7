package main

import (
	"fmt"
	"io"
	"os"
	"strings"
	"time"

	"golang.org/x/term"

	"boughwork/cmd/boughwork/internal/pipeline"
	"boughwork/geom"
)

const (
	redrawEvery = 100 * time.Millisecond // more often only flickers
	lineEvery   = time.Second            // plain lines in a pipe
	leastWidth  = 40                     // columns; a narrower terminal gets plain lines
	barWidth    = 20                     // columns of a bar
)

// newProgress returns the observer that suits where stderr goes: bars in place on a terminal, plain lines elsewhere.
func newProgress(w io.Writer) pipeline.Observer {
	if f, ok := w.(*os.File); ok && term.IsTerminal(int(f.Fd())) && os.Getenv("TERM") != "dumb" {
		if width, _, err := term.GetSize(int(f.Fd())); err == nil && width >= leastWidth {
			return &bars{w: w, fd: int(f.Fd()), bold: os.Getenv("NO_COLOR") == ""}
		}
	}
	return &lines{w: w}
}

// describe says in words how far a stage is, what matters most first: a narrow terminal shows only the beginning.
func describe(s pipeline.Step) string {
	var words []string
	if s.Bound > 0 {
		words = append(words, "gap "+percent(s.Gap))
	}
	if s.Volume > 0 {
		words = append(words, fmt.Sprintf("volume %.4g m3", s.Volume))
	}
	if s.Bound > 0 {
		words = append(words, fmt.Sprintf("bound %.4g m3", s.Bound))
	}
	if s.Round > 0 {
		words = append(words, fmt.Sprintf("round %d", s.Round))
	}
	if s.AllOf > 0 && s.Cases > 0 {
		words = append(words, fmt.Sprintf("%d of %d cases", s.Cases, s.AllOf))
	}
	if s.Bars > 0 {
		words = append(words, fmt.Sprintf("%d bars", s.Bars))
	}
	if s.Part != "" {
		words = append([]string{s.Part}, words...)
	}
	return strings.Join(words, ", ")
}

// percent writes a share as a percentage, with digits enough to tell it from nothing.
func percent(share float64) string { return fmt.Sprintf("%.3g %%", 100*share) }

// lines reports in plain lines: the end of every stage, and at most one line a second between.
type lines struct {
	w     io.Writer
	last  time.Time
	round int
}

func (l *lines) Begin(string) { l.last, l.round = time.Now(), -1 }

func (l *lines) Step(s pipeline.Step) {
	if s.Round == l.round || time.Since(l.last) < lineEvery {
		return
	}
	l.last, l.round = time.Now(), s.Round
	fmt.Fprintf(l.w, "%s: %s\n", s.Stage, describe(s))
}

func (l *lines) End(stage, result string, took time.Duration) {
	fmt.Fprintf(l.w, "%s: %s (%s)\n", stage, result, seconds(took))
}

func (l *lines) Issue(i geom.Issue) { fmt.Fprintln(l.w, i) }

// seconds writes a duration as a person reads it.
func seconds(d time.Duration) string {
	if d < 10*time.Second {
		return fmt.Sprintf("%.1f s", d.Seconds())
	}
	return fmt.Sprintf("%.0f s", d.Seconds())
}

// bars shows one bar per stage and redraws the last line in place.
type bars struct {
	w     io.Writer
	fd    int
	bold  bool
	stage string
	begun time.Time
	last  time.Time
	done  float64 // furthest so far: an estimate may fall back, a bar that does only puzzles
	open  bool    // the cursor stands on an unfinished line
}

func (b *bars) Begin(stage string) {
	b.stage, b.begun, b.last, b.done = stage, time.Now(), time.Time{}, 0
	b.draw(0, "")
}

func (b *bars) Step(s pipeline.Step) {
	b.done = max(b.done, s.Done)
	if time.Since(b.last) >= redrawEvery {
		b.last = time.Now()
		b.draw(b.done, describe(s)+", "+seconds(time.Since(b.begun)))
	}
}

func (b *bars) End(_, result string, took time.Duration) {
	// The last line of a stage may run over the width: it stays as it is.
	fmt.Fprint(b.w, "\r\x1b[K"+b.line(1, result+" ("+seconds(took)+")")+"\n")
	b.open = false
}

func (b *bars) Issue(i geom.Issue) {
	if b.open {
		fmt.Fprint(b.w, "\r\x1b[K")
	}
	text := i.String()
	if b.bold {
		if word, rest, ok := strings.Cut(text, ":"); ok {
			text = "\x1b[1m" + word + "\x1b[0m:" + rest
		}
	}
	fmt.Fprintln(b.w, text)
	b.open = false
}

// line is the line of the stage: its name, its bar, and words.
func (b *bars) line(done float64, text string) string {
	full := max(0, min(barWidth, int(done*barWidth+0.5)))
	return fmt.Sprintf("%-16s [%s%s] %s", b.stage, strings.Repeat("#", full), strings.Repeat(".", barWidth-full), text)
}

// draw writes the line of the stage over itself, cut to the width that the terminal has now.
func (b *bars) draw(done float64, text string) {
	line := b.line(done, text)
	if width, _, err := term.GetSize(b.fd); err == nil && width > 1 {
		if r := []rune(line); len(r) > width-1 {
			line = string(r[:width-1])
		}
	}
	fmt.Fprint(b.w, "\r"+line+"\x1b[K")
	b.open = true
}

// silent tells issues only.
type silent struct{ *lines }

func (silent) Begin(string)                      {}
func (silent) Step(pipeline.Step)                {}
func (silent) End(string, string, time.Duration) {}
