package lanczos

import (
	"errors"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/lapack"
	"gonum.org/v1/gonum/lapack/gonum"
)

// projected is the operator in the Krylov space: diagonal alpha; the first kept
// vectors are Ritz vectors of an earlier space and couple to vector kept by arrow;
// from there on neighbours couple by beta. beta[size-1] couples the last vector
// to the next one, which is the norm of the residual. All are real, also for a
// complex operator.
type projected struct {
	size, kept int
	alpha      []float64
	beta       []float64
	arrow      []float64

	values  []float64 // Ritz values, ascending, of the last solve
	vectors []float64 // column c belongs to values[c]; size×size
	work    []float64
}

func newProjected(most int) *projected {
	p := &projected{
		alpha: make([]float64, most), beta: make([]float64, most), arrow: make([]float64, most),
		values: make([]float64, most), vectors: make([]float64, most*most),
	}
	var size [1]float64
	gonum.Implementation{}.Dsyev(lapack.EVCompute, blas.Lower, most, p.vectors, most, p.values, size[:], -1)
	p.work = make([]float64, max(int(size[0]), 3*most))
	return p
}

func (p *projected) reset() { p.size, p.kept = 0, 0 }

// coupling is beta of the last vector.
func (p *projected) coupling() float64 { return p.beta[p.size-1] }

var errRitz = errors.New("lanczos: the iteration for the Ritz values did not end")

// solve computes the Ritz values and vectors.
func (p *projected) solve() error {
	n := p.size
	a := p.vectors[:n*n]
	clear(a)
	for i := range n {
		a[i*n+i] = p.alpha[i]
	}
	if p.kept < n { // else nothing has been added since the space was condensed
		for i := range p.kept {
			a[p.kept*n+i] = p.arrow[i]
		}
	}
	for i := p.kept; i+1 < n; i++ {
		a[(i+1)*n+i] = p.beta[i]
	}
	if !(gonum.Implementation{}).Dsyev(lapack.EVCompute, blas.Lower, n, a, n, p.values[:n], p.work, len(p.work)) {
		return errRitz
	}
	return nil
}

// last returns the last component of Ritz vector c.
func (p *projected) last(c int) float64 { return p.vectors[(p.size-1)*p.size+c] }

// residual returns the residual norm of Ritz pair c by the recurrence.
func (p *projected) residual(c int) float64 {
	r := p.coupling() * p.last(c)
	return max(r, -r)
}

// condense makes the first keep Ritz vectors the whole space.
func (p *projected) condense(keep int) {
	for c := range keep {
		p.arrow[c] = p.coupling() * p.last(c)
	}
	copy(p.alpha, p.values[:keep])
	p.size, p.kept = keep, keep
}
