package dense

import (
	"math"
	"math/cmplx"
)

// PhaseTolerance decides which component of an eigenvector fixes its phase: the
// first one whose magnitude is at least 1-PhaseTolerance times the largest. Equal
// magnitudes that differ by rounding then choose the same component.
const PhaseTolerance = 1e-6

// positive fixes the sign of v.
func positive(v []float64) {
	top := 0.0
	for _, x := range v {
		top = max(top, math.Abs(x))
	}
	for _, x := range v {
		if math.Abs(x) < (1-PhaseTolerance)*top {
			continue
		}
		if x < 0 {
			for i := range v {
				v[i] = -v[i]
			}
		}
		return
	}
}

// positivePhase makes the component of v that fixes the phase real and positive.
func positivePhase(v []complex128) {
	top := 0.0
	for _, z := range v {
		top = max(top, cmplx.Abs(z))
	}
	if top == 0 {
		return
	}
	for k, z := range v {
		size := cmplx.Abs(z)
		if size < (1-PhaseTolerance)*top {
			continue
		}
		if imag(z) != 0 || real(z) < 0 {
			turn := cmplx.Conj(z) / complex(size, 0)
			for i := range v {
				v[i] *= turn
			}
			v[k] = complex(size, 0)
		}
		return
	}
}
