package report

import (
	"fmt"
	"math"
	"slices"
)

// BelowLargestGap asks a figure to find the manifold itself: the levels below the
// largest distance between neighbouring levels. The lower of equal gaps wins.
const BelowLargestGap = -1

// MostMagnitude is the largest number, in magnitude, that a figure draws.
const MostMagnitude = 1e15

// level of one sector.
type placed struct {
	value    float64
	column   int
	index    int // in the levels of the column
	manifold bool
}

// checkNumber reports why v cannot be drawn.
func checkNumber(what string, v float64) error {
	if !finite(v) || math.Abs(v) > MostMagnitude {
		return fmt.Errorf("%w: %s is %v; give a finite number below %.0e in magnitude", ErrData, what, v, MostMagnitude)
	}
	return nil
}

// called names one of several things in an error: its kind, its index and, if it
// has one, its name.
func called(kind string, i int, name string) string {
	if name == "" {
		return fmt.Sprintf("%s %d", kind, i)
	}
	return fmt.Sprintf("%s %d %s", kind, i, name)
}

// gather returns the levels of all columns in ascending order, those of earlier
// columns first among equals.
func gather(columns [][]float64) []placed {
	var all []placed
	for c, levels := range columns {
		for i, v := range levels {
			all = append(all, placed{value: v, column: c, index: i})
		}
	}
	slices.SortStableFunc(all, func(a, b placed) int {
		switch {
		case a.value < b.value:
			return -1
		case a.value > b.value:
			return 1
		}
		return 0
	})
	return all
}

// manifold marks the lowest levels and returns how many they are.
func manifold(all []placed, count int) (int, error) {
	switch {
	case count == BelowLargestGap && len(all) < 2:
		return 0, fmt.Errorf("%w: %d levels hold no gap; give two levels or Manifold 0", ErrData, len(all))
	case count == BelowLargestGap:
		count = largestGap(all)
	case count < 0 || count > len(all):
		return 0, fmt.Errorf("%w: a manifold of %d among %d levels; give 0 to %d, or BelowLargestGap", ErrData, count, len(all), len(all))
	}
	for i := range count {
		all[i].manifold = true
	}
	return count, nil
}

// largestGap is the number of levels below the largest distance of neighbours.
func largestGap(all []placed) int {
	best := 1
	for i := 1; i < len(all); i++ {
		if all[i].value-all[i-1].value > all[best].value-all[best-1].value {
			best = i
		}
	}
	return best
}

// cluster is a group of levels of one column that are degenerate.
type cluster struct {
	value    float64 // mean
	column   int
	manifold bool
	count    int
}

// clusters joins neighbouring levels of a column that differ by at most tolerance
// and lie both in the manifold or both outside. The order is that of all.
func clusters(all []placed, columns int, tolerance float64) []cluster {
	var out []cluster
	last := make([]int, columns) // 1 + index in out of the newest cluster
	edge := make([]float64, columns)
	for _, p := range all {
		if at := last[p.column] - 1; at >= 0 && p.value-edge[p.column] <= tolerance && out[at].manifold == p.manifold {
			c := &out[at]
			c.value += (p.value - c.value) / float64(c.count+1)
			c.count++
		} else {
			out = append(out, cluster{p.value, p.column, p.manifold, 1})
			last[p.column] = len(out)
		}
		edge[p.column] = p.value
	}
	return out
}

func checkTolerance(v float64) error {
	if !(v >= 0) || !finite(v) {
		return fmt.Errorf("%w: a tolerance of %v; give 0 or a positive number in the unit of the levels", ErrData, v)
	}
	return nil
}
