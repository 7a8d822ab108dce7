package main

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"boughwork/ground/layout"
)

// A record that was changed in one number must not pass: verify is what a stranger relies on.
func TestVerifyTampered(t *testing.T) {
	dir := t.TempDir()
	if code, out, err := runIn(t, t.Context(), "grow", "-q", root+"/testdata/sites/metres/brief.yaml", "-o", dir); code != exitOK {
		t.Fatalf("exit status %d\n%s%s", code, out, err)
	}
	whole, err := os.ReadFile(filepath.Join(dir, "layout.json"))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name   string
		change func(*layout.Record)
		want   string // begins the name of a check that fails
	}{
		{"a thinner bar", func(r *layout.Record) { r.Bars[largest(r)].AreaM2 *= 0.99 }, "strength"},
		{"a thicker bar", func(r *layout.Record) { r.Bars[largest(r)].AreaM2 *= 1.01 }, "volume"},
		{"another force", func(r *layout.Record) { r.Bars[largest(r)].ForceKN[0] *= 1.01 }, "equilibrium"},
		{"another load", func(r *layout.Record) { r.Cases[0].Loads[0][3] *= 1.01 }, "equilibrium"},
		{"a moved node", func(r *layout.Record) { r.Nodes[r.Bars[largest(r)].Nodes[0]].XYZ[2] += 0.01 }, "equilibrium"},
		{"larger displacements", func(r *layout.Record) { scaleDisplacement(r, 1.01) }, "displacements"},
		{"smaller displacements", func(r *layout.Record) { scaleDisplacement(r, 0.9) }, "bound"},
		{"a larger bound", func(r *layout.Record) { r.Certificate.BoundM3 *= 1.01 }, "bound"},
		{"a smaller volume", func(r *layout.Record) { r.Certificate.VolumeM3 *= 0.99 }, "volume"},
		{"a smaller gap", func(r *layout.Record) { r.Certificate.Gap = -0.01 }, "gap"},
		{"stronger steel", func(r *layout.Record) { r.Material.TensionMPa *= 2; r.Material.CompressionMPa *= 2 }, "displacements"},
		{"a keep-clear across", func(r *layout.Record) {
			at := r.Nodes[r.Bars[largest(r)].Nodes[0]].XYZ
			x, y := at[0], at[1]
			r.Candidates.KeepClear = append(r.Candidates.KeepClear, layout.RecordPrism{Name: "new", FromM: -1, ToM: 50,
				Ring: [][2]float64{{x - 1, y - 1}, {x + 1, y - 1}, {x + 1, y + 1}, {x - 1, y + 1}, {x - 1, y - 1}}})
		}, "bars that are no candidates"},
	} {
		t.Run(c.name, func(t *testing.T) {
			rec, err := layout.Read(bytes.NewReader(whole))
			if err != nil {
				t.Fatal(err)
			}
			c.change(rec)
			path := filepath.Join(t.TempDir(), "layout.json")
			var b bytes.Buffer
			if err := layout.Write(&b, rec); err != nil {
				t.Fatal(err)
			}
			if err := os.WriteFile(path, b.Bytes(), 0o600); err != nil {
				t.Fatal(err)
			}
			code, out, stderr := runIn(t, t.Context(), "verify", path)
			if code != exitUnverified || !strings.Contains(out, "  FAILED  "+c.want) || !strings.HasSuffix(out, "the record does not hold what it says\n") {
				t.Errorf("exit status %d, want %d with a failed check %q\n%s%s", code, exitUnverified, c.want, out, stderr)
			}
		})
	}
}

// largest returns the bar with the largest force in the first case: a change of it is no rounding.
func largest(r *layout.Record) int {
	best, at := 0.0, 0
	for i, b := range r.Bars {
		for _, q := range b.ForceKN {
			if q*q > best {
				best, at = q*q, i
			}
		}
	}
	return at
}

func scaleDisplacement(r *layout.Record, by float64) {
	for _, u := range r.Certificate.Displacement {
		for i := range u {
			for x := range u[i] {
				u[i][x] *= by
			}
		}
	}
}
