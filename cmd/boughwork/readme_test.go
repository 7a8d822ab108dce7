package main

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"boughwork/cmd/boughwork/internal/brief"
)

var update = flag.Bool("update", false, "write the generated parts of the README")

const (
	settingsBegin = "<!-- settings:begin -->\n"
	settingsEnd   = "<!-- settings:end -->"
)

// The README's table of settings is made from the table that the reader uses; run `go test ./cmd/boughwork -update` after
// changing a key.
func TestReadmeSettings(t *testing.T) {
	path := filepath.Join("..", "..", "README.md")
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	before, rest, ok := strings.Cut(string(data), settingsBegin)
	old, after, ok2 := strings.Cut(rest, settingsEnd)
	if !ok || !ok2 {
		t.Fatalf("README.md has no %s ... %s", strings.TrimSpace(settingsBegin), settingsEnd)
	}
	var table bytes.Buffer
	if err := brief.WriteMarkdown(&table); err != nil {
		t.Fatal(err)
	}
	if old == table.String() {
		return
	}
	if !*update {
		t.Fatal("the table of settings in README.md is out of date; run: go test ./cmd/boughwork -run TestReadmeSettings -update")
	}
	if err := os.WriteFile(path, []byte(before+settingsBegin+table.String()+settingsEnd+after), 0o644); err != nil {
		t.Fatal(err)
	}
}
