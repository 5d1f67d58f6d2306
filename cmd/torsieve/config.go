package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"slices"
	"strconv"
	"strings"

	"github.com/alecthomas/kong"
	"github.com/pelletier/go-toml/v2"
)

// settings is the TOML file of --config: the names of options, without their
// dashes, and values. Every option of every command may stand in it, and no
// other name.
type settings struct {
	file   string
	values map[string]any
}

var _ kong.Resolver = (*settings)(nil)

// loadSettings reads a settings file for kong.
func loadSettings(r io.Reader) (kong.Resolver, error) {
	s := &settings{file: "settings file"}
	if f, ok := r.(*os.File); ok {
		s.file = f.Name()
	}
	err := toml.NewDecoder(r).Decode(&s.values)
	if err != nil {
		var where *toml.DecodeError
		if errors.As(err, &where) {
			line, column := where.Position()
			return nil, fmt.Errorf("%s:%d:%d: %w", s.file, line, column, err)
		}
		return nil, fmt.Errorf("%s: %w", s.file, err)
	}
	return s, nil
}

// Validate refuses names that no option has.
func (s *settings) Validate(app *kong.Application) error {
	known := optionNames(app.Node)
	names := make([]string, 0, len(s.values))
	for name := range s.values {
		names = append(names, name)
	}
	slices.Sort(names)
	for _, name := range names {
		if slices.Contains(known, name) && name != "config" && name != "help" {
			continue
		}
		hint := ""
		if near := nearest(name, known); near != "" {
			hint = fmt.Sprintf(", did you mean %q?", near)
		}
		return fmt.Errorf("%s: no option is named %q%s", s.file, name, hint)
	}
	return nil
}

// Resolve gives kong the file's value for a flag, as text, or nil.
func (s *settings) Resolve(_ *kong.Context, _ *kong.Path, flag *kong.Flag) (any, error) {
	value, ok := s.values[flag.Name]
	if !ok {
		return nil, nil
	}
	list, isList := value.([]any)
	if !isList {
		list = []any{value}
	} else if !flag.IsSlice() {
		return nil, fmt.Errorf("%s: %s: one value is wanted, have a list", s.file, flag.Name)
	}
	texts := make([]string, len(list))
	for i, v := range list {
		text, err := asText(v)
		if err != nil {
			return nil, fmt.Errorf("%s: %s: %w", s.file, flag.Name, err)
		}
		texts[i] = text
	}
	return strings.Join(texts, ","), nil
}

func asText(v any) (string, error) {
	switch v := v.(type) {
	case string:
		return v, nil
	case bool:
		return strconv.FormatBool(v), nil
	case int64:
		return strconv.FormatInt(v, 10), nil
	case float64:
		return strconv.FormatFloat(v, 'g', -1, 64), nil
	}
	return "", fmt.Errorf("want a text, a number, true, false or a list of them, have %T", v)
}

func optionNames(n *kong.Node) []string {
	var names []string
	for _, f := range n.Flags {
		names = append(names, f.Name)
	}
	for _, child := range n.Children {
		names = append(names, optionNames(child)...)
	}
	return names
}
