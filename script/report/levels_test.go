package report

import (
	"math/rand/v2"
	"reflect"
	"slices"
	"testing"
)

func TestClustersOfAColumn(t *testing.T) { // worked by hand
	all := gather([][]float64{{3, 1, 1.5, 1.25}, {1.125}, nil})
	count, err := manifold(all, 1)
	if err != nil || count != 1 {
		t.Fatal(count, err)
	}
	want := []cluster{{1, 0, true, 1}, {1.125, 1, false, 1}, {1.375, 0, false, 2}, {3, 0, false, 1}}
	if got := clusters(all, 3, 0.25); !reflect.DeepEqual(got, want) {
		t.Errorf("clusters %v, want %v", got, want)
	}
	if got := clusters(gather([][]float64{{2, 1, 2, 2}}), 1, 0); !reflect.DeepEqual(got, []cluster{{1, 0, false, 1}, {2, 0, false, 3}}) {
		t.Errorf("without tolerance: %v", got)
	}
}

func TestLargestGap(t *testing.T) {
	for _, c := range []struct {
		levels []float64
		want   int
	}{{[]float64{0, 1}, 1}, {[]float64{0, 1, 3, 4}, 2}, {[]float64{0, 2, 4}, 1}, {[]float64{5, 5, 5}, 1}, {[]float64{0, 0, 0, 7}, 3}} {
		if got, err := manifold(gather([][]float64{c.levels}), BelowLargestGap); err != nil || got != c.want {
			t.Errorf("%v: %d levels below the gap, %v; want %d", c.levels, got, err, c.want)
		}
	}
}

func TestClustersKeepEveryLevel(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for range 200 {
		columns := make([][]float64, 1+r.IntN(5))
		total, sum := 0, 0.0
		for i := range columns {
			for range r.IntN(12) {
				v := float64(r.IntN(8))
				columns[i], sum = append(columns[i], v), sum+v
				total++
			}
		}
		before := make([][]float64, len(columns))
		for i := range columns {
			before[i] = slices.Clone(columns[i])
		}
		all := gather(columns)
		if _, err := manifold(all, r.IntN(total+1)); err != nil {
			t.Fatal(err)
		}
		for _, tolerance := range []float64{0, 1} {
			counts, got := 0, 0.0
			for _, g := range clusters(all, len(columns), tolerance) {
				counts += g.count
				got += g.value * float64(g.count)
			}
			if counts != total || got-sum > 1e-9 || sum-got > 1e-9 {
				t.Fatalf("%d levels of sum %v became %d of sum %v", total, sum, counts, got)
			}
		}
		if !reflect.DeepEqual(before, columns) {
			t.Fatal("the caller's levels were changed")
		}
	}
}
