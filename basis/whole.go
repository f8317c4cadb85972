package basis

import "fmt"

// Whole returns the dimensions of the parts of a sector, by [Dimension], and checks
// that they are all of it:
//
//	Σ multiplicities[i]·dim(parts[i]) = dim(whole).
//
// A part that stands for one row of a representation of dimension d, at one of n
// equivalent momenta, has the multiplicity n·d. Nothing proves that the parts differ;
// but a list that names one twice and leaves another of equal size out is the only
// kind of mistake that passes.
//
// Errors: those of Dimension, lists of different lengths, a multiplicity below one, a
// sum that does not agree.
func Whole(space *Space, whole Sector, parts []Sector, multiplicities []int) ([]int64, error) {
	if len(parts) != len(multiplicities) {
		return nil, fmt.Errorf("basis: %d parts with %d multiplicities; give one each", len(parts), len(multiplicities))
	}
	total, err := Dimension(space, whole)
	if err != nil {
		return nil, err
	}
	dims, sum := make([]int64, len(parts)), int64(0)
	for i, part := range parts {
		if multiplicities[i] < 1 {
			return nil, fmt.Errorf("basis: part %d has the multiplicity %d; 1 or more is possible", i, multiplicities[i])
		}
		if dims[i], err = Dimension(space, part); err != nil {
			return nil, fmt.Errorf("basis: part %d: %w", i, err)
		}
		sum += int64(multiplicities[i]) * dims[i]
	}
	if sum != total {
		return dims, fmt.Errorf("basis: the parts add up to %d states, the whole has %d; a sector is missing, named twice or has another multiplicity", sum, total)
	}
	return dims, nil
}
