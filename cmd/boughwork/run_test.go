package main

import (
	"bytes"
	"context"
	"encoding/json"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"boughwork/lp/glpk"
)

// root is the way from this package to the top of the module.
const root = "../.."

// runIn runs the program and returns its exit status and both streams.
func runIn(t *testing.T, ctx context.Context, args ...string) (code int, stdout, stderr string) {
	t.Helper()
	var out, err bytes.Buffer
	code = run(ctx, &out, &err, args)
	return code, out.String(), err.String()
}

// number matches what differs between machines or with the solver's last digits.
var number = regexp.MustCompile(`-?\d+(\.\d+)?(e[-+]?\d+)?`)

// masked hides numbers, so that a test sees the words.
func masked(s string) string { return number.ReplaceAllString(s, "#") }

// resultFiles are the files that the README promises.
var resultFiles = []string{"bars.csv", "cases.csv", "joints.csv", "layout.json", "overlay.geojson", "reactions.csv", "sheet.svg", "summary.txt"}

// The main job on a small site: what a person sees on both streams, and the files.
func TestGrow(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "results")
	code, out, err := runIn(t, t.Context(), "grow", root+"/testdata/sites/metres/brief.yaml", "-o", dir)
	if code != exitOK {
		t.Fatalf("exit status %d\n%s%s", code, out, err)
	}
	for _, want := range []string{
		"brief: Shelter (# s)\n",
		"site: # roof, # footing zones, # keep-clears (# s)\n",
		"ground structure: # nodes (# roof, # inner, # foot, # wall), # cases (# s)\n",
		"layout: optimal: volume # m#, bound # m#, gap # %, # bars (# s)\n",
		"verify: # checks passed (# s)\n",
		"files: # files in ",
	} {
		if !strings.Contains(masked(err), want) {
			t.Errorf("the standard error has no line %q:\n%s", want, err)
		}
	}
	for _, want := range []string{
		"Shelter\n  status            optimal: the gap that the brief asks for is reached\n  volume            # m#\n",
		"  bound             # m#: no layout on this ground structure has a smaller objective\n  gap               # %\n",
		"  mass              # kg of steel S#\n  bars              #, # m in all, chosen from # candidates\n  joints            #, of which # feet\n",
		"  cases             #, of which # govern; # more that cannot govern are left out (omitted_cases in layout.json)\n  largest reaction  # kN at ",
		"  verified          # checks of the record by itself passed\n",
		"cautions\n",
		"\ndone in # s\n",
	} {
		if !strings.Contains(masked(out), want) {
			t.Errorf("the summary has no %q:\n%s", want, out)
		}
	}
	checkFiles(t, dir)
	summary, e := os.ReadFile(filepath.Join(dir, "summary.txt"))
	if e != nil || !strings.HasPrefix(out, string(summary)) {
		t.Errorf("summary.txt differs from the terminal (%v)", e)
	}
	if code, out, err := runIn(t, t.Context(), "verify", filepath.Join(dir, "layout.json")); code != exitOK || !strings.HasSuffix(out, "the record holds what it says\n") {
		t.Errorf("verify: exit status %d\n%s%s", code, out, err)
	}
}

// checkFiles sees that the folder holds the promised files, whole and nothing else.
func checkFiles(t *testing.T, dir string) {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range entries {
		names = append(names, e.Name())
		data, err := os.ReadFile(filepath.Join(dir, e.Name()))
		if err != nil || len(data) == 0 {
			t.Errorf("%s: %d bytes, %v", e.Name(), len(data), err)
		}
		if ext := filepath.Ext(e.Name()); (ext == ".json" || ext == ".geojson") && !json.Valid(data) {
			t.Errorf("%s is not JSON", e.Name())
		}
	}
	if !slices.Equal(names, resultFiles) {
		t.Errorf("the folder holds %v, want %v", names, resultFiles)
	}
}

// The same brief must give the same bytes, or nobody could compare two studies.
func TestGrowTwiceIsTheSame(t *testing.T) {
	var dirs [2]string
	for i := range dirs {
		dirs[i] = t.TempDir()
		if code, out, err := runIn(t, t.Context(), "grow", "-q", root+"/testdata/sites/metres/brief.yaml", "-o", dirs[i]); code != exitOK {
			t.Fatalf("exit status %d\n%s%s", code, out, err)
		}
	}
	for _, name := range resultFiles {
		a, err := os.ReadFile(filepath.Join(dirs[0], name))
		b, err2 := os.ReadFile(filepath.Join(dirs[1], name))
		if err != nil || err2 != nil {
			t.Fatal(err, err2)
		}
		// The summary names the folder, which is another one each time.
		if !bytes.Equal(bytes.ReplaceAll(a, []byte(dirs[0]), nil), bytes.ReplaceAll(b, []byte(dirs[1]), nil)) {
			t.Errorf("%s differs between two runs", name)
		}
	}
}

// No layout exists: exit status 2, with the loads, what moves and where, and a remedy; all files with the evidence.
func TestGrowImpossible(t *testing.T) {
	dir := t.TempDir()
	code, out, err := runIn(t, t.Context(), "grow", root+"/testdata/sites/impossible/brief.yaml", "-o", dir)
	if code != exitNoLayout {
		t.Fatalf("exit status %d\n%s%s", code, out, err)
	}
	for _, want := range []string{
		"  status            no equilibrium: no layout exists, the loads cannot be carried\n",
		"  loads             those of case \"# G + # Wind from the west\"\n",
		"  what moves        node # at (#, #, #) m, towards the east\n",
		"  why               ",
	} {
		if !strings.Contains(masked(out), want) {
			t.Errorf("the summary has no %q:\n%s", want, out)
		}
	}
	checkFiles(t, dir)
	data, e := os.ReadFile(filepath.Join(dir, "layout.json"))
	if e != nil || !bytes.Contains(data, []byte(`"collapse":`)) {
		t.Errorf("the record has no evidence (%v)", e)
	}
	if code, out, _ := runIn(t, t.Context(), "verify", filepath.Join(dir, "layout.json")); code != exitOK {
		t.Errorf("the evidence is not accepted: exit status %d\n%s", code, out)
	}
}

// A study that is stopped keeps what it has, says so, and ends with status 3.
func TestGrowCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	dir := t.TempDir()
	code, out, err := runIn(t, ctx, "grow", root+"/testdata/sites/metres/brief.yaml", "-o", dir)
	if code != exitStopped || !strings.Contains(out, "  status            cancelled: stopped early, with the best layout so far\n") {
		t.Fatalf("exit status %d\n%s%s", code, out, err)
	}
	checkFiles(t, dir)
}

// What `new` writes must run as it is: it is the first thing that a person does.
func TestNewRuns(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "my study")
	code, out, err := runIn(t, t.Context(), "new", dir)
	brief := filepath.Join(dir, "brief.yaml")
	if want := "wrote " + brief + "\nwrote " + filepath.Join(dir, "site.geojson") + "\nnext: boughwork grow " + brief + "\n"; code != exitOK || out != want || err != "" {
		t.Fatalf("exit status %d\n%s%s", code, out, err)
	}
	code, out, err = runIn(t, t.Context(), "grow", brief, "-o", filepath.Join(dir, "out"))
	if code != exitOK || strings.Contains(err, "warning") {
		t.Errorf("exit status %d\n%s%s", code, out, err)
	}
	if code, out, err := runIn(t, t.Context(), "new", dir); code != exitInput || out != "" ||
		err != "error: "+brief+" is there already and is not overwritten; name another folder, or move it away\n" {
		t.Errorf("a second time: exit status %d\n%s%s", code, out, err)
	}
}

// Flags and the environment reach the study, and the summary says that they did.
func TestGrowOverrides(t *testing.T) {
	t.Setenv("BOUGHWORK_TITLE", "Renamed")
	dir := t.TempDir()
	code, out, err := runIn(t, t.Context(), "grow", "-q", "--gap", "0.01", "--set", "material.name=spruce", "-o", dir, root+"/testdata/sites/metres/brief.yaml")
	if code != exitOK || err != "" {
		t.Fatalf("exit status %d\n%s%s", code, out, err)
	}
	for _, want := range []string{"Renamed\n", " kg of spruce\n", "  above the brief   BOUGHWORK_TITLE, material.name, solve.gap\n"} {
		if !strings.Contains(out, want) {
			t.Errorf("the summary has no %q:\n%s", want, out)
		}
	}
}

// Wrong input ends with status 1, nothing on the standard output, and a message that names the place and the remedy.
func TestWrongInput(t *testing.T) {
	dir := t.TempDir()
	write := func(name, text string) string {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	metres := root + "/testdata/sites/metres/brief.yaml"
	loads := "loads: {actions: [{name: G, kind: permanent, area: [{kn_m2: 1}]}]}\n"
	for _, c := range []struct {
		name string
		args []string
		want string // of the standard error
	}{
		{"no such command", []string{"gorw"}, "error: there is no command \"gorw\"; did you mean \"grow\"?\n"},
		{"no such flag", []string{"grow", "--gapp", "1"}, "error: unknown flag: --gapp\n"},
		{"no brief", []string{"grow"}, "error: boughwork grow: found 0 arguments; want the file of a brief, as in `boughwork grow brief.yaml`\n"},
		{"missing brief", []string{"grow", "-q", "no.yaml"},
			"error: brief: no.yaml: cannot be read: no such file or directory; `boughwork new DIR` writes a brief to start from\n"},
		{"unknown key", []string{"grow", "-q", write("a.yaml", loads+"grid: {deck_spacing: 4}\n")},
			"error: brief: grid.deck_spacing: unknown key; did you mean \"deck_spacing_m\"?\n"},
		{"unknown key in a flag", []string{"grow", "-q", metres, "--set", "solve.gapp=1"},
			"error: --set: solve.gapp: unknown key; did you mean \"solve.gap\"?\n"},
		{"gap out of range", []string{"grow", "-q", metres, "--gap", "2"},
			"error: brief: solve.gap: found 2; want a number from 1e-08 to 0.5\n"},
		{"missing site", []string{"grow", "-q", write("b.yaml", loads)},
			"error: brief: site.file: " + filepath.Join(dir, "site.geojson") + " cannot be read: no such file or directory\n"},
		{"unknown zone", []string{"grow", "-q", write("c.yaml", loads+"site: {file: "+abs(t, metres)+", coordinates: metres}\n"+
			"roof: {surface: plane, plane: {height_m: 3}}\nfootings: [{zone: West pda}]\n")},
			"error: brief: footings: the site has no footing zone \"West pda\"; did you mean \"West pad\"?\n"},
		{"missing record", []string{"verify", "no.json"}, "error: cannot read the record: open no.json: no such file or directory\n"},
		{"no record", []string{"verify", write("d.json", "{}")},
			"error: " + filepath.Join(dir, "d.json") + ": layout: record: format \"\" version 0, want \"boughwork-layout\" version 1; `boughwork grow` writes records\n"},
	} {
		t.Run(c.name, func(t *testing.T) {
			code, out, err := runIn(t, t.Context(), c.args...)
			if code != exitInput || out != "" || err != c.want {
				t.Errorf("exit status %d, standard output %q, standard error\n%swant\n%s", code, out, err, c.want)
			}
		})
	}
}

// abs returns the absolute name of the site plan beside a brief.
func abs(t *testing.T, brief string) string {
	path, err := filepath.Abs(filepath.Join(filepath.Dir(brief), "site.geojson"))
	if err != nil {
		t.Fatal(err)
	}
	return path
}

// The second solver is there in a build with its tag; without it the flag says what to install.
func TestSecondSolver(t *testing.T) {
	code, out, err := runIn(t, t.Context(), "grow", "-q", root+"/testdata/sites/metres/brief.yaml", "--solver", "glpk", "--set", "sideways_share=0", "-o", t.TempDir())
	if glpk.Available {
		if code != exitOK {
			t.Errorf("exit status %d\n%s%s", code, out, err)
		}
		return
	}
	if code != exitInput || !strings.Contains(err, "apt-get install libglpk-dev") || !strings.Contains(err, "-tags glpk") {
		t.Errorf("exit status %d\n%s%s", code, out, err)
	}
}

// Help and version are results: they go to the standard output.
func TestHelp(t *testing.T) {
	for _, args := range [][]string{{}, {"help"}, {"--help"}, {"grow", "--help"}, {"help", "verify"}} {
		code, out, err := runIn(t, t.Context(), args...)
		if code != exitOK || err != "" || !strings.Contains(out, "usage: boughwork") {
			t.Errorf("%v: exit status %d\n%s%s", args, code, out, err)
		}
	}
	code, out, _ := runIn(t, t.Context(), "--version")
	if code != exitOK || !strings.HasPrefix(out, "boughwork "+version+" (") {
		t.Errorf("version: exit status %d, %q", code, out)
	}
	code, out, _ = runIn(t, t.Context(), "settings")
	if code != exitOK || !strings.Contains(out, "grid.deck_spacing_m\n    number, m; default 4; BOUGHWORK_GRID_DECK_SPACING_M\n") {
		t.Errorf("settings: exit status %d\n%s", code, out)
	}
}
