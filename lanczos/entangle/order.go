package entangle

import "slices"

// sortedKeys returns the keys of a map in ascending order, so that sums are made
// in a fixed order.
func sortedKeys(paths map[string]*path) []string {
	keys := make([]string, 0, len(paths))
	for key := range paths {
		keys = append(keys, key)
	}
	slices.Sort(keys)
	return keys
}

// sortCounts sorts by charges.
func sortCounts(counts []SectorCount) {
	slices.SortFunc(counts, func(a, b SectorCount) int { return slices.Compare(a.Charges, b.Charges) })
}
