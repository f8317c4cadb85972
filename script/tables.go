package script

import (
	"fmt"
	"maps"
	"reflect"
	"slices"

	"ketloom/script/symbols"
)

// tables are the symbols that a script of o reaches.
//
// Errors: a host's package with the path of one that is there already.
func (o Options) tables() (map[string]map[string]reflect.Value, error) {
	if len(o.Packages) == 0 {
		return symbols.Table, nil
	}
	all := maps.Clone(symbols.Table)
	generic := []string{"cmp", "iter", "maps", "slices"}
	for path, table := range o.Packages {
		if _, taken := all[path]; taken || slices.Contains(generic, path) || path == "unsafe" || path == "C" {
			return nil, fmt.Errorf("script: Options.Packages has %s, which every script has or none may have; leave it out", path)
		}
		all[path] = table
	}
	return all, nil
}
