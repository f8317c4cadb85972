package pages

import "testing"

func TestAdviceKeepsContents(t *testing.T) {
	for _, n := range []int{0, 1, 1000, 1<<20 + 3, 1 << 22} {
		x := make([]uint32, n)
		for i := range x {
			x[i] = uint32(i) * 2654435761
		}
		Advise(x)
		for i := range x {
			if x[i] != uint32(i)*2654435761 {
				t.Fatalf("entry %d of %d is %d after the advice", i, n, x[i])
			}
		}
		if len(Floats(n)) != n || len(Complexes(n)) != n {
			t.Errorf("slices of %d entries have another length", n)
		}
	}
	for i, x := range Floats(1 << 20) {
		if x != 0 {
			t.Fatalf("entry %d of a new vector is %v", i, x)
		}
	}
}
