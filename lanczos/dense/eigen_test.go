package dense

import (
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"
)

func randomHermitian(r *rand.Rand, n int) []complex128 {
	a := make([]complex128, n*n)
	for i := range n {
		a[i*n+i] = complex(r.NormFloat64(), 0)
		for j := range i {
			z := complex(r.NormFloat64(), r.NormFloat64())
			a[i*n+j], a[j*n+i] = z, cmplx.Conj(z)
		}
	}
	return a
}

func randomSymmetric(r *rand.Rand, n int) []float64 {
	a := make([]float64, n*n)
	for i := range n {
		for j := range i + 1 {
			x := r.NormFloat64()
			a[i*n+j], a[j*n+i] = x, x
		}
	}
	return a
}

func toComplex(a []float64) []complex128 {
	z := make([]complex128, len(a))
	for i, x := range a {
		z[i] = complex(x, 0)
	}
	return z
}

// defects returns the largest |A v - λ v| and |V†V - 1| over all elements.
func defects(a []complex128, n int, values []float64, vecs []complex128) (residual, overlap float64) {
	for j := range n {
		v := vecs[j*n : (j+1)*n]
		for i := range n {
			sum := -complex(values[j], 0) * v[i]
			for k, z := range v {
				sum += a[i*n+k] * z
			}
			residual = max(residual, cmplx.Abs(sum))
		}
		for l := range j + 1 {
			var sum complex128
			for k, z := range v {
				sum += cmplx.Conj(vecs[l*n+k]) * z
			}
			if l == j {
				sum--
			}
			overlap = max(overlap, cmplx.Abs(sum))
		}
	}
	return residual, overlap
}

func frobenius(a []complex128) float64 {
	sum := 0.0
	for _, z := range a {
		sum += real(z)*real(z) + imag(z)*imag(z)
	}
	return math.Sqrt(sum)
}

func TestEigenComplexDiagonalises(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 1))
	for _, n := range []int{1, 2, 3, 5, 31, 32, 33, 34, 64, 65, 66, 97, 150} {
		a := randomHermitian(r, n)
		before := append([]complex128(nil), a...)
		values, vecs, err := EigenComplex(a, n, true)
		if err != nil {
			t.Fatal(err)
		}
		size := frobenius(a)
		residual, overlap := defects(a, n, values, vecs)
		if residual > 30*epsilon*size || overlap > 20*epsilon*math.Sqrt(float64(n))+5*epsilon {
			t.Errorf("n=%d: residual %g, overlap %g", n, residual, overlap)
		}
		only, none, err := EigenComplex(a, n, false)
		if err != nil || none != nil {
			t.Fatalf("n=%d: values only: %v, vectors %v", n, err, none != nil)
		}
		trace := 0.0
		for j := range n {
			trace += values[j] - real(a[j*n+j])
			if j > 0 && values[j] < values[j-1] {
				t.Errorf("n=%d: values do not ascend", n)
			}
			if only[j] != values[j] {
				t.Errorf("n=%d: value %d is %v without vectors and %v with", n, j, only[j], values[j])
			}
		}
		if math.Abs(trace) > 20*epsilon*size*math.Sqrt(float64(n)) {
			t.Errorf("n=%d: trace off by %g", n, trace)
		}
		for i := range a {
			if a[i] != before[i] {
				t.Fatalf("n=%d: input modified", n)
			}
		}
	}
}

func TestEigenRealDiagonalises(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 1))
	for _, n := range []int{1, 2, 3, 4, 5, 31, 33, 64, 100, 151} {
		a := randomSymmetric(r, n)
		values, vecs, err := EigenReal(a, n, true)
		if err != nil {
			t.Fatal(err)
		}
		size := frobenius(toComplex(a))
		residual, overlap := defects(toComplex(a), n, values, toComplex(vecs))
		if residual > 30*epsilon*size || overlap > 20*epsilon*math.Sqrt(float64(n))+5*epsilon {
			t.Errorf("n=%d: residual %g, overlap %g", n, residual, overlap)
		}
		only, _, err := EigenReal(a, n, false)
		if err != nil {
			t.Fatal(err)
		}
		for j := range n {
			if only[j] != values[j] {
				t.Errorf("n=%d: value %d is %v without vectors and %v with", n, j, only[j], values[j])
			}
		}
	}
}

// The ring of n sites with hopping exp(iφ) has the levels 2cos(2πm/n + φ): closed
// formula. Without flux all but one or two are doubly degenerate.
func TestEigenRingWithFlux(t *testing.T) {
	for _, n := range []int{3, 8, 41, 96} {
		for _, flux := range []float64{0, 0.3} {
			a := make([]complex128, n*n)
			exact := make([]float64, n)
			for i := range n {
				hop := cmplx.Exp(complex(0, flux))
				a[(i+1)%n*n+i] += cmplx.Conj(hop)
				a[i*n+(i+1)%n] += hop
				exact[i] = 2 * math.Cos(2*math.Pi*float64(i)/float64(n)+flux)
			}
			exact = pick(exact, ascending(exact))
			values, vecs, err := EigenComplex(a, n, true)
			if err != nil {
				t.Fatal(err)
			}
			for j := range n {
				if math.Abs(values[j]-exact[j]) > 1e-14 {
					t.Errorf("n=%d flux=%v: level %d is %v, expected %v", n, flux, j, values[j], exact[j])
				}
			}
			if residual, overlap := defects(a, n, values, vecs); residual > 1e-14 || overlap > 1e-14 {
				t.Errorf("n=%d flux=%v: residual %g, overlap %g", n, flux, residual, overlap)
			}
		}
	}
}

// A = U diag U† with a known diagonal: multiplicities stay what they are.
func TestEigenKeepsMultiplicity(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 1))
	const n = 40
	_, u, err := EigenComplex(randomHermitian(r, n), n, true)
	if err != nil {
		t.Fatal(err)
	}
	exact := make([]float64, n)
	for j := range n {
		exact[j] = float64(j / 5) // fivefold
	}
	a := make([]complex128, n*n)
	for l := range n {
		for i := range n {
			for j := range n {
				a[i*n+j] += complex(exact[l], 0) * u[l*n+i] * cmplx.Conj(u[l*n+j])
			}
		}
	}
	values, vecs, err := EigenComplex(a, n, true)
	if err != nil {
		t.Fatal(err)
	}
	for j := range n {
		if math.Abs(values[j]-exact[j]) > 1e-13 {
			t.Errorf("level %d is %v, expected %v", j, values[j], exact[j])
		}
	}
	if residual, overlap := defects(a, n, values, vecs); residual > 1e-13 || overlap > 1e-13 {
		t.Errorf("residual %g, overlap %g", residual, overlap)
	}
}

func TestEigenSpecialMatrices(t *testing.T) {
	for name, diagonal := range map[string][]float64{
		"zero": {0, 0, 0, 0}, "identity": {1, 1, 1}, "split": {3, -1, 2, -1, 7},
		"graded": {1e-12, 1, 1e-6, 1e-9}, "one": {-4},
	} {
		n := len(diagonal)
		a := make([]float64, n*n)
		for i, x := range diagonal {
			a[i*n+i] = x
		}
		sorted := pick(diagonal, ascending(diagonal))
		for _, vectors := range []bool{false, true} {
			re, _, err1 := EigenReal(a, n, vectors)
			co, _, err2 := EigenComplex(toComplex(a), n, vectors)
			if err1 != nil || err2 != nil {
				t.Fatal(name, err1, err2)
			}
			for j := range n {
				if re[j] != sorted[j] || co[j] != sorted[j] {
					t.Errorf("%s: level %d is %v and %v, expected %v", name, j, re[j], co[j], sorted[j])
				}
			}
		}
	}
}

func TestEigenExtremeScales(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 1))
	const n = 12
	a := randomHermitian(r, n)
	b := randomSymmetric(r, n)
	want, _, _ := EigenComplex(a, n, false)
	wantReal, _, _ := EigenReal(b, n, false)
	for _, exponent := range []int{-1000, -500, 500, 1000} {
		c, d := make([]complex128, n*n), make([]float64, n*n)
		for i := range a {
			c[i] = complex(math.Ldexp(real(a[i]), exponent), math.Ldexp(imag(a[i]), exponent))
			d[i] = math.Ldexp(b[i], exponent)
		}
		values, vecs, err := EigenComplex(c, n, true)
		if err != nil {
			t.Fatal(err)
		}
		realValues, _, err := EigenReal(d, n, true)
		if err != nil {
			t.Fatal(err)
		}
		scaled := make([]float64, n)
		for j := range n {
			scaled[j] = math.Ldexp(values[j], -exponent)
			if math.Abs(scaled[j]-want[j]) > 1e-13 || math.Abs(math.Ldexp(realValues[j], -exponent)-wantReal[j]) > 1e-13 {
				t.Errorf("2^%d: level %d is %v and %v", exponent, j, values[j], realValues[j])
			}
		}
		if residual, overlap := defects(a, n, scaled, vecs); residual > 1e-13 || overlap > 1e-13 {
			t.Errorf("2^%d: residual %g, overlap %g", exponent, residual, overlap)
		}
	}
}

func TestEigenPhase(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 1))
	const n = 20
	_, vecs, err := EigenComplex(randomHermitian(r, n), n, true)
	if err != nil {
		t.Fatal(err)
	}
	_, reals, err := EigenReal(randomSymmetric(r, n), n, true)
	if err != nil {
		t.Fatal(err)
	}
	for _, set := range [][]complex128{vecs, toComplex(reals)} {
		for j := range n {
			v := set[j*n : (j+1)*n]
			top := 0.0
			for _, z := range v {
				top = max(top, cmplx.Abs(z))
			}
			for _, z := range v {
				if cmplx.Abs(z) >= (1-PhaseTolerance)*top {
					if imag(z) != 0 || real(z) <= 0 {
						t.Errorf("vector %d: leading component %v", j, z)
					}
					break
				}
			}
		}
	}
}

func TestEigenErrors(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []struct {
		name string
		a    []complex128
		n    int
		is   error
		says string
	}{
		{"short", make([]complex128, 3), 2, ErrShape, "3 elements given for a 2×2"},
		{"negative", nil, -1, ErrShape, "-1×-1"},
		{"huge", nil, math.MaxInt / 2, ErrShape, "0 elements"},
		{"nan", []complex128{1, 0, complex(0, nan), 1}, 2, ErrNotFinite, "element (1,0)"},
		{"inf", []complex128{1, 0, 0, complex(inf, 0)}, 2, ErrNotFinite, "element (1,1)"},
		{"asymmetric", []complex128{1, 2, 3, 1}, 2, ErrNotHermitian, "element (1,0) is (3+0i) but element (0,1) is (2+0i)"},
		{"diagonal", []complex128{1, 0, 0, 1i}, 2, ErrNotHermitian, "element (1,1)"},
	} {
		_, _, err := EigenComplex(c.a, c.n, true)
		if !errors.Is(err, c.is) || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: error %v", c.name, err)
		}
	}
	for name, a := range map[string][]float64{"nan": {1, nan, nan, 1}, "asymmetric": {1, 2, 3, 1}, "inf": {inf, 0, 0, 1}} {
		if _, _, err := EigenReal(a, 2, false); err == nil {
			t.Errorf("real %s: no error", name)
		}
	}
	if _, _, err := EigenReal([]float64{1, 1 + 1e-15, 1, 1}, 2, true); err != nil {
		t.Errorf("rounding is refused: %v", err)
	}
	for _, vectors := range []bool{false, true} {
		values, _, err := EigenComplex(nil, 0, vectors)
		if err != nil || len(values) != 0 {
			t.Errorf("0×0: %v %v", values, err)
		}
	}
}
