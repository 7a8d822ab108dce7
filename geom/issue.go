package geom

import (
	"errors"
	"fmt"
	"strings"
)

// Severity says whether an Issue stops the work.
type Severity uint8

const (
	// Warning is worth the reader's attention; the work goes on.
	Warning Severity = iota
	// Error stops the work: the input cannot be used as it is.
	Error
)

// String returns "warning" or "error".
func (s Severity) String() string {
	if s == Error {
		return "error"
	}
	return "warning"
}

// Issue is something that is wrong with, or worth saying about, one place of the input. The same list is
// shown on the terminal, on the page and in the report.
type Issue struct {
	Feature  string   // name or number of the feature, or of the brief's section; may be empty
	Path     string   // place inside the file, for example features[2].geometry.coordinates[0][3]
	Severity Severity // Warning or Error
	Text     string   // what is wrong and what to do about it
}

// String returns the issue on one line.
func (i Issue) String() string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s: ", i.Severity)
	if i.Feature != "" {
		fmt.Fprintf(&b, "%s: ", i.Feature)
	}
	if i.Path != "" {
		fmt.Fprintf(&b, "%s: ", i.Path)
	}
	b.WriteString(i.Text)
	return b.String()
}

// Issues is a list of issues in the order in which they were found.
type Issues []Issue

// Err returns an error that joins all issues of severity Error, or nil if there is none.
func (is Issues) Err() error {
	var errs []error
	for _, i := range is {
		if i.Severity == Error {
			errs = append(errs, errors.New(strings.TrimPrefix(i.String(), "error: ")))
		}
	}
	return errors.Join(errs...)
}

// Add appends an issue made from a format string.
func (is *Issues) Add(s Severity, feature, path, format string, args ...any) {
	*is = append(*is, Issue{Feature: feature, Path: path, Severity: s, Text: fmt.Sprintf(format, args...)})
}

// HasError reports whether any issue is of severity Error.
func (is Issues) HasError() bool {
	for _, i := range is {
		if i.Severity == Error {
			return true
		}
	}
	return false
}
