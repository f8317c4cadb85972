package entangle

import "math"

// rounding is the largest error, in units of the largest singular value of a
// block, that rounding is taken to make in a singular value,
//
//	(16 + √q/2)·2⁻⁵²
//
// with q the larger of the numbers of rows and columns. In matrices of low rank
// the values that should be zero come out three or more times smaller. The same
// holds for the eigenvalues of a Gram matrix, in units of the largest of them.
func (e extent) rounding() float64 {
	return (16 + math.Sqrt(float64(max(e.rows, e.columns)))/2) * 0x1p-52
}
