package main

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// arrows is the table of DESIGN: which packages beside the standard library each package may import. A package that is
// not in the table may not be there. geom, whose vectors are the vocabulary of all, is allowed throughout ground. Paths inside the module are relative to it; "x/..." is x and everything below.
var arrows = []struct {
	pkg string
	may []string
}{
	{"geom", []string{orb, orb + "/planar"}},
	{"lp", nil},
	{"lp/interior", []string{"lp", "lp/sparse"}},
	{"lp/splitting", []string{"lp", "lp/sparse"}},
	{"lp/sparse", []string{"lp/sparse/internal/...", gonum + "/blas/..."}},
	{"lp/sparse/internal/...", []string{"lp/sparse/internal/...", gonum + "/blas/..."}},
	{"lp/glpk", []string{"lp"}},
	{"lp/lptest", []string{"lp", gonum + "/..."}},
	{"ground", []string{"geom"}},
	{"ground/layout", []string{"geom", "ground", "lp", "lp/interior", "lp/splitting"}},
	{"ground/scheme", []string{"geom", "ground", "ground/layout", "lp/...", gonum + "/optimize"}},
	{"ground/section", nil},
	{"ground/frame", []string{"geom", "lp/sparse"}},
	{"ground/check", []string{"geom", "ground/scheme", "ground/section", "ground/frame"}},
	{"export", []string{"geom", "ground/..."}},
	{"cmd/boughwork/...", []string{"...", "github.com/spf13/...", "golang.org/x/term"}},
}

const (
	module = "boughwork"
	orb    = "github.com/paulmach/orb"
	gonum  = "gonum.org/v1/gonum"
)

// forbidden are calls that belong to the command: a library takes writers and returns errors.
var forbidden = map[string]bool{
	"fmt.Print": true, "fmt.Printf": true, "fmt.Println": true, "os.Exit": true, "log.Fatal": true, "log.Fatalf": true, "log.Fatalln": true,
	"log.Print": true, "log.Printf": true, "log.Println": true,
}

// covers reports whether an entry of the table names the path.
func covers(entry, path string) bool {
	if entry == "..." {
		return true
	}
	if tree, ok := strings.CutSuffix(entry, "/..."); ok {
		return path == tree || strings.HasPrefix(path, tree+"/")
	}
	return entry == path
}

// rule returns what a package may import; the exact entry goes before one that ends in "...".
func rule(pkg string) (may []string, ok bool) {
	for _, exact := range []bool{true, false} {
		for _, a := range arrows {
			if exact && a.pkg == pkg || !exact && covers(a.pkg, pkg) {
				return a.may, true
			}
		}
	}
	return nil, false
}

// standard reports whether an import path is of the standard library: its first element has no dot. "C" is cgo.
func standard(path string) bool {
	first, _, _ := strings.Cut(path, "/")
	return first != module && !strings.Contains(first, ".")
}

// sources returns the Go files of the module by the package path relative to the module, whatever their build tags.
func sources(t *testing.T) map[string][]string {
	root := filepath.Join("..", "..")
	files := map[string][]string{}
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && (d.Name() == "testdata" || strings.HasPrefix(d.Name(), ".") && d.Name() != ".." || d.Name() == "out") {
			return filepath.SkipDir
		}
		if strings.HasSuffix(path, ".go") {
			rel, err := filepath.Rel(root, filepath.Dir(path))
			if err != nil {
				return err
			}
			pkg := filepath.ToSlash(rel)
			files[pkg] = append(files[pkg], path)
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return files
}

// Data flows one way, and so must the imports: an arrow that is not in the table would let a lower layer know a higher one.
// Test files may reach further (a conformance suite, an oracle), so they are not judged.
func TestImportArrows(t *testing.T) {
	files := sources(t)
	if len(files) < 5 {
		t.Fatalf("found only %d packages; the walk is broken", len(files))
	}
	for pkg, paths := range files {
		may, ok := rule(pkg)
		if !ok {
			t.Errorf("package %s is not in the table of DESIGN; add it there and here, or move it", pkg)
			continue
		}
		for _, path := range paths {
			f, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.SkipObjectResolution)
			if err != nil {
				t.Errorf("%s: %v", path, err)
				continue
			}
			if !strings.HasSuffix(path, "_test.go") {
				judgeImports(t, pkg, path, f, may)
			}
			if !strings.HasPrefix(pkg, "cmd/") && !strings.HasSuffix(path, "_test.go") {
				judgeCalls(t, path, f)
			}
		}
	}
}

func judgeImports(t *testing.T, pkg, path string, f *ast.File, may []string) {
	for _, spec := range f.Imports {
		name, err := strconv.Unquote(spec.Path.Value)
		if err != nil || standard(name) {
			if name == "flag" && !strings.HasPrefix(pkg, "cmd/") {
				t.Errorf("%s imports flag; a library reads no flags", path)
			}
			continue
		}
		name = strings.TrimPrefix(name, module+"/")
		if !slices.ContainsFunc(may, func(entry string) bool { return covers(entry, name) }) {
			t.Errorf("%s: package %s may not import %s; the table allows %v", path, pkg, name, may)
		}
	}
}

func judgeCalls(t *testing.T, path string, f *ast.File) {
	ast.Inspect(f, func(n ast.Node) bool {
		sel, ok := n.(*ast.SelectorExpr)
		if !ok {
			return true
		}
		if x, ok := sel.X.(*ast.Ident); ok && forbidden[x.Name+"."+sel.Sel.Name] {
			t.Errorf("%s calls %s.%s; a library takes writers and returns errors", path, x.Name, sel.Sel.Name)
		}
		return true
	})
}

// The table must bite: a rule that allowed everything would pass every tree.
func TestArrowsBite(t *testing.T) {
	for _, c := range []struct {
		pkg, imports string
		want         bool
	}{
		{"geom", "github.com/paulmach/orb/planar", true},
		{"geom", "github.com/paulmach/orb/geojson", false},
		{"geom", "ground", false},
		{"lp", "lp/interior", false},
		{"lp/interior", "lp/sparse", true},
		{"lp/sparse", "lp", false},
		{"lp/sparse/internal/kernel", "gonum.org/v1/gonum/blas/blas64", true},
		{"ground", "ground/layout", false},
		{"ground/layout", "export", false},
		{"ground/check", "ground/layout", false},
		{"export", "lp", false},
		{"cmd/boughwork/internal/brief", "export", true},
	} {
		may, ok := rule(c.pkg)
		got := ok && slices.ContainsFunc(may, func(entry string) bool { return covers(entry, c.imports) })
		if got != c.want {
			t.Errorf("%s -> %s: %v, want %v", c.pkg, c.imports, got, c.want)
		}
	}
	if _, ok := rule("web"); ok {
		t.Error("a package outside the table is accepted")
	}
}
