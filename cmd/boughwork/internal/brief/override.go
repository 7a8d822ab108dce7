package brief

import (
	"encoding/json"
	"fmt"
	"os"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/viper"

	"boughwork/geom"
)

// reserved are variables with our prefix that are no keys of a brief.
var reserved = []string{envPrefix + "CI"}

// fromEnvironment puts the environment variables that name a key over the file. A variable that names no key is a
// warning, not an error: it may be meant for another version of the program.
func fromEnvironment(v *viper.Viper, issues *geom.Issues) (used []string) {
	byEnv := map[string]Key{}
	var names []string
	for _, k := range Table {
		if e := k.Env(); e != "" {
			byEnv[e] = k
			names = append(names, e)
		}
	}
	environ := os.Environ()
	slices.Sort(environ)
	for _, pair := range environ {
		name, text, _ := strings.Cut(pair, "=")
		if !strings.HasPrefix(name, envPrefix) || slices.Contains(reserved, name) || text == "" {
			continue
		}
		k, known := byEnv[name]
		if !known {
			hint := "`boughwork settings` lists the names"
			if near, ok := nearest(name, names); ok {
				hint = fmt.Sprintf("did you mean %s?", near)
			}
			issues.Add(geom.Warning, "environment", name, "names no key of a brief and is ignored; %s", hint)
			continue
		}
		value, err := parseText(k, text)
		if err != nil {
			issues.Add(geom.Error, "environment", name, "%v", err)
			continue
		}
		v.Set(k.Path, value)
		used = append(used, name)
	}
	return used
}

// parseText reads a value from an environment variable or a flag, where everything is text.
func parseText(k Key, text string) (any, error) {
	bad := fmt.Errorf("%q: want %s", text, k.wants())
	switch k.Kind {
	case Text, Choice:
		return text, nil
	case Switch:
		b, err := strconv.ParseBool(text)
		if err != nil {
			return nil, bad
		}
		return b, nil
	case Number, Whole:
		x, err := strconv.ParseFloat(text, 64)
		if err != nil {
			return nil, bad
		}
		return x, nil
	}
	var x any
	if err := json.Unmarshal([]byte(text), &x); err != nil {
		return nil, bad
	}
	return x, nil
}

// fromFlags puts key=value pairs over what is there. A key inside a list is named with its number, counted from 0.
func fromFlags(tree map[string]any, pairs []string, issues *geom.Issues) {
	for _, pair := range pairs {
		path, text, ok := strings.Cut(pair, "=")
		path = strings.ToLower(strings.TrimSpace(path))
		if !ok || path == "" {
			issues.Add(geom.Error, "--set", pair, "want key=value, for example grid.deck_spacing_m=3")
			continue
		}
		pattern, steps, err := splitPath(path)
		if err != nil {
			issues.Add(geom.Error, "--set", path, "%v", err)
			continue
		}
		k, ok := find(pattern)
		if !ok {
			issues.Add(geom.Error, "--set", path, "unknown key; %s", remedyForPath(pattern))
			continue
		}
		value, err := parseText(k, text)
		if err != nil {
			issues.Add(geom.Error, "--set", path, "%v", err)
			continue
		}
		if err := put(tree, steps, value); err != nil {
			issues.Add(geom.Error, "--set", path, "%v", err)
		}
	}
}

// splitPath turns loads.actions[1].kind into the pattern loads.actions[].kind and the steps loads, actions, 1, kind.
func splitPath(path string) (pattern string, steps []any, err error) {
	for i, part := range strings.Split(path, ".") {
		name, index, indexed := strings.Cut(part, "[")
		if i > 0 {
			pattern += "."
		}
		pattern += name
		steps = append(steps, name)
		if !indexed {
			continue
		}
		n, err := strconv.Atoi(strings.TrimSuffix(index, "]"))
		if err != nil || n < 0 || !strings.HasSuffix(index, "]") {
			return "", nil, fmt.Errorf("%q: want the number of an element, counted from 0, as in actions[0]", part)
		}
		pattern += "[]"
		steps = append(steps, n)
	}
	return pattern, steps, nil
}

// put sets the value at the steps. Sections are made where they are missing; elements of a list are not.
func put(tree map[string]any, steps []any, value any) error {
	var here any = tree
	for i, step := range steps {
		last := i == len(steps)-1
		switch s := step.(type) {
		case string:
			m, ok := here.(map[string]any)
			if !ok {
				return fmt.Errorf("the brief has no section there to set %q in", s)
			}
			if last {
				m[s] = value
				return nil
			}
			if _, isIndex := steps[i+1].(int); m[s] == nil && !isIndex {
				m[s] = map[string]any{}
			}
			here = m[s]
		case int:
			list, ok := here.([]any)
			if !ok || s >= len(list) {
				return fmt.Errorf("the brief's list has %d elements, counted from 0; there is no %d", len(list), s)
			}
			here = list[s]
		}
	}
	return nil
}

// find returns the key with the given pattern path.
func find(pattern string) (Key, bool) {
	for _, k := range Table {
		if k.Path == pattern {
			return k, true
		}
	}
	return Key{}, false
}

// remedyForPath suggests the whole key nearest to an unknown one.
func remedyForPath(pattern string) string {
	var all []string
	for _, k := range Table {
		all = append(all, k.Path)
		if k.Path[strings.LastIndexByte(k.Path, '.')+1:] == pattern {
			return fmt.Sprintf("did you mean %q?", k.Path)
		}
	}
	if near, ok := nearest(pattern, all); ok {
		return fmt.Sprintf("did you mean %q?", near)
	}
	return "`boughwork settings` lists all keys"
}
