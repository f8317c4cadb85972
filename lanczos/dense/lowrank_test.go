package dense

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Matrices of low rank have many levels at zero, where off-diagonal elements of
// the tridiagonal form shrink to rounding beside diagonal ones of the same size:
// what counts as zero there is measured against the whole matrix.
func TestMatricesOfLowRank(t *testing.T) {
	r := rand.New(rand.NewPCG(41, 1))
	for _, n := range []int{30, 60, 90, 120, 200} {
		for rank := 1; rank <= 3; rank++ {
			real, herm := make([]float64, n*n), make([]complex128, n*n)
			trace := 0.0
			for range rank {
				v, z := make([]float64, n), make([]complex128, n)
				for i := range v {
					v[i] = r.NormFloat64()
					z[i] = complex(v[i], r.NormFloat64())
					trace += v[i] * v[i]
				}
				for i := range v {
					for j := range v {
						real[i*n+j] += v[i] * v[j]
						herm[i*n+j] += z[i] * complex(re(z[j]), -imag(z[j]))
					}
				}
			}
			for i := range n { // Hermitian to the last bit
				herm[i*n+i] = complex(re(herm[i*n+i]), 0)
				for j := range i {
					herm[j*n+i] = complex(re(herm[i*n+j]), -imag(herm[i*n+j]))
				}
			}
			values, _, err := EigenReal(real, n, false)
			if err != nil {
				t.Fatalf("real, dimension %d, rank %d: %v", n, rank, err)
			}
			sum := 0.0
			for i, x := range values {
				sum += x
				if i < n-rank && math.Abs(x) > 1e-12*trace {
					t.Errorf("real, dimension %d, rank %d: level %d is %v", n, rank, i, x)
				}
			}
			if math.Abs(sum-trace) > 1e-11*trace {
				t.Errorf("real, dimension %d, rank %d: the levels add up to %v of %v", n, rank, sum, trace)
			}
			if _, _, err := EigenComplex(herm, n, true); err != nil {
				t.Fatalf("complex, dimension %d, rank %d: %v", n, rank, err)
			}
		}
	}
}

func re(z complex128) float64 { return real(z) }
