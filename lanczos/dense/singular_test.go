package dense

import (
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

func randomComplex(r *rand.Rand, n int) []complex128 {
	a := make([]complex128, n)
	for i := range a {
		a[i] = complex(r.NormFloat64(), r.NormFloat64())
	}
	return a
}

// The squares of the singular values are the eigenvalues of a†a.
func TestSingularAgainstEigen(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 1))
	for _, shape := range [][2]int{{1, 1}, {1, 5}, {5, 1}, {2, 2}, {7, 7}, {8, 5}, {5, 8}, {40, 9}, {9, 40}, {60, 50}, {70, 70}} {
		rows, cols := shape[0], shape[1]
		a := randomComplex(r, rows*cols)
		before := append([]complex128(nil), a...)
		reals := make([]float64, len(a))
		for i := range a {
			reals[i] = real(a[i])
		}
		s, err := SingularComplex(a, rows, cols)
		if err != nil {
			t.Fatal(err)
		}
		sr, err := SingularReal(reals, rows, cols)
		if err != nil {
			t.Fatal(err)
		}
		compareSquares(t, "complex", a, rows, cols, s)
		compareSquares(t, "real", toComplex(reals), rows, cols, sr)
		for i := range a {
			if a[i] != before[i] || reals[i] != real(before[i]) {
				t.Fatalf("%v: input modified", shape)
			}
		}
	}
}

func compareSquares(t *testing.T, name string, a []complex128, rows, cols int, s []float64) {
	t.Helper()
	gram := make([]complex128, cols*cols)
	for i := range rows {
		for j := range cols {
			for k := range cols {
				gram[j*cols+k] += cmplx.Conj(a[i*cols+j]) * a[i*cols+k]
			}
		}
	}
	squares, _, err := EigenComplex(gram, cols, false)
	if err != nil {
		t.Fatal(err)
	}
	if len(s) != min(rows, cols) {
		t.Fatalf("%s %d×%d: %d values", name, rows, cols, len(s))
	}
	for j, x := range s {
		if x < 0 || j > 0 && x > s[j-1] || math.Abs(x*x-squares[cols-1-j]) > 50*epsilon*s[0]*s[0] {
			t.Errorf("%s %d×%d: value %d is %v, expected the root of %v", name, rows, cols, j, x, squares[cols-1-j])
		}
	}
}

// U diag(s) V† with known s over fifteen decades: each value within 20ε·s_max.
func TestSingularSmallValues(t *testing.T) {
	r := rand.New(rand.NewPCG(12, 1))
	const rows, cols = 48, 31
	_, u, err := EigenComplex(randomHermitian(r, rows), rows, true)
	if err != nil {
		t.Fatal(err)
	}
	_, v, err := EigenComplex(randomHermitian(r, cols), cols, true)
	if err != nil {
		t.Fatal(err)
	}
	_, ur, err := EigenReal(randomSymmetric(r, rows), rows, true)
	if err != nil {
		t.Fatal(err)
	}
	_, vr, err := EigenReal(randomSymmetric(r, cols), cols, true)
	if err != nil {
		t.Fatal(err)
	}
	exact := make([]float64, cols)
	a, b := make([]complex128, rows*cols), make([]float64, rows*cols)
	for l := range exact {
		exact[l] = math.Pow(10, -float64(l)/2)
		for i := range rows {
			for j := range cols {
				a[i*cols+j] += complex(exact[l], 0) * u[l*rows+i] * cmplx.Conj(v[l*cols+j])
				b[i*cols+j] += exact[l] * ur[l*rows+i] * vr[l*cols+j]
			}
		}
	}
	s, err := SingularComplex(a, rows, cols)
	if err != nil {
		t.Fatal(err)
	}
	sr, err := SingularReal(b, rows, cols)
	if err != nil {
		t.Fatal(err)
	}
	for l := range exact {
		if math.Abs(s[l]-exact[l]) > 20*epsilon || math.Abs(sr[l]-exact[l]) > 20*epsilon {
			t.Errorf("value %d is %v (complex) and %v (real), expected %v", l, s[l], sr[l], exact[l])
		}
	}
}

// A matrix of rank r has exactly min(rows,cols)-r values of rounding size.
func TestSingularRank(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 1))
	const rows, cols, rank = 30, 25, 4
	a := make([]complex128, rows*cols)
	for range rank {
		x, y := randomComplex(r, rows), randomComplex(r, cols)
		for i := range rows {
			for j := range cols {
				a[i*cols+j] += x[i] * y[j]
			}
		}
	}
	s, err := SingularComplex(a, rows, cols)
	if err != nil {
		t.Fatal(err)
	}
	for j, x := range s {
		if j < rank && x < 1 || j >= rank && x > 20*epsilon*s[0] {
			t.Errorf("value %d is %v", j, x)
		}
	}
}

func TestSingularScalesEmptyAndErrors(t *testing.T) {
	for _, shape := range [][2]int{{0, 0}, {0, 5}, {5, 0}} {
		c, err1 := SingularComplex(nil, shape[0], shape[1])
		d, err2 := SingularReal(nil, shape[0], shape[1])
		if err1 != nil || err2 != nil || len(c) != 0 || len(d) != 0 {
			t.Errorf("%v: %v %v %v %v", shape, c, d, err1, err2)
		}
	}
	zero, err := SingularComplex(make([]complex128, 6), 2, 3)
	if err != nil || len(zero) != 2 || zero[0] != 0 || zero[1] != 0 {
		t.Errorf("zero matrix: %v %v", zero, err)
	}
	for _, scale := range []float64{1e-300, 1e300} {
		x := complex(scale, 0)
		c, err1 := SingularComplex([]complex128{3 * x, 0, 0, 4i * x, 0, 0}, 3, 2)
		d, err2 := SingularReal([]float64{3 * scale, 0, 0, 4 * scale, 0, 0}, 3, 2)
		if err1 != nil || err2 != nil {
			t.Fatal(err1, err2)
		}
		for j, want := range []float64{4, 3} {
			if math.Abs(c[j]/scale-want) > 1e-14 || math.Abs(d[j]/scale-want) > 1e-14 {
				t.Errorf("scale %g: value %d is %v and %v", scale, j, c[j], d[j])
			}
		}
	}
	if _, err := SingularComplex(make([]complex128, 5), 2, 3); !errors.Is(err, ErrShape) {
		t.Errorf("wrong length: %v", err)
	}
	if _, err := SingularReal(make([]float64, 5), -2, 3); !errors.Is(err, ErrShape) {
		t.Errorf("negative rows: %v", err)
	}
	if _, err := SingularComplex([]complex128{cmplx.NaN()}, 1, 1); !errors.Is(err, ErrNotFinite) {
		t.Errorf("NaN: %v", err)
	}
	if _, err := SingularReal([]float64{math.Inf(-1)}, 1, 1); !errors.Is(err, ErrNotFinite) {
		t.Errorf("infinity: %v", err)
	}
}
