package brief

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"boughwork/geom"
	"boughwork/ground"
)

// Study is a brief that has been read: everything in SI units with every default filled in, save that places are still
// in the coordinates of the site (see Spec).
type Study struct {
	// Path is the brief's file as it was named, Dir its folder; SHA256 is the hex digest of its bytes, before any
	// environment variable or flag.
	Path, Dir, SHA256 string
	// Overrides names the environment variables and flags that took effect, in the order in which they did.
	Overrides []string

	Title string
	Site  Site
	Roof  Surface
	Solve Solve

	// spec has its places in the coordinates of the site.
	spec ground.Spec
}

// Site says where the site plan is and what its numbers are.
type Site struct {
	File   string // as it stands, already relative to the working folder
	Metres bool   // metres instead of longitude and latitude
	EPSG   int    // label for a site in metres; 0: none
}

// Solve holds the settings of the solution.
type Solve struct {
	Gap    float64
	Solver string // interior or glpk
	Rounds int
}

// Overrides are what stands above the file: pairs of the --set flag, key=value, of which a later one wins.
type Overrides []string

// Read reads the brief in the named file. The study is nil if an issue is an error.
func Read(path string, over Overrides) (*Study, geom.Issues) {
	var issues geom.Issues
	format, ok := formats[strings.ToLower(filepath.Ext(path))]
	if !ok {
		issues.Add(geom.Error, "brief", path, "the name of a brief ends in .yaml, .yml, .toml or .json")
		return nil, issues
	}
	data, err := os.ReadFile(path)
	if err != nil {
		issues.Add(geom.Error, "brief", path, "cannot be read: %v; `boughwork new DIR` writes a brief to start from", reason(err))
		return nil, issues
	}
	s, issues := Parse(data, format, over)
	if s == nil {
		return nil, issues
	}
	s.Path, s.Dir = path, filepath.Dir(path)
	if !filepath.IsAbs(s.Site.File) {
		s.Site.File = filepath.Join(s.Dir, s.Site.File)
	}
	return s, issues
}

// Parse reads a brief from its text; format is yaml, toml or json. The study is nil if an issue is an error. It never
// panics, whatever the text.
func Parse(data []byte, format string, over Overrides) (*Study, geom.Issues) {
	var issues geom.Issues
	v, ok := decode(data, format, &issues)
	if !ok {
		return nil, issues
	}
	used := fromEnvironment(v, &issues)
	tree := v.AllSettings()
	fromFlags(tree, over, &issues)
	for _, pair := range over {
		key, _, _ := strings.Cut(pair, "=")
		used = append(used, key)
	}
	s := interpret(section{vals: tree, issues: &issues})
	sum := sha256.Sum256(data)
	s.SHA256 = hex.EncodeToString(sum[:])
	s.Overrides = used
	if issues.Err() != nil {
		return nil, issues
	}
	return s, issues
}

// reason cuts the operation and the path from an error of the file system.
func reason(err error) error {
	if p, ok := err.(*os.PathError); ok {
		return p.Err
	}
	return err
}

// interpret turns the tree of a brief into a study.
func interpret(top section) *Study {
	top.checkKeys()
	s := &Study{Title: top.text("title")}
	if s.Title == "" && top.has("title") {
		top.wrong("title", "is empty; give the study a name or leave the key out")
	}
	s.Site = readSite(top.sub("site"))
	roof := top.sub("roof")
	s.Roof = readSurface(roof)
	s.spec = ground.Spec{
		Title:         s.Title,
		Deck:          ground.Deck(max(0, roof.choice("deck"))),
		RoofBars:      ground.RoofBars(max(0, roof.choice("bars_in_roof"))),
		RoofFactor:    1,
		JointCost:     top.number("joint_cost_m"),
		SelfWeight:    top.on("self_weight"),
		SidewaysShare: top.number("sideways_share"),
		Material:      readMaterial(top.sub("material")),
		Limits:        readFootings(top.list("footings")),
	}
	if factor := roof.number("bar_cost_factor"); s.spec.RoofBars == ground.RoofBarsCosted {
		s.spec.RoofFactor = factor
	}
	readGrid(top.sub("grid"), &s.spec)
	s.spec.Actions = readActions(top.sub("loads"))
	readCombinations(top.sub("combinations"), &s.spec)
	s.Solve = readSolve(top.sub("solve"))
	return s
}

func readSite(in section) Site {
	s := Site{File: in.text("file"), Metres: in.choice("coordinates") == 1, EPSG: in.whole("epsg")}
	if in.has("file") && s.File == "" {
		in.wrong("file", "is empty; give the name of the site plan")
	}
	if s.EPSG != 0 && !s.Metres {
		in.wrong("epsg", "is a label for a site in metres; take it out, or say coordinates: metres")
	}
	return s
}

func readMaterial(in section) ground.Material {
	return ground.Material{
		Name:        in.text("name"),
		Tension:     in.number("tension_mpa") * 1e6,
		Compression: in.number("compression_mpa") * 1e6,
		Density:     in.number("density_kg_m3"),
	}
}

func readGrid(in section, spec *ground.Spec) {
	spec.DeckSpacing = in.number("deck_spacing_m")
	spec.InnerSpacing = in.number("inner_spacing_m")
	spec.InnerRise = in.number("inner_rise_m")
	spec.FootSpacing = in.number("foot_spacing_m")
	spec.WallSpacing = in.number("wall_spacing_m")
	spec.GridBearing = in.optional("bearing_deg")
	spec.MinLength = in.number("shortest_m")
	spec.MaxLength = in.number("longest_m")
	if spec.MinLength >= spec.MaxLength {
		in.wrong("shortest_m", "%s is not below longest_m %s; no bar would be left", plain(spec.MinLength), plain(spec.MaxLength))
	}
}

// readFootings returns the limits by name of zone, in N.
func readFootings(list []section) map[string]geom.FootLimits {
	limits := map[string]geom.FootLimits{}
	for _, in := range list {
		zone := in.neededText("zone")
		if _, twice := limits[zone]; twice && zone != "" {
			in.wrong("zone", "%q is given twice; keep one", zone)
		}
		l := geom.FootLimits{
			NoUplift:     in.on("no_uplift"),
			VerticalOnly: in.on("vertical_only"),
			Vertical:     newtons(in.optional("vertical_kn")),
			Uplift:       newtons(in.optional("uplift_kn")),
			Sideways:     newtons(in.optional("sideways_kn")),
			Cost:         in.number("cost_m3_per_kn") / 1e3,
		}
		if l.NoUplift && l.Uplift != nil && *l.Uplift > 0 {
			in.wrong("uplift_kn", "contradicts no_uplift: true; take one of them out")
		}
		if l.VerticalOnly && l.Sideways != nil && *l.Sideways > 0 {
			in.wrong("sideways_kn", "contradicts vertical_only: true; take one of them out")
		}
		limits[zone] = l
	}
	return limits
}

func newtons(kn *float64) *float64 {
	if kn == nil {
		return nil
	}
	n := *kn * 1e3
	return &n
}

func readSolve(in section) Solve {
	s := Solve{Gap: in.number("gap"), Rounds: in.whole("rounds")}
	if i := in.choice("solver"); i >= 0 {
		s.Solver = in.key("solver").Choices[i]
	}
	return s
}

// CheckZones reports footings of the brief that name no zone of the site.
func (s *Study) CheckZones(site *geom.Site) geom.Issues {
	var issues geom.Issues
	var names, wanted []string
	for _, z := range site.Footings {
		names = append(names, z.Name)
	}
	for name := range s.spec.Limits {
		wanted = append(wanted, name)
	}
	slices.Sort(wanted)
	for _, name := range wanted {
		if slices.Contains(names, name) {
			continue
		}
		hint := "the site has " + quoted(names)
		if near, ok := nearest(name, names); ok {
			hint = fmt.Sprintf("did you mean %q?", near)
		}
		issues.Add(geom.Error, "brief", "footings", "the site has no footing zone %q; %s", name, hint)
	}
	return issues
}

// quoted lists names in quotation marks.
func quoted(names []string) string {
	q := make([]string, len(names))
	for i, n := range names {
		q[i] = fmt.Sprintf("%q", n)
	}
	return strings.Join(q, ", ")
}
