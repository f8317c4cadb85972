package basis

import (
	"slices"
	"strings"
	"testing"

	"ketloom/basis/group"
)

func TestPartsAddUpToTheWhole(t *testing.T) {
	s, _ := Uniform(6, SpinHalf())
	whole := Sector{Charges: []ChargeValue{s.TwiceSz().Is(0)}}
	// Ring of six: momenta 0 and π once, ±1 and ±2 stand for two each. The numbers of
	// necklaces with three black and three white beads by momentum: 4, 3, 3, 4.
	var parts []Sector
	for k := range 4 {
		parts = append(parts, Sector{Charges: whole.Charges, Symmetries: []group.Eigenvalue{{Generator: ringShift(6), Turn: group.NewTurn(int64(k), 6)}}})
	}
	dims, err := Whole(s, whole, parts, []int{1, 2, 2, 1})
	if err != nil || !slices.Equal(dims, []int64{4, 3, 3, 4}) {
		t.Errorf("%v, %v", dims, err)
	}
	for name, try := range map[string]func() error{
		"add up to":      func() error { _, err := Whole(s, whole, parts, []int{1, 1, 2, 1}); return err },
		"one each":       func() error { _, err := Whole(s, whole, parts, []int{1}); return err },
		"multiplicity 0": func() error { _, err := Whole(s, whole, parts, []int{1, 2, 2, 0}); return err },
		"no closed count": func() error {
			_, err := Whole(s, Sector{Constraints: []Constraint{AtMost(1, []int{0})}}, nil, nil)
			return err
		},
		"no space; make o": func() error { _, err := Whole(nil, whole, nil, nil); return err },
	} {
		if err := try(); err == nil || !strings.Contains(err.Error(), name) {
			t.Errorf("%v, want an error that says %q", err, name)
		}
	}
}
