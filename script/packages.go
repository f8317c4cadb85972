package script

import (
	"sort"

	"ketloom/script/symbols"
)

// Packages returns the import paths that a script may use, in ascending order:
// those of Ketloom, and those of the standard library.
func Packages() (ketloom, standard []string) {
	ketloom = append(ketloom, symbols.Ketloom...)
	standard = append(standard, symbols.Standard...)
	standard = append(standard, "cmp", "iter", "maps", "slices", "syscall")
	sort.Strings(ketloom)
	sort.Strings(standard)
	return ketloom, standard
}
