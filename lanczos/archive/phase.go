package archive

import (
	"math/cmplx"

	"ketloom/lanczos"
)

// phaseRule says whether the amplitude that fixes the phase is real and
// positive. tops are the largest moduli of the chunks.
func phaseRule(v lanczos.Vector, tops []float64) string {
	top := 0.0
	for _, t := range tops {
		top = max(top, t)
	}
	least := (1 - phaseTolerance) * top
	for k, t := range tops {
		if t < least || top == 0 {
			continue
		}
		part := partOf(v, k)
		for i := range part.Len() {
			z := part.At(i)
			if cmplx.Abs(z) < least {
				continue
			}
			if real(z) > 0 && imag(z) == 0 {
				return phaseFixed
			}
			return phaseFree
		}
	}
	return phaseFree
}

// chunkAmplitudes is the number of amplitudes in a full chunk of the vector.
func chunkAmplitudes(v lanczos.Vector) int {
	if v.Complex != nil {
		return chunkValues / 2
	}
	return chunkValues
}

// partOf returns the amplitudes of chunk k, shared with the vector.
func partOf(v lanczos.Vector, k int) lanczos.Vector {
	n := chunkAmplitudes(v)
	return slice(v, k*n, min((k+1)*n, v.Len()))
}
