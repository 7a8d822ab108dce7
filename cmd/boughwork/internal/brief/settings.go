package brief

import (
	"fmt"
	"io"
	"strings"
)

// WriteText writes every key with unit, default and meaning for a terminal.
func WriteText(w io.Writer) error {
	var b strings.Builder
	for _, k := range Table {
		fmt.Fprintf(&b, "%s\n    %s; %s", k.Path, takes(k), defaultWords(k, "default "))
		if e := k.Env(); e != "" {
			fmt.Fprintf(&b, "; %s", e)
		}
		fmt.Fprintf(&b, "\n    %s\n", k.Meaning)
	}
	_, err := io.WriteString(w, b.String())
	return err
}

// WriteMarkdown writes the same table for the README.
func WriteMarkdown(w io.Writer) error {
	var b strings.Builder
	b.WriteString("| key | takes | default | meaning |\n| --- | --- | --- | --- |\n")
	for _, k := range Table {
		fmt.Fprintf(&b, "| `%s` | %s | %s | %s |\n", k.Path, takes(k), defaultWords(k, ""), k.Meaning)
	}
	_, err := io.WriteString(w, b.String())
	return err
}

// takes says in a few words what a key takes.
func takes(k Key) string {
	switch {
	case k.Kind == Choice:
		return strings.Join(k.Choices, ", ")
	case k.Unit != "" && k.Unit != "1":
		return k.Kind.String() + ", " + k.Unit
	}
	return k.Kind.String()
}

// defaultWords gives the default, or says what happens without the key.
func defaultWords(k Key, lead string) string {
	switch d := k.Default.(type) {
	case nil:
		return k.Absent
	case string:
		if d == "" {
			return "none"
		}
		return lead + d
	case float64:
		return lead + plain(d)
	default:
		return lead + fmt.Sprint(d)
	}
}
