package brief

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
)

// least is the shortest brief there is.
const least = `
loads:
  actions:
    - name: Roofing
      kind: permanent
      area: [{kn_m2: 0.5}]
`

func parse(t *testing.T, text string, over ...string) (*Study, geom.Issues) {
	t.Helper()
	return Parse([]byte(text), "yaml", over)
}

func mustParse(t *testing.T, text string, over ...string) *Study {
	t.Helper()
	s, issues := parse(t, text, over...)
	if s == nil {
		t.Fatalf("the brief is refused: %v", issues)
	}
	return s
}

// A default that the table promises but the reader does not take would make the README lie.
func TestDefaultsReachTheSpec(t *testing.T) {
	s := mustParse(t, least)
	spec := s.spec
	checks := map[string][2]float64{
		"deck spacing":  {spec.DeckSpacing, 4},
		"inner spacing": {spec.InnerSpacing, 4},
		"inner rise":    {spec.InnerRise, 2},
		"foot spacing":  {spec.FootSpacing, 2},
		"wall spacing":  {spec.WallSpacing, 2},
		"shortest":      {spec.MinLength, 0.3},
		"longest":       {spec.MaxLength, 20},
		"tension":       {spec.Material.Tension, 355e6},
		"compression":   {spec.Material.Compression, 355e6},
		"density":       {spec.Material.Density, 7850},
		"sideways":      {spec.SidewaysShare, 0.005},
		"roof factor":   {spec.RoofFactor, 1},
		"gap":           {s.Solve.Gap, 1e-3},
		"rounds":        {float64(s.Solve.Rounds), 200},
		"pressure":      {spec.Actions[0].Area[0].Pressure, 500},
	}
	for name, c := range checks {
		if c[0] != c[1] {
			t.Errorf("%s: got %g, want %g", name, c[0], c[1])
		}
	}
	if spec.Deck != ground.DeckDiaphragm || !spec.SelfWeight || spec.Combination != ground.CombineEN1990 || s.Solve.Solver != "interior" {
		t.Errorf("deck %v, self-weight %v, rule %v, solver %q", spec.Deck, spec.SelfWeight, spec.Combination, s.Solve.Solver)
	}
	if spec.GridBearing != nil {
		t.Errorf("grid bearing %g, want none", *spec.GridBearing)
	}
}

// The same study in the three formats must be the same study; the decoders differ in their number and list types.
func TestThreeFormats(t *testing.T) {
	texts := map[string]string{
		"yaml": "title: Same\nsite: {coordinates: metres, epsg: 25832}\ngrid: {deck_spacing_m: 3}\nfootings: [{zone: A b, vertical_kn: 12, no_uplift: true}]\n" +
			"loads:\n  actions:\n    - {name: G, kind: permanent, area: [{kn_m2: 1, where: {polygon: [[0, 0], [4, 0], [4, 3]]}}], point: [{at: [1, 2], towards_kn: 3, bearing_deg: 90}]}\n",
		"toml": "title = 'Same'\n[site]\ncoordinates = 'metres'\nepsg = 25832\n[grid]\ndeck_spacing_m = 3\n[[footings]]\nzone = 'A b'\nvertical_kn = 12\nno_uplift = true\n" +
			"[[loads.actions]]\nname = 'G'\nkind = 'permanent'\n[[loads.actions.area]]\nkn_m2 = 1\nwhere.polygon = [[0, 0], [4, 0], [4.0, 3.0]]\n[[loads.actions.point]]\nat = [1, 2.0]\ntowards_kn = 3\nbearing_deg = 90\n",
		"json": `{"title": "Same", "site": {"coordinates": "metres", "epsg": 25832}, "grid": {"deck_spacing_m": 3},
			"footings": [{"zone": "A b", "vertical_kn": 12, "no_uplift": true}],
			"loads": {"actions": [{"name": "G", "kind": "permanent", "area": [{"kn_m2": 1, "where": {"polygon": [[0,0],[4,0],[4,3],[0,0]]}}],
			"point": [{"at": [1, 2], "towards_kn": 3, "bearing_deg": 90}]}]}}`,
	}
	var first string
	for _, format := range []string{"yaml", "toml", "json"} {
		s, issues := Parse([]byte(texts[format]), format, nil)
		if s == nil {
			t.Fatalf("%s: %v", format, issues)
		}
		spec, issues := s.Spec(geom.Frame{})
		if len(issues) > 0 {
			t.Fatalf("%s: %v", format, issues)
		}
		out, err := json.Marshal([]any{s.Title, s.Site, s.Solve, spec})
		if err != nil {
			t.Fatal(err)
		}
		if first == "" {
			first = string(out)
			p := spec.Actions[0].Point[0]
			if math.Abs(p.Force.X-3000) > 1e-9 || math.Abs(p.Force.Y) > 1e-9 || p.At != [2]float64{1, 2} {
				t.Errorf("a load of 3 kN towards the east became %+v", p)
			}
			if l := spec.Limits["A b"]; !l.NoUplift || l.Vertical == nil || *l.Vertical != 12e3 {
				t.Errorf("limits of zone \"A b\": %+v", spec.Limits)
			}
		}
		if string(out) != first {
			t.Errorf("%s reads as\n%s\nbut yaml as\n%s", format, out, first)
		}
	}
}

// Every message names the field and the remedy: these are the words that a person sees.
func TestMessages(t *testing.T) {
	action := "loads: {actions: [{name: G, kind: permanent, area: [{%s}]}]}\n"
	load := func(fields string) string { return strings.Replace(action, "%s", fields, 1) }
	ok := load("kn_m2: 1")
	for _, c := range []struct{ name, text, want string }{
		{"unknown at the top", ok + "titel: x", `brief: titel: unknown key; did you mean "title"?`},
		{"unknown in a section", ok + "grid: {deck_spaceing_m: 4}", `brief: grid.deck_spaceing_m: unknown key; did you mean "deck_spacing_m"?`},
		{"unknown in a list", load("kn_m2: 1, kn_m: 2"), `brief: loads.actions[0].area[0].kn_m: unknown key; did you mean "loads.actions[].edge[].kn_m"?`},
		{"right key, wrong section", ok + "gap: 0.1", `brief: gap: unknown key; did you mean "solve.gap"?`},
		{"no unit in the name", ok + "grid: {zzz: 4}", "brief: grid.zzz: unknown key; this section has the keys bearing_deg, deck_spacing_m, foot_spacing_m, inner_rise_m, inner_spacing_m, longest_m, shortest_m, wall_spacing_m"},
		{"text for a number", ok + "grid: {deck_spacing_m: four}", `brief: grid.deck_spacing_m: found the text "four"; want a number from 0.05 to 10000 (m)`},
		{"quoted number", ok + `grid: {deck_spacing_m: "4"}`, `brief: grid.deck_spacing_m: found the text "4"; want a number from 0.05 to 10000 (m)`},
		{"negative spacing", ok + "grid: {inner_rise_m: -1}", "brief: grid.inner_rise_m: found -1; want a number from 0.05 to 10000 (m)"},
		{"NaN", ok + "joint_cost_m: .nan", "brief: joint_cost_m: found NaN; want a number from 0 to 10000 (m)"},
		{"infinite", ok + "material: {tension_mpa: .inf}", "brief: material.tension_mpa: found +Inf; want a number above 0 and up to 10000 (MPa)"},
		{"zero strength", ok + "material: {tension_mpa: 0}", "brief: material.tension_mpa: found 0; want a number above 0 and up to 10000 (MPa)"},
		{"number for a section", ok + "grid: 4", "brief: grid: found 4; want a section with the keys deck_spacing_m,"},
		{"word for a list", "loads: {actions: many}", `brief: loads.actions: found the text "many"; want a list of sections`},
		{"list of words", "loads: {actions: [many]}", `brief: loads.actions[0]: found the text "many"; want a section with the keys name, kind`},
		{"no loads", "title: x", "brief: loads.actions: no loads; give at least one action"},
		{"action without load", "loads: {actions: [{name: G, kind: snow}]}", `brief: loads.actions[0].area: the action "G" has no load`},
		{"no kind", "loads: {actions: [{name: G, area: [{kn_m2: 1}]}]}", "brief: loads.actions[0].kind: missing; give one of permanent, imposed, snow, wind: nature of the action"},
		{"wrong kind", "loads: {actions: [{name: G, kind: snwo, area: [{kn_m2: 1}]}]}", `brief: loads.actions[0].kind: found the text "snwo"; want one of permanent, imposed, snow, wind; did you mean "snow"?`},
		{"no name", "loads: {actions: [{kind: snow, area: [{kn_m2: 1}]}]}", "brief: loads.actions[0].name: missing; give text: name of the action"},
		{"suction downwards", load("kn_m2: -1"), "brief: loads.actions[0].area[0].kn_m2: found -1; a negative pressure is suction and needs acts: normal"},
		{"sideways without bearing", load("kn_m2: 1, acts: towards"), "brief: loads.actions[0].area[0].bearing_deg: missing; give a number from -360 to 360 (degrees)"},
		{"bearing without sideways", load("kn_m2: 1, bearing_deg: 3"), "brief: loads.actions[0].area[0].bearing_deg: this load has no horizontal direction"},
		{"half a place", load("kn_m2: 1, where: {half_bearing_deg: 0, through: [1]}"), "brief: loads.actions[0].area[0].where.through: found a list of 1; want two numbers in brackets"},
		{"a line without a side", load("kn_m2: 1, where: {through: [1, 2]}"), "brief: loads.actions[0].area[0].where.through: says where the roof is parted"},
		{"two corners", load("kn_m2: 1, where: {polygon: [[1, 2], [3, 4]]}"), "brief: loads.actions[0].area[0].where.polygon: found a list of 2; want three or more places"},
		{"twins", "loads: {actions: [{name: G, kind: snow, area: [{kn_m2: 1}]}, {name: G, kind: snow, area: [{kn_m2: 1}]}]}", `brief: loads.actions[1].name: "G" is given twice`},
		{"letter case", ok + "Title: a\ntitle: b", "brief: title: given twice, in different letter case; keep one of them"},
		{"dots", ok + "solve.gap: 0.1", `brief: "solve.gap": a key is a plain word; write sections as nested keys`},
		{"same key twice", ok + "title: a\ntitle: b", `brief: cannot be read as YAML: yaml: unmarshal errors: line 3: mapping key "title" already defined`},
		{"broken", "loads: [", "brief: cannot be read as YAML: yaml:"},
		{"a list", "- 1", "brief: cannot be read as YAML: yaml:"},
		{"no bar left", ok + "grid: {shortest_m: 5, longest_m: 5}", "brief: grid.shortest_m: 5 is not below longest_m 5; no bar would be left"},
		{"half a code", ok + "site: {coordinates: metres, epsg: 2.5}", "brief: site.epsg: found 2.5; want a whole number from 1 to 999999"},
		{"code for degrees", ok + "site: {epsg: 25832}", "brief: site.epsg: is a label for a site in metres"},
		{"yes is no switch", ok + "self_weight: 1", "brief: self_weight: found 1; want true or false"},
		{"cases without rule", ok + "combinations: {cases: [{name: A, factors: [{action: G, factor: 1}]}]}", "brief: combinations.cases: are only used with rule: listed"},
		{"rule without cases", ok + "combinations: {rule: listed}", "brief: combinations.cases: rule: listed needs a list of cases"},
		{"factor of nothing", ok + "combinations: {rule: listed, cases: [{name: A, factors: [{action: g, factor: 1}]}]}",
			`brief: combinations.cases[0].factors[0].action: no action is called "g"; did you mean "G"?`},
		{"plane unused", ok + "roof: {plane: {height_m: 4}}", "brief: roof.plane: is only used with surface: plane"},
		{"plane without height", ok + "roof: {surface: plane}", "brief: roof.plane.height_m: missing; give a number from -10000 to 10000 (m): height of the plane there"},
		{"ragged grid", ok + "roof: {surface: grid, heights: {origin: [0, 0], along_m: 5, rows_m: [[1, 2], [3]]}}", "brief: roof.heights.rows_m[1]: has 1 numbers; want two or more rows"},
		{"zone twice", ok + "footings: [{zone: a}, {zone: a}]", `brief: footings[1].zone: "a" is given twice; keep one`},
		{"uplift contradicted", ok + "footings: [{zone: a, no_uplift: true, uplift_kn: 4}]", "brief: footings[0].uplift_kn: contradicts no_uplift: true"},
	} {
		t.Run(c.name, func(t *testing.T) {
			s, issues := parse(t, c.text)
			err := issues.Err()
			if err == nil || s != nil {
				t.Fatalf("accepted; want %q", c.want)
			}
			if !strings.Contains(err.Error(), c.want) {
				t.Errorf("says\n%s\nwant\n%s", err, c.want)
			}
		})
	}
}

// Flags stand above the environment, the environment above the file, the file above the default.
func TestOverrides(t *testing.T) {
	file := least + "grid: {deck_spacing_m: 5, inner_rise_m: 5, foot_spacing_m: 5}\n"
	t.Setenv("BOUGHWORK_GRID_INNER_RISE_M", "6")
	t.Setenv("BOUGHWORK_GRID_FOOT_SPACING_M", "6")
	t.Setenv("BOUGHWORK_SOLVE_GAP", "1e-4")
	t.Setenv("BOUGHWORK_SELF_WEIGHT", "false")
	s := mustParse(t, file, "grid.foot_spacing_m=7", "loads.actions[0].area[0].kn_m2=2", "site.file=a=b.geojson",
		"loads.actions[0].area[0].where.polygon=[[0,0],[1,0],[1,1]]")
	got := []float64{s.spec.DeckSpacing, s.spec.InnerRise, s.spec.FootSpacing, s.spec.WallSpacing, s.Solve.Gap, s.spec.Actions[0].Area[0].Pressure}
	want := []float64{5, 6, 7, 2, 1e-4, 2000}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("value %d: got %g, want %g", i, got[i], want[i])
		}
	}
	if s.spec.SelfWeight || s.Site.File != "a=b.geojson" || len(s.spec.Actions[0].Area[0].Pattern.Polygon) != 3 {
		t.Errorf("self-weight %v, site %q, pattern %v", s.spec.SelfWeight, s.Site.File, s.spec.Actions[0].Area[0].Pattern)
	}
	if len(s.Overrides) != 8 {
		t.Errorf("overrides named: %v", s.Overrides)
	}
}

// What cannot be set must be said, not skipped.
func TestOverrideMessages(t *testing.T) {
	for _, c := range []struct{ pair, want string }{
		{"grid.deck_spacing_m", "--set: grid.deck_spacing_m: want key=value"},
		{"grid.deck_spaceing_m=4", `--set: grid.deck_spaceing_m: unknown key; did you mean "grid.deck_spacing_m"?`},
		{"deck_spacing_m=4", `--set: deck_spacing_m: unknown key; did you mean "grid.deck_spacing_m"?`},
		{"grid.deck_spacing_m=wide", `--set: grid.deck_spacing_m: "wide": want a number from 0.05 to 10000`},
		{"grid.deck_spacing_m=-4", "brief: grid.deck_spacing_m: found -4; want a number from 0.05 to 10000 (m)"},
		{"loads.actions[1].name=x", "--set: loads.actions[1].name: the brief's list has 1 elements, counted from 0; there is no 1"},
		{"loads.actions[x].name=x", `--set: loads.actions[x].name: "actions[x]": want the number of an element`},
		{"footings[0].zone=x", "--set: footings[0].zone: the brief's list has 0 elements"},
	} {
		_, issues := parse(t, least, c.pair)
		if err := issues.Err(); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: says %v, want %s", c.pair, err, c.want)
		}
	}
	t.Setenv("BOUGHWORK_SOLVE_GAPP", "3")
	_, issues := parse(t, least)
	if len(issues) != 1 || issues[0].String() != "warning: environment: BOUGHWORK_SOLVE_GAPP: names no key of a brief and is ignored; did you mean BOUGHWORK_SOLVE_GAP?" {
		t.Errorf("unknown variable: %v", issues)
	}
}

// A file path in a brief is relative to the brief, wherever the program runs.
func TestReadRelativePaths(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "study.yaml")
	if err := os.WriteFile(path, []byte(least+"site: {file: plan/a.geojson}\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	s, issues := Read(path, nil)
	if s == nil {
		t.Fatal(issues)
	}
	if want := filepath.Join(dir, "plan", "a.geojson"); s.Site.File != want {
		t.Errorf("site %q, want %q", s.Site.File, want)
	}
	for _, c := range []struct{ path, want string }{
		{filepath.Join(dir, "none.yaml"), "no such file"},
		{filepath.Join(dir, "study.ini"), "ends in .yaml, .yml, .toml or .json"},
		{dir + string(filepath.Separator) + ".yaml", "cannot be read"},
	} {
		if s, issues := Read(c.path, nil); s != nil || !strings.Contains(issues.Err().Error(), c.want) {
			t.Errorf("%s: %v, want %q", c.path, issues, c.want)
		}
	}
}

// Places of loads are in the site's coordinates; a swapped pair must not become a load a thousand kilometres away.
func TestPlacesAreProjected(t *testing.T) {
	text := "loads: {actions: [{name: G, kind: imposed, point: [{at: [-24.9990, 47.5010], down_kn: 1}]}]}\n"
	frame := geom.NewFrame(-25, 47.5)
	spec, issues := mustParse(t, text).Spec(frame)
	if len(issues) > 0 {
		t.Fatal(issues)
	}
	// One degree of longitude at 47.5 degrees is about 75.3 km, one of latitude 111.2 km (WGS 84, from memory).
	at := spec.Actions[0].Point[0].At
	if math.Abs(at[0]-75.3) > 0.2 || math.Abs(at[1]-111.2) > 0.2 {
		t.Errorf("projected to %v, want about (75.3, 111.2)", at)
	}
	_, issues = mustParse(t, strings.Replace(text, "-24.9990, 47.5010", "47.5010, -24.9990", 1)).Spec(frame)
	if len(issues) != 1 || !strings.Contains(issues[0].Text, "longitude comes first") || issues[0].Path != "loads.actions[0].point[0].at" {
		t.Errorf("a swapped pair: %v", issues)
	}
}

// Every row of the table must be fit for the reader, the help and the README.
func TestTable(t *testing.T) {
	seen, env := map[string]bool{}, map[string]string{}
	for _, k := range Table {
		if seen[k.Path] {
			t.Errorf("%s stands twice", k.Path)
		}
		seen[k.Path] = true
		if e := k.Env(); e != "" {
			if other := env[e]; other != "" {
				t.Errorf("%s and %s share the variable %s", k.Path, other, e)
			}
			env[e] = k.Path
		}
		if k.Meaning == "" || strings.Contains(k.Meaning, "|") {
			t.Errorf("%s: meaning %q", k.Path, k.Meaning)
		}
		if (k.Default == nil) == (k.Absent == "") {
			t.Errorf("%s: give either a default or what happens without the key", k.Path)
		}
		if d, ok := k.Default.(float64); ok && !k.Limits.allow(d) {
			t.Errorf("%s: the default %g is outside its own limits", k.Path, d)
		}
		for unit, ending := range map[string]string{"m": "_m", "MPa": "_mpa", "kN": "_kn", "kN/m2": "kn_m2", "kN/m": "kn_m",
			"degrees": "_deg", "%": "_percent", "kg/m3": "_kg_m3", "m3/kN": "_m3_per_kn"} {
			if k.Unit == unit && !strings.HasSuffix(k.Path, ending) {
				t.Errorf("%s: the unit %s is not in the name", k.Path, unit)
			}
		}
	}
}

func FuzzBrief(f *testing.F) {
	for _, text := range []string{least, "", "{}", "a: &a [*a]", "loads: {actions: [{}]}", "? [1]\n: 2", "1: {2: 3}", "\xef\xbb\xbftitle: x",
		"[loads]\nactions = [1979-05-27]", `{"grid": {"": {".": 1}}}`, "roof: {surface: grid, heights: {rows_m: [[1, 2], [3, .nan]]}}"} {
		for format := range uint8(3) {
			f.Add([]byte(text), format)
		}
	}
	f.Fuzz(func(t *testing.T, data []byte, format uint8) {
		name := [...]string{"yaml", "toml", "json"}[format%3]
		s, issues := Parse(data, name, nil)
		if (s == nil) != (issues.Err() != nil) {
			t.Fatalf("study %v with issues %v", s != nil, issues)
		}
		if s == nil {
			return
		}
		spec, _ := s.Spec(geom.NewFrame(-25, 47.5))
		if _, err := json.Marshal(spec); err != nil { // fails on NaN and infinity
			t.Fatalf("an accepted brief holds a number that is none: %v", err)
		}
	})
}
