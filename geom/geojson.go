package geom

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"strings"
)

// SiteOptions says how to read a site plan. The zero value reads longitude and latitude with heights in the file.
type SiteOptions struct {
	// Metric is true if the first two numbers of a position are metres east and north, to be taken as they are.
	Metric bool
	// CRS labels the coordinates of a metric site, for example "EPSG:28992"; it is carried through. If it is empty, the
	// label is taken from a crs member of the file. For a site in longitude and latitude it is ignored.
	CRS string
	// Surface makes the surface of all roofs once the frame is known, for a roof given in the brief as a plane or a
	// grid. Then the heights of the roof's own positions are replaced by those of the surface. nil: the surface follows
	// the heights of the outline (OutlineSurface).
	Surface func(Frame) Surface
}

// maxSiteBytes bounds the size of a site plan in bytes: a plan of a million vertices. A larger file is most likely a
// whole map.
const maxSiteBytes = 64 << 20

// ReadSite reads a site plan: a GeoJSON (RFC 7946) FeatureCollection or Feature, each feature with a role in its
// properties. README and the messages name the properties of each role. What is wrong comes back as located issues, in
// the order of the file; if one of them is an Error the site is nil. Lengths come back in metres and forces in N in the
// local frame, rings oriented as Region says, with the closing position and repeated positions left out.
func ReadSite(r io.Reader, opt SiteOptions) (*Site, Issues) {
	rd := &siteReader{opt: opt}
	data, err := io.ReadAll(io.LimitReader(r, maxSiteBytes+1))
	switch {
	case err != nil:
		rd.issues.Add(Error, "", "", "the site plan cannot be read: %v", err)
	case len(data) > maxSiteBytes:
		rd.issues.Add(Error, "", "", "the site plan is larger than %d MB; keep only the features that have a role", maxSiteBytes>>20)
	default:
		rd.document(data)
	}
	if rd.issues.HasError() {
		return nil, rd.issues
	}
	return &rd.site, rd.issues
}

// siteReader holds what is known while a site is read.
type siteReader struct {
	opt      SiteOptions
	issues   Issues
	features []*feature
	site     Site
	// Paths of the roofs, footings and walls of the site, in the same order.
	roofAt, footAt, wallAt []string
}

// document reads the whole file.
func (rd *siteReader) document(data []byte) {
	root, ok := rd.decode(data)
	if !ok {
		return
	}
	obj, ok := root.(map[string]any)
	if !ok {
		rd.issues.Add(Error, "", "", "the file holds %s; a site plan is a GeoJSON object of type FeatureCollection", kindOf(root))
		return
	}
	rd.readCRS(obj["crs"])
	if name, ok := obj["name"].(string); ok {
		rd.site.Name = name
	}
	switch typ := obj["type"]; typ {
	case "FeatureCollection":
		list, ok := obj["features"].([]any)
		if !ok {
			rd.issues.Add(Error, "", "features", "features is %s; it must be a list of features", kindOf(obj["features"]))
			return
		}
		for i, f := range list {
			rd.feature(f, i+1, fmt.Sprintf("features[%d]", i))
		}
	case "Feature":
		rd.feature(obj, 1, "")
	default:
		rd.issues.Add(Error, "", "type", "type is %s; it must be FeatureCollection or Feature. Wrap a bare geometry in a Feature with a role in its properties", shown(typ))
		return
	}
	rd.assemble()
}

// decode parses the JSON text; numbers stay text, so that none is changed or overflows unseen.
func (rd *siteReader) decode(data []byte) (any, bool) {
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	if len(bytes.TrimSpace(data)) == 0 {
		rd.issues.Add(Error, "", "", "the site plan is empty; it must be a GeoJSON FeatureCollection")
		return nil, false
	}
	var whole json.RawMessage
	if err := json.Unmarshal(data, &whole); err != nil {
		rd.syntaxIssue(data, err)
		return nil, false
	}
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.UseNumber()
	var root any
	if err := dec.Decode(&root); err != nil {
		rd.syntaxIssue(data, err)
		return nil, false
	}
	return root, true
}

// syntaxIssue reports text that is not JSON, with line and column.
func (rd *siteReader) syntaxIssue(data []byte, err error) {
	var syntax *json.SyntaxError
	at := len(data)
	if errors.As(err, &syntax) && !strings.Contains(err.Error(), "unexpected end") {
		at = max(0, min(int(syntax.Offset)-1, len(data)))
	}
	before := data[:at]
	line := bytes.Count(before, []byte("\n")) + 1
	column := len([]rune(string(before[bytes.LastIndexByte(before, '\n')+1:]))) + 1
	remedy := "mend the file there, or export it again"
	rest := string(data[max(0, at-1):min(len(data), at+len("Infinity"))])
	for _, word := range []string{"NaN", "nan", "Infinity", "inf"} {
		if strings.Contains(rest, word) {
			remedy = "a number must be finite; JSON has no " + word
			break
		}
	}
	rd.issues.Add(Error, "", fmt.Sprintf("line %d, column %d", line, column), "the file is not JSON: %v; %s", err, remedy)
}

// number returns the finite value of a JSON number.
func number(v any) (float64, bool) {
	n, ok := v.(json.Number)
	if !ok {
		return 0, false
	}
	f, err := n.Float64()
	return f, err == nil && !math.IsInf(f, 0) && !math.IsNaN(f)
}

// kindOf names what a JSON value is, for messages.
func kindOf(v any) string {
	switch v := v.(type) {
	case nil:
		return "missing or null"
	case string:
		return "a text"
	case bool:
		return "true or false"
	case []any:
		if len(v) == 0 {
			return "an empty list"
		}
		return "a list"
	case map[string]any:
		return "an object"
	}
	if _, ok := number(v); !ok {
		return "a number too large"
	}
	return "a number"
}

// shown quotes a short text or number, or names the kind of anything else.
func shown(v any) string {
	const long = 40
	switch v := v.(type) {
	case string:
		if r := []rune(v); len(r) > long {
			return fmt.Sprintf("%q...", string(r[:long]))
		}
		return fmt.Sprintf("%q", v)
	case json.Number:
		if len(v) <= long {
			return v.String()
		}
	}
	return kindOf(v)
}
