package dense

import (
	"gonum.org/v1/gonum/blas"
	blasgonum "gonum.org/v1/gonum/blas/gonum"
)

// backTransform returns Q z for the product Q of all reflections and a real n×n
// matrix z. Row i of the result holds n real parts and then n imaginary parts.
func backTransform(panels []panel, z []float64, n int) []float64 {
	both := make([]float64, 2*n*n)
	for i := range n {
		copy(both[i*2*n:], z[i*n:(i+1)*n])
	}
	for k := len(panels) - 1; k >= 0; k-- {
		panels[k].multiply(both, n)
	}
	return both
}

// multiply replaces z by (1 - V T V†) z, which is the product of the reflections
// of the panel with z.
func (p panel) multiply(z []float64, n int) {
	impl := blasgonum.Implementation{}
	width := p.width
	size := n - p.first - 1
	rows := z[(p.first+1)*2*n:]
	overlaps := make([]float64, 2*width*2*n) // real parts of V times z, then imaginary parts
	impl.Dgemm(blas.Trans, blas.NoTrans, 2*width, 2*n, size, 1, p.rows, 2*width, rows, 2*n, 0, overlaps, 2*n)
	changes := make([]float64, 2*width*2*n)
	t := p.triangle()
	share(n, 64, func(from, to int) {
		for j := range width {
			re, im := changes[j*2*n:(j+1)*2*n], changes[(width+j)*2*n:(width+j+1)*2*n]
			for l := j; l < width; l++ {
				a, b := real(t[j*width+l]), imag(t[j*width+l])
				vr, vi := overlaps[l*2*n:(l+1)*2*n], overlaps[(width+l)*2*n:(width+l+1)*2*n]
				for c := from; c < to; c++ {
					x, y := vr[c]+vi[n+c], vr[n+c]-vi[c] // element l of V†z
					re[c] += a*x - b*y
					re[n+c] += a*y + b*x
				}
			}
			for c := from; c < to; c++ {
				im[c], im[n+c] = -re[n+c], re[c]
			}
		}
	})
	impl.Dgemm(blas.NoTrans, blas.NoTrans, size, 2*n, 2*width, -1, p.rows, 2*width, changes, 2*n, 1, rows, 2*n)
}

// triangle returns the upper triangular T with H_0 H_1 … = 1 - V T V†.
func (p panel) triangle() []complex128 {
	width := p.width
	size := len(p.rows) / (2 * width)
	gram := make([]complex128, width*width) // V†V above the diagonal
	for i := range size {
		row := p.rows[i*2*width : (i+1)*2*width]
		for l := range width {
			for j := l + 1; j < width; j++ {
				gram[l*width+j] += complex(row[l], -row[width+l]) * complex(row[j], row[width+j])
			}
		}
	}
	t := make([]complex128, width*width)
	for j := range width {
		t[j*width+j] = p.tau[j]
		for l := range j {
			var sum complex128
			for k := l; k < j; k++ {
				sum += t[l*width+k] * gram[k*width+j]
			}
			t[l*width+j] = -p.tau[j] * sum
		}
	}
	return t
}
