package dense

import (
	"math"
	"math/cmplx"
)

// reflector finds H = 1 - tau v v† with v[0] = 1 and H† x = (beta, 0, …), beta
// real. It replaces x by v. A vector of length one is turned to a real number.
func reflector(x []complex128) (beta float64, tau complex128) {
	alpha := x[0]
	top := max(math.Abs(real(alpha)), math.Abs(imag(alpha)))
	tail := 0.0
	for _, z := range x[1:] {
		tail = max(tail, math.Abs(real(z)), math.Abs(imag(z)))
	}
	if tail == 0 && imag(alpha) == 0 {
		x[0] = 1
		return real(alpha), 0
	}
	top = max(top, tail)
	sum := 0.0
	for _, z := range x {
		re, im := real(z)/top, imag(z)/top
		sum += re*re + im*im
	}
	beta = -math.Copysign(top*math.Sqrt(sum), real(alpha))
	tau = complex((beta-real(alpha))/beta, -imag(alpha)/beta)
	inverse := 1 / (alpha - complex(beta, 0))
	if cmplx.IsInf(inverse) || cmplx.IsNaN(inverse) {
		for i := 1; i < len(x); i++ {
			x[i] /= alpha - complex(beta, 0)
		}
	} else {
		for i := 1; i < len(x); i++ {
			x[i] *= inverse
		}
	}
	x[0] = 1
	return beta, tau
}
