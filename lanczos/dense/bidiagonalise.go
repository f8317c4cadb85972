package dense

import (
	"math"

	blasgonum "gonum.org/v1/gonum/blas/gonum"
)

// tall is a matrix with at least as many rows as columns, row after row.
type tall struct {
	rows, cols int
	a          []complex128
}

// tallCopy copies a, transposed if it has more columns than rows (the singular
// values are the same).
func tallCopy(a []complex128, rows, cols, exponent int) *tall {
	m := &tall{max(rows, cols), min(rows, cols), make([]complex128, len(a))}
	for i := range rows {
		for j := range cols {
			z := a[i*cols+j]
			if exponent != 0 {
				z = complex(math.Ldexp(real(z), -exponent), math.Ldexp(imag(z), -exponent))
			}
			if rows >= cols {
				m.a[i*cols+j] = z
			} else {
				m.a[j*rows+i] = z
			}
		}
	}
	return m
}

// triangularise replaces the matrix by the square factor R of its QR form.
func (m *tall) triangularise() {
	sums := make([]complex128, m.cols)
	for k := range m.cols {
		beta, u, tau := m.columnReflector(k)
		m.fromLeft(k, u, tau, sums)
		m.a[k*m.cols+k] = complex(beta, 0)
		for i := k + 1; i < m.cols; i++ {
			m.a[i*m.cols+k] = 0
		}
	}
	m.rows = m.cols
	m.a = m.a[:m.cols*m.cols]
}

// bidiagonalise writes the diagonal and upper off-diagonal of the real bidiagonal
// form to d and e and destroys the matrix.
func (m *tall) bidiagonalise(d, e []float64) {
	sums := make([]complex128, m.cols)
	for k := range m.cols {
		beta, u, tau := m.columnReflector(k)
		d[k] = beta
		m.fromLeft(k, u, tau, sums)
		if k+1 == m.cols {
			return
		}
		row := m.a[k*m.cols+k+1 : (k+1)*m.cols]
		for j, z := range row {
			row[j] = complex(real(z), -imag(z))
		}
		e[k], tau = reflector(row)
		m.fromRight(k+1, row, tau)
	}
}

// columnReflector finds the reflection that clears column k below its diagonal.
func (m *tall) columnReflector(k int) (beta float64, u []complex128, tau complex128) {
	u = make([]complex128, m.rows-k)
	for i := range u {
		u[i] = m.a[(k+i)*m.cols+k]
	}
	beta, tau = reflector(u)
	return beta, u, tau
}

// shareGrain is the number of elements below which goroutines do not pay.
const shareGrain = 1 << 14

// fromLeft subtracts conj(tau) u (u†A) from rows k … and columns k+1 ….
func (m *tall) fromLeft(k int, u []complex128, tau complex128, sums []complex128) {
	if tau == 0 {
		return
	}
	impl := blasgonum.Implementation{}
	tau = complex(real(tau), -imag(tau))
	share(m.cols-k-1, max(8, shareGrain/len(u)), func(from, to int) {
		if from == to {
			return
		}
		part := sums[k+1+from : k+1+to]
		clear(part)
		for i, z := range u {
			at := (k+i)*m.cols + k + 1
			impl.Zaxpy(to-from, complex(real(z), -imag(z)), m.a[at+from:at+to], 1, part, 1)
		}
		for i, z := range u {
			at := (k+i)*m.cols + k + 1
			impl.Zaxpy(to-from, -tau*z, part, 1, m.a[at+from:at+to], 1)
		}
	})
}

// fromRight subtracts tau (A v) v† from rows k … and columns k ….
func (m *tall) fromRight(k int, v []complex128, tau complex128) {
	if tau == 0 {
		return
	}
	impl := blasgonum.Implementation{}
	bar := make([]complex128, len(v))
	for i, z := range v {
		bar[i] = complex(real(z), -imag(z))
	}
	share(m.rows-k, max(1, shareGrain/len(v)), func(from, to int) {
		for i := k + from; i < k+to; i++ {
			row := m.a[i*m.cols+k : (i+1)*m.cols]
			sum := impl.Zdotu(len(v), v, 1, row, 1)
			impl.Zaxpy(len(v), -tau*sum, bar, 1, row, 1)
		}
	})
}
