package brief

import (
	"bytes"
	"fmt"
	"maps"
	"slices"
	"strings"

	"github.com/spf13/viper"

	"boughwork/geom"
)

// formats are the endings of a brief's file name, and viper's name for what is inside.
var formats = map[string]string{".yaml": "yaml", ".yml": "yaml", ".toml": "toml", ".json": "json"}

// decoder stands between viper and the file: it refuses what viper would take in silence (keys that differ only in
// case, of which one would win by chance; keys with dots, which viper reads as sections).
type decoder struct {
	viper.DecoderRegistry
	issues *geom.Issues
}

// Decoder implements viper.DecoderRegistry.
func (d decoder) Decoder(format string) (viper.Decoder, error) {
	inner, err := d.DecoderRegistry.Decoder(format)
	if err != nil {
		return nil, err
	}
	return strict{inner, d.issues}, nil
}

type strict struct {
	inner  viper.Decoder
	issues *geom.Issues
}

// Decode implements viper.Decoder.
func (s strict) Decode(b []byte, into map[string]any) error {
	raw := map[string]any{}
	if err := s.inner.Decode(b, raw); err != nil {
		return err
	}
	maps.Copy(into, clean(raw, "", s.issues))
	return nil
}

// clean returns m with lower-case text keys at every level, and reports keys that cannot be told apart.
func clean(m map[string]any, path string, issues *geom.Issues) map[string]any {
	out := make(map[string]any, len(m))
	for _, key := range slices.Sorted(maps.Keys(m)) {
		low := strings.ToLower(key)
		at := join(path, low)
		switch _, twice := out[low]; {
		case twice:
			issues.Add(geom.Error, "brief", at, "given twice, in different letter case; keep one of them")
			continue
		case key == "" || strings.ContainsAny(key, ".[]"):
			issues.Add(geom.Error, "brief", join(path, fmt.Sprintf("%q", key)),
				"a key is a plain word; write sections as nested keys, not with dots")
			continue
		}
		out[low] = cleanValue(m[key], at, issues)
	}
	return out
}

func cleanValue(v any, path string, issues *geom.Issues) any {
	switch v := v.(type) {
	case map[string]any:
		return clean(v, path, issues)
	case map[any]any: // YAML with keys that are not all text
		text := make(map[string]any, len(v))
		for k, e := range v {
			text[fmt.Sprint(k)] = e
		}
		return clean(text, path, issues)
	case []any:
		out := make([]any, len(v))
		for i, e := range v {
			out[i] = cleanValue(e, fmt.Sprintf("%s[%d]", path, i), issues)
		}
		return out
	case []map[string]any: // TOML's [[array of tables]] in some decoders
		out := make([]any, len(v))
		for i, e := range v {
			out[i] = clean(e, fmt.Sprintf("%s[%d]", path, i), issues)
		}
		return out
	}
	return v
}

// decode reads a brief's text with viper. The result holds the file alone.
func decode(data []byte, format string, issues *geom.Issues) (*viper.Viper, bool) {
	v := viper.NewWithOptions(viper.WithDecoderRegistry(decoder{viper.NewCodecRegistry(), issues}))
	v.SetConfigType(format)
	// A byte order mark is what some editors put first; no decoder wants it.
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	if err := v.ReadConfig(bytes.NewReader(data)); err != nil {
		text := strings.TrimPrefix(err.Error(), "While parsing config: ")
		issues.Add(geom.Error, "brief", "", "cannot be read as %s: %s", strings.ToUpper(format), oneLine(text))
		return nil, false
	}
	return v, true
}

// join appends a name to a path.
func join(path, name string) string {
	if path == "" {
		return name
	}
	return path + "." + name
}

// oneLine folds white space, so that a decoder's message of several lines stays one issue.
func oneLine(s string) string { return strings.Join(strings.Fields(s), " ") }
