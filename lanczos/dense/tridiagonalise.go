package dense

import (
	"math"

	"gonum.org/v1/gonum/blas"
	blasgonum "gonum.org/v1/gonum/blas/gonum"
)

// panelWidth is the number of columns that are reduced before the rest of the
// matrix is updated by one product of matrices.
const panelWidth = 32

// hermitian is a matrix on its way to tridiagonal form: full storage, real and
// imaginary parts apart, so that products of real matrices do most of the work.
type hermitian struct {
	n             int
	re, im        []float64
	diagonal, off []float64
}

// panel holds reflections H_0 H_1 … of columns first, first+1, …: reflection j has
// the vector v_j with v_j[first+1+j] = 1 and the factor tau[j]. Row i of rows holds
// the real parts of component first+1+i of all v_j, then the imaginary parts.
type panel struct {
	first, width int
	rows         []float64
	tau          []complex128
}

func newHermitian(a []complex128, n, exponent int) *hermitian {
	m := &hermitian{
		n: n, re: make([]float64, n*n), im: make([]float64, n*n),
		diagonal: make([]float64, n), off: make([]float64, n-1),
	}
	for i := range n {
		for j := range i + 1 {
			x, y := a[i*n+j], a[j*n+i]
			if exponent != 0 {
				x = complex(math.Ldexp(real(x), -exponent), math.Ldexp(imag(x), -exponent))
				y = complex(math.Ldexp(real(y), -exponent), math.Ldexp(imag(y), -exponent))
			}
			re, im := real(x)/2+real(y)/2, imag(x)/2-imag(y)/2
			m.re[i*n+j], m.im[i*n+j] = re, im
			m.re[j*n+i], m.im[j*n+i] = re, -im
		}
	}
	return m
}

// reduce brings the matrix to tridiagonal form and returns the reflections if they
// are wanted.
func (m *hermitian) reduce(keep bool) []panel {
	var panels []panel
	for first := 0; first < m.n-1; first += panelWidth {
		p := m.reducePanel(first, min(panelWidth, m.n-1-first))
		if keep {
			panels = append(panels, p)
		}
	}
	m.diagonal[m.n-1] = m.re[m.n*m.n-1]
	return panels
}

// reducePanel reduces columns first … first+width-1. With p = tau A v and
// w = p - tau (p†v) v/2 each reflection maps A to A - v w† - w v†; within the panel
// these changes wait in v and w and are applied to single columns only.
func (m *hermitian) reducePanel(first, width int) panel {
	n := m.n
	size := n - first - 1 // rows first+1 … n-1
	result := panel{first, width, make([]float64, size*2*width), make([]complex128, width)}
	v := make([][]complex128, 0, width)
	w := make([][]complex128, 0, width)
	for j := range width {
		k := first + j
		column := m.column(k, first, v, w)
		m.diagonal[k] = real(column[0])
		x := column[1:]
		beta, tau := reflector(x)
		m.off[k] = beta
		result.tau[j] = tau
		vj := make([]complex128, size)
		copy(vj[j:], x)
		wj := make([]complex128, size)
		m.times(wj[j:], x, k+1)
		deferred(wj[j:], vj, v, w, j)
		var overlap complex128
		for i := j; i < size; i++ {
			wj[i] *= tau
			overlap += complex(real(wj[i]), -imag(wj[i])) * vj[i]
		}
		half := -tau * overlap / 2
		for i := j; i < size; i++ {
			wj[i] += half * vj[i]
		}
		v, w = append(v, vj), append(w, wj)
		for i := j; i < size; i++ {
			result.rows[i*2*width+j] = real(vj[i])
			result.rows[i*2*width+width+j] = imag(vj[i])
		}
	}
	m.update(first+width, v, w, width-1)
	return result
}

// column returns column k of the current matrix from its diagonal down; v and w
// begin at row first+1.
func (m *hermitian) column(k, first int, v, w [][]complex128) []complex128 {
	c := make([]complex128, m.n-k)
	re, im := m.re[k*m.n+k:(k+1)*m.n], m.im[k*m.n+k:(k+1)*m.n]
	for i := range c {
		c[i] = complex(re[i], -im[i])
	}
	skip := k - first - 1
	for l := range v {
		vl, wl := v[l][skip:], w[l][skip:]
		v0, w0 := complex(real(vl[0]), -imag(vl[0])), complex(real(wl[0]), -imag(wl[0]))
		for i := range c {
			c[i] -= vl[i]*w0 + wl[i]*v0
		}
	}
	return c
}

// times sets dst to the product of the stored matrix from row and column k on with x.
func (m *hermitian) times(dst, x []complex128, k int) {
	n := m.n
	xr, xi := make([]float64, len(x)), make([]float64, len(x))
	for i, z := range x {
		xr[i], xi[i] = real(z), imag(z)
	}
	share(len(dst), max(1, 16384/len(x)), func(from, to int) {
		for i := from; i < to; i++ {
			row := (k + i) * n
			dst[i] = splitDot(m.re[row+k:row+n], m.im[row+k:row+n], xr, xi)
		}
	})
}

// splitDot returns the sum of (re+i·im)(xr+i·xi).
func splitDot(re, im, xr, xi []float64) complex128 {
	im, xr, xi = im[:len(re)], xr[:len(re)], xi[:len(re)]
	var a, b, c, d float64
	for i, r := range re {
		q, x, y := im[i], xr[i], xi[i]
		a += r * x
		b += q * y
		c += r * y
		d += q * x
	}
	return complex(a-b, c+d)
}

// deferred subtracts from dst, which begins at row skip of v and w, what the
// waiting changes v w† + w v† do to the vector x.
func deferred(dst, x []complex128, v, w [][]complex128, skip int) {
	for l := range v {
		vl, wl := v[l][skip:], w[l][skip:]
		var vx, wx complex128
		for i, z := range x[skip:] {
			vx += complex(real(vl[i]), -imag(vl[i])) * z
			wx += complex(real(wl[i]), -imag(wl[i])) * z
		}
		for i := range dst {
			dst[i] -= vl[i]*wx + wl[i]*vx
		}
	}
}

// update applies the waiting changes to rows and columns from k on, where v and w
// have the component skip. One strip of rows of the lower triangle after another
// is a product of real matrices; the upper triangle is its mirror.
func (m *hermitian) update(k int, v, w [][]complex128, skip int) {
	size := m.n - k
	if size <= 0 {
		return
	}
	width := len(v)
	inner := 4 * width
	left, turned, right := make([]float64, size*inner), make([]float64, size*inner), make([]float64, inner*size)
	for l := range width {
		for i := range size {
			a, b := v[l][skip+i], w[l][skip+i]
			row := left[i*inner:]
			row[l], row[width+l], row[2*width+l], row[3*width+l] = real(a), imag(a), real(b), imag(b)
			row = turned[i*inner:]
			row[l], row[width+l], row[2*width+l], row[3*width+l] = imag(a), -real(a), imag(b), -real(b)
			right[l*size+i], right[(width+l)*size+i] = real(b), imag(b)
			right[(2*width+l)*size+i], right[(3*width+l)*size+i] = real(a), imag(a)
		}
	}
	const strip = 128
	impl := blasgonum.Implementation{}
	for from := 0; from < size; from += strip {
		to := min(from+strip, size)
		at := (k+from)*m.n + k
		impl.Dgemm(blas.NoTrans, blas.NoTrans, to-from, to, inner, -1, left[from*inner:], inner, right, size, 1, m.re[at:], m.n)
		impl.Dgemm(blas.NoTrans, blas.NoTrans, to-from, to, inner, -1, turned[from*inner:], inner, right, size, 1, m.im[at:], m.n)
	}
	m.mirror(k)
}

// mirror copies the lower triangle from row k on to the upper one.
func (m *hermitian) mirror(k int) {
	const tile = 32
	n := m.n
	share((n-k+tile-1)/tile, 4, func(from, to int) {
		for ti := k + from*tile; ti < min(k+to*tile, n); ti += tile {
			for tj := ti; tj < n; tj += tile {
				for i := ti; i < min(ti+tile, n); i++ {
					for j := max(tj, i+1); j < min(tj+tile, n); j++ {
						m.re[i*n+j], m.im[i*n+j] = m.re[j*n+i], -m.im[j*n+i]
					}
				}
			}
		}
	})
}
