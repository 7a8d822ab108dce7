package export

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"math"
	"math/rand"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// sheets are records of all sizes and shapes, plain and awkward.
func sheets() map[string]*layout.Record {
	long := strings.Repeat("A roof with a very long name over a place with another one ", 6)
	out := map[string]*layout.Record{
		"tripod": tripod(), "tripod in metres": metric(tripod()), "canopy": canopy(0), "canopy turned": canopy(23), "canopy upright": canopy(90),
		"long": longRoof(-37), "collapse": collapsed(), "fan": fan(12), "nothing": newRecord(""),
	}
	rec := canopy(12)
	rec.Bars, rec.Status = nil, "iteration limit"
	out["no layout found"] = rec

	rec = canopy(170)
	rec.Title, rec.Material.Name, rec.MadeBy = long, "steel <S355> & \"more\"", strings.Repeat("W", 300)
	for k := range 80 {
		c := rec.Cases[k%10]
		c.Name = fmt.Sprintf("case %d %s", k, long)
		rec.Cases = append(rec.Cases, c)
		for i := range rec.Bars {
			rec.Bars[i].ForceKN = append(rec.Bars[i].ForceKN, rec.Bars[i].ForceKN[k%10])
		}
	}
	rec.Cautions = append(rec.Cautions, long)
	out["wordy"] = rec

	rec = tripod() // a mast: a plan that is a point
	rec.Nodes = []layout.RecordNode{{XYZ: [3]float64{5, 5, 100}, Fixed: [3]bool{true, true, true}, Role: "footing"}, {XYZ: [3]float64{5, 5, 130}, Role: "inner"}}
	rec.Bars = []layout.RecordBar{{Nodes: [2]int{0, 1}, AreaM2: 0.01, ForceKN: []float64{-50, 10}, Kept: true}}
	for k := range rec.Cases {
		rec.Cases[k].Loads = nil
	}
	rec.Context = layout.RecordContext{}
	out["mast"] = rec

	rec = canopy(5) // feet upon feet
	for i := range 60 {
		rec.Nodes = append(rec.Nodes, layout.RecordNode{XYZ: [3]float64{10 + 0.1*float64(i%8), 10 + 0.1*float64(i/8), 0}, Fixed: [3]bool{true, true, true}, Role: "footing"})
		rec.Bars = append(rec.Bars, layout.RecordBar{Nodes: [2]int{len(rec.Nodes) - 1, i}, AreaM2: 1e-4, ForceKN: rec.Bars[i].ForceKN})
	}
	out["many feet"] = rec
	return out
}

// The sheet is well-formed XML with real text, has no number that is none, and is the same every time.
func TestSheetIsWellFormed(t *testing.T) {
	for name, rec := range sheets() {
		var a, b bytes.Buffer
		if err := errors.Join(Sheet(&a, rec), Sheet(&b, rec)); err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if !bytes.Equal(a.Bytes(), b.Bytes()) {
			t.Errorf("%s: two sheets of one record differ", name)
		}
		texts := 0
		for d := xml.NewDecoder(&a); ; {
			token, err := d.Token()
			if err == io.EOF {
				break
			}
			if err != nil {
				t.Errorf("%s: %v", name, err)
				break
			}
			if e, ok := token.(xml.StartElement); ok {
				if e.Name.Local == "text" {
					texts++
				}
				for _, at := range e.Attr {
					if strings.Contains(at.Value, "NaN") || strings.Contains(at.Value, "Inf") {
						t.Errorf("%s: <%s %s=%q>", name, e.Name.Local, at.Name.Local, at.Value)
					}
				}
			}
		}
		if texts < 10 {
			t.Errorf("%s: only %d texts", name, texts)
		}
	}
}

// No two texts overlap, and all stand inside the frame.
func TestSheetTextsDoNotOverlap(t *testing.T) {
	for name, rec := range sheets() {
		checkTexts(t, name, draw(rec))
	}
}

func TestSheetOfRandomRecords(t *testing.T) {
	rng := rand.New(rand.NewSource(11))
	for i := range 40 {
		rec := randomRecord(rng)
		size := math.Pow(10, 3*rng.Float64()-1)
		for j := range rec.Nodes {
			for x := range 3 {
				rec.Nodes[j].XYZ[x] *= size
			}
		}
		rec.Context.Roof = []layout.RecordRegion{{Name: "Roof", Closed: true, Rings: [][][3]float64{{rec.Nodes[0].XYZ, rec.Nodes[1].XYZ, rec.Nodes[2].XYZ}}}}
		d := draw(rec)
		if d.c.err != nil {
			t.Errorf("random %d: %v", i, d.c.err)
		}
		checkTexts(t, fmt.Sprintf("random %d", i), d)
	}
}

func checkTexts(t *testing.T, name string, d *drawing) {
	t.Helper()
	frame := box{d.paper.margin, d.paper.margin, d.paper.w - d.paper.margin, d.paper.h - d.paper.margin}
	for i, a := range d.c.texts {
		if !frame.contains(a.box) {
			t.Errorf("%s: %q at %.1f leaves the frame", name, a.text, a.box)
		}
		for _, b := range d.c.texts[:i] {
			if a.box.meets(b.box) {
				t.Errorf("%s: %q at %.1f and %q at %.1f overlap", name, a.text, a.box, b.text, b.box)
			}
		}
	}
	for _, v := range []view{d.plan, d.long, d.end, d.axo} {
		if !frame.contains(v.window) {
			t.Errorf("%s: a view at %.1f leaves the frame", name, v.window)
		}
	}
}

// Whoever measures on the sheet and multiplies by the scale finds the size of the roof, in the plan and both elevations,
// also of a site that is turned.
func TestSheetIsToScale(t *testing.T) {
	for _, turn := range []float64{0, 23, 90, -45} {
		d := draw(canopy(turn))
		for _, c := range []struct {
			name     string
			view     view
			from, to geom.Vec
			want     float64
		}{
			{"length in plan", d.plan, geom.Vec{X: -20, Y: -10}, geom.Vec{X: 20, Y: -10}, 40},
			{"width in plan", d.plan, geom.Vec{X: -20, Y: -10}, geom.Vec{X: -20, Y: 10}, 20},
			{"length in elevation", d.long, geom.Vec{X: -20}, geom.Vec{X: 20, Y: 3}, 40},
			{"width in elevation", d.end, geom.Vec{X: 4, Y: -10}, geom.Vec{Y: 10}, 20},
			{"height in elevation", d.end, geom.Vec{}, geom.Vec{Z: 6}, 6},
		} {
			a, b := c.view.at(c.from), c.view.at(c.to)
			if got := math.Hypot(b.x-a.x, b.y-a.y) * d.place.scale / 1000; math.Abs(got-c.want) > 1e-9 {
				t.Errorf("turned %g: %s is %g m, want %g", turn, c.name, got, c.want)
			}
		}
		// The core is the roof, whatever way the site is turned.
		if math.Abs(d.m.core.w()-40) > 1e-6 || math.Abs(d.m.core.h()-20) > 1e-6 {
			t.Errorf("turned %g: the core is %g x %g m", turn, d.m.core.w(), d.m.core.h())
		}
		// In plan the arrow of north agrees with the places: a step to the north goes along it.
		north := d.m.axes.along(vecNorth)
		p := at(d.m.rec, 0)
		q := p.Add(vecNorth)
		u, v := d.plan.at(d.m.axes.to(p)), d.plan.at(d.m.axes.to(q))
		if dx, dy := (v.x-u.x)/d.plan.perM-north.X, (v.y-u.y)/d.plan.perM+north.Y; math.Hypot(dx, dy) > 1e-9 || north.Y < -1e-9 {
			t.Errorf("turned %g: north is off by %g, %g; %v", turn, dx, dy, north)
		}
	}
}

// The paper and the scale follow the size of the site.
func TestSheetSizes(t *testing.T) {
	for _, c := range []struct {
		rec   *layout.Record
		paper string
		least float64 // the scale is at least that large: 1 to
	}{{tripod(), "A3", 50}, {canopy(23), "A1", 125}, {longRoof(-37), "A1", 500}} {
		d := draw(c.rec)
		if d.paper.name != c.paper || d.place.scale > c.least {
			t.Errorf("%s: %s at 1:%g, want %s at 1:%g or larger", c.rec.Title, d.paper.name, d.place.scale, c.paper, c.least)
		}
	}
}

// Every bar is drawn in each of the four views in the colour of its state, and no state goes by colour alone.
func TestSheetDrawsEveryBar(t *testing.T) {
	rec := tripod()
	rec.Bars[0].ForceKN = []float64{5, 2}
	rec.Bars[1].ForceKN = []float64{5, -2}
	var b bytes.Buffer
	if err := Sheet(&b, rec); err != nil {
		t.Fatal(err)
	}
	const views, legend = 4, 1
	for _, c := range []struct {
		colour string
		bars   int
	}{{tensionColour, 1}, {bothColour, 1}, {compressionColour, 2}} {
		if got, want := strings.Count(b.String(), `stroke="`+c.colour+`"`), c.bars*views+legend; got != want {
			t.Errorf("%s: %d lines, want %d", c.colour, got, want)
		}
	}
	// Light cores: one on every line in tension, broken on every line of both kinds.
	if n := strings.Count(b.String(), `stroke-linecap="butt" stroke-dasharray`); n != views+legend {
		t.Errorf("%d broken cores, want %d", n, views+legend)
	}
}

// Thousands of bars that weigh next to nothing do not hide the others: some are hairlines, many are left out, and the
// legend says so.
func TestSheetFaintBars(t *testing.T) {
	for _, c := range []struct {
		bars  int
		drawn bool
		words string
	}{{100, true, "the 100 thinnest bars, 0.1"}, {700, false, "not drawn: the 700 thinnest bars, 0.1"}} {
		rec := tripod()
		volume := Summarise(rec).VolumeM3
		for range c.bars {
			b := layout.RecordBar{Nodes: [2]int{0, 4}, ForceKN: []float64{-1e-4, -1e-4}}
			b.AreaM2 = 0.001 * volume / lengthOf(rec, b) / float64(c.bars)
			rec.Bars = append(rec.Bars, b)
		}
		var b bytes.Buffer
		if err := Sheet(&b, rec); err != nil {
			t.Fatal(err)
		}
		if got := strings.Count(b.String(), `stroke-opacity="0.35"`); c.drawn && got != 4*c.bars+1 || !c.drawn && got != 0 {
			t.Errorf("%d thin bars: %d hairlines", c.bars, got)
		}
		if !strings.Contains(b.String(), c.words) {
			t.Errorf("%d thin bars: the legend does not say %q", c.bars, c.words)
		}
	}
	if m := newModel(tripod()); m.faint != 0 {
		t.Errorf("%d bars of a tripod are faint", m.faint)
	}
}

func TestSheetSaysWhatMatters(t *testing.T) {
	rec := tripod()
	rec.Title = `Fish & <Chips> "stand"`
	var b bytes.Buffer
	if err := Sheet(&b, rec); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"Fish &amp; &lt;Chips&gt; &quot;stand&quot;", "boughwork 0.0.0 (test)", "optimal", "Certified lower bound", "Gap between both", "20.25 kg",
		"steel S355", "355, 213 MPa", "Local codes and a licensed engineer decide.", "1.35 Roofing", ">F1", ">N<", "1:50", "3.00", "+2.60"} {
		if !strings.Contains(b.String(), want) {
			t.Errorf("the sheet does not say %q", want)
		}
	}
	b.Reset()
	c := collapsed()
	if err := Sheet(&b, c); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"No layout exists", "no equilibrium", "41.2 kJ", "motion that nothing resists"} {
		if !strings.Contains(b.String(), want) {
			t.Errorf("the sheet of a collapse does not say %q", want)
		}
	}
}

// A renderer draws the sheet.
func TestSheetRenders(t *testing.T) {
	tool, err := exec.LookPath("rsvg-convert")
	if err != nil {
		if os.Getenv("BOUGHWORK_CI") != "" {
			t.Fatal("rsvg-convert is missing; install librsvg2-bin")
		}
		t.Skip("rsvg-convert is missing (install librsvg2-bin): the sheet is not rendered here")
	}
	dir := t.TempDir()
	svg, png := filepath.Join(dir, "sheet.svg"), filepath.Join(dir, "sheet.png")
	if err := WriteFile(svg, func(w io.Writer) error { return Sheet(w, canopy(23)) }); err != nil {
		t.Fatal(err)
	}
	if out, err := exec.Command(tool, "-w", "1200", svg, "-o", png).CombinedOutput(); err != nil {
		t.Fatalf("rsvg-convert: %v\n%s", err, out)
	}
	if info, err := os.Stat(png); err != nil || info.Size() < 20000 {
		t.Errorf("the picture is empty: %v, %v", info, err)
	}
}
