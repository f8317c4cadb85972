package label

import "fmt"

// Multiplets groups ascending energies: neighbours not more than tolerance apart
// are one multiplet. It returns the first and last index (inclusive) of each.
//
// Errors: energies that do not ascend or are no numbers, a tolerance below zero.
func Multiplets(energies []float64, tolerance float64) ([][2]int, error) {
	if !(tolerance >= 0) {
		return nil, fmt.Errorf("label: a tolerance of %v; give 0 or more", tolerance)
	}
	var list [][2]int
	for i, e := range energies {
		switch {
		case e != e || i > 0 && e < energies[i-1]:
			return nil, fmt.Errorf("label: energy %d is %v after %v; give numbers in ascending order", i, e, energies[max(i-1, 0)])
		case i > 0 && e-energies[i-1] <= tolerance:
			list[len(list)-1][1] = i
		default:
			list = append(list, [2]int{i, i})
		}
	}
	return list, nil
}
