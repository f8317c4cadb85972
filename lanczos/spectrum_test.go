package lanczos

import (
	"context"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"slices"
	"testing"

	"ketloom/lanczos/dense"
)

// prescribed returns Q diag(levels) Q† with Q a product of three random
// reflections: a full matrix with a known spectrum and a cheap product.
func prescribed(levels []float64, seed uint64, isComplex bool) Operator {
	n := len(levels)
	r := rand.New(rand.NewPCG(seed, 77))
	mirrors := make([][]complex128, 3)
	for m := range mirrors {
		u, sum := make([]complex128, n), 0.0
		for i := range u {
			u[i] = complex(r.NormFloat64(), 0)
			if isComplex {
				u[i] += complex(0, r.NormFloat64())
			}
			sum += real(u[i])*real(u[i]) + imag(u[i])*imag(u[i])
		}
		for i := range u {
			u[i] /= complex(math.Sqrt(sum), 0)
		}
		mirrors[m] = u
	}
	reflect := func(x, u []complex128) {
		var overlap complex128
		for i := range x {
			overlap += cmplx.Conj(u[i]) * x[i]
		}
		for i := range x {
			x[i] -= 2 * overlap * u[i]
		}
	}
	product := func(dst, src []complex128) {
		copy(dst, src)
		for _, u := range mirrors {
			reflect(dst, u)
		}
		for i, e := range levels {
			dst[i] *= complex(e, 0)
		}
		for m := range mirrors {
			reflect(dst, mirrors[len(mirrors)-1-m])
		}
	}
	if isComplex {
		return ComplexFunc(n, product)
	}
	from, to := make([]complex128, n), make([]complex128, n)
	return RealFunc(n, func(dst, src []float64) {
		for i, x := range src {
			from[i] = complex(x, 0)
		}
		product(to, from)
		for i := range dst {
			dst[i] = real(to[i])
		}
	})
}

// bulk returns levels with the given ones at the bottom and a smooth rest above 1.
func bulk(n int, lowest ...float64) []float64 {
	levels := slices.Clone(lowest)
	for i := len(lowest); i < n; i++ {
		x := float64(i-len(lowest)+1) / float64(n)
		levels = append(levels, 1+9*x)
	}
	return levels
}

// verifyResult checks what every complete result must satisfy against the exact
// levels, ascending.
func verifyResult(t *testing.T, name string, op Operator, r *Result, err error, exact []float64, k int) {
	t.Helper()
	if err != nil || r == nil {
		t.Fatalf("%s: %v", name, err)
	}
	if !r.Complete || r.Converged != k || len(r.Levels) != k || len(r.Vectors) != k {
		t.Fatalf("%s: complete %v, %d converged, %d levels, %d vectors: %v", name, r.Complete, r.Converged, len(r.Levels), len(r.Vectors), r)
	}
	for j, l := range r.Levels {
		if d := math.Abs(l.Energy - exact[j]); !(d <= l.Bound) {
			t.Errorf("%s: level %d is %.15g, exact %.15g, off by %.2g with bound %.2g", name, j, l.Energy, exact[j], d, l.Bound)
		}
		if l.Residual > r.Tolerance*r.Norm {
			t.Errorf("%s: level %d has residual %g", name, j, l.Residual)
		}
		if j > 0 && l.Energy < r.Levels[j-1].Energy {
			t.Errorf("%s: levels do not ascend", name)
		}
	}
	if k < len(exact) {
		cut := exact[k]-exact[k-1] <= 0.9*r.Tolerance*r.Norm
		if cut != r.CutMultiplet {
			t.Errorf("%s: CutMultiplet %v, levels %d and %d differ by %g", name, r.CutMultiplet, k-1, k, exact[k]-exact[k-1])
		}
		if r.Check.HasNext && r.Check.Next > exact[k]+1e-9*r.Norm {
			t.Errorf("%s: next level %g is below the estimate %g", name, exact[k], r.Check.Next)
		}
	}
	verifyVectors(t, name, op, r)
}

// verifyVectors checks residuals, orthonormality and phase by plain sums.
func verifyVectors(t *testing.T, name string, op Operator, r *Result) {
	t.Helper()
	hv := make([]complex128, r.Dim)
	for j, v := range r.Vectors {
		if (v.Real == nil) == op.Real() || (v.Complex == nil) != op.Real() {
			t.Fatalf("%s: vector %d is of the wrong kind", name, j)
		}
		x := v.AsComplex()
		op2 := op
		if op.Real() {
			dst := make([]float64, r.Dim)
			op2.Apply(dst, v.Real)
			for i := range hv {
				hv[i] = complex(dst[i], 0)
			}
		} else {
			op2.ApplyComplex(hv, x)
		}
		sum, top := 0.0, 0.0
		for i := range hv {
			d := cmplx.Abs(hv[i] - complex(r.Levels[j].Energy, 0)*x[i])
			sum += d * d
			top = max(top, cmplx.Abs(x[i]))
		}
		if d := math.Sqrt(sum); math.Abs(d-r.Levels[j].Residual) > 1e-12*r.Norm {
			t.Errorf("%s: vector %d has residual %g, stated %g", name, j, d, r.Levels[j].Residual)
		}
		for l := range j + 1 {
			var overlap complex128
			for i, z := range r.Vectors[l].AsComplex() {
				overlap += cmplx.Conj(z) * x[i]
			}
			if l == j {
				overlap--
			}
			if cmplx.Abs(overlap) > 1e-13 {
				t.Errorf("%s: overlap of vectors %d and %d off by %g", name, l, j, cmplx.Abs(overlap))
			}
		}
		i := slices.IndexFunc(x, func(z complex128) bool { return cmplx.Abs(z) >= (1-dense.PhaseTolerance)*top })
		if imag(x[i]) != 0 || real(x[i]) <= 0 {
			t.Errorf("%s: vector %d has leading component %v", name, j, x[i])
		}
	}
}

func TestLowestAgainstDense(t *testing.T) {
	r := rand.New(rand.NewPCG(41, 1))
	for _, n := range []int{201, 260} {
		a := make([]complex128, n*n)
		for i := range n {
			a[i*n+i] = complex(r.NormFloat64(), 0)
			for j := range i {
				a[i*n+j] = complex(r.NormFloat64(), r.NormFloat64())
				a[j*n+i] = cmplx.Conj(a[i*n+j])
			}
		}
		b := make([]float64, n*n)
		for i := range a {
			b[i] = real(a[i])
		}
		complexLevels, _, err := dense.EigenComplex(a, n, false)
		if err != nil {
			t.Fatal(err)
		}
		realLevels, _, err := dense.EigenReal(b, n, false)
		if err != nil {
			t.Fatal(err)
		}
		complexOp := ComplexFunc(n, func(dst, src []complex128) {
			for i := range dst {
				dst[i] = 0
				for j, z := range src {
					dst[i] += a[i*n+j] * z
				}
			}
		})
		realOp := RealFunc(n, func(dst, src []float64) {
			for i := range dst {
				dst[i] = 0
				for j, z := range src {
					dst[i] += b[i*n+j] * z
				}
			}
		})
		for _, k := range []int{1, 2, 5, 12} {
			for _, krylov := range []int{0, k + 3, k + 9} {
				opts := &Options{Krylov: krylov}
				result, err := Lowest(context.Background(), complexOp, k, opts)
				verifyResult(t, "complex", complexOp, result, err, complexLevels, k)
				if result.Dense {
					t.Error("the whole matrix was used")
				}
				result, err = Lowest(context.Background(), realOp, k, opts)
				verifyResult(t, "real", realOp, result, err, realLevels, k)
			}
		}
	}
}

// Prescribed multiplicities, inside the list and at its end.
func TestLowestMultiplets(t *testing.T) {
	for name, lowest := range map[string][]float64{
		"double ground":      {-3, -3, -2, -1},
		"triple ground":      {-3, -3, -3, -1},
		"fivefold ground":    {-2, -2, -2, -2, -2, 0.5},
		"ladder of doublets": {-5, -5, -4, -4, -3, -3},
		"mixed":              {-5, -4, -4, -4, -3, -2, -2, -2, -2, -2, -1},
	} {
		for _, isComplex := range []bool{false, true} {
			levels := bulk(900, lowest...)
			op := prescribed(levels, 5, isComplex)
			for k := 1; k <= len(lowest); k++ {
				result, err := Lowest(context.Background(), op, k, nil)
				verifyResult(t, name, op, result, err, levels, k)
			}
		}
	}
}

// Levels 1e-8 apart, at resolution 1e-9 of the norm 10, are separate levels.
func TestLowestClusters(t *testing.T) {
	levels := bulk(700, -3, -3+1e-8, -3+2e-8, -1, -1+1e-8)
	for _, isComplex := range []bool{false, true} {
		op := prescribed(levels, 6, isComplex)
		for k := 1; k <= 6; k++ {
			opts := &Options{Tolerance: 1e-11}
			result, err := Lowest(context.Background(), op, k, opts)
			verifyResult(t, "cluster", op, result, err, levels, k)
		}
	}
}

// The ring of n sites has the levels -2cos(2πm/n): closed formula. All but the
// lowest and the highest are doubly degenerate.
func TestLowestRing(t *testing.T) {
	const n = 400
	exact := make([]float64, n)
	for m := range exact {
		exact[m] = -2 * math.Cos(2*math.Pi*float64(m)/n)
	}
	slices.Sort(exact)
	op := RealFunc(n, func(dst, src []float64) {
		for i := range dst {
			dst[i] = -src[(i+1)%n] - src[(i+n-1)%n]
		}
	})
	for k := 1; k <= 7; k++ {
		result, err := Lowest(context.Background(), op, k, nil)
		verifyResult(t, "ring", op, result, err, exact, k)
	}
}

// Few distinct eigenvalues: every Krylov space is exhausted after a few products.
func TestLowestInvariantSpaces(t *testing.T) {
	const n = 600
	for name, value := range map[string]func(i int) float64{
		"identity":  func(int) float64 { return 1 },
		"zero":      func(int) float64 { return 0 },
		"negative":  func(int) float64 { return -7.25 },
		"two":       func(i int) float64 { return float64(i % 2) },
		"few lower": func(i int) float64 { return float64(min(i, 3)) },
		"tiny":      func(i int) float64 { return 1e-120 * float64(min(i, 3)) },
		"huge":      func(i int) float64 { return 1e120 * float64(min(i, 3)) },
		"extreme":   func(i int) float64 { return 1e-200 * float64(min(i, 3)) },
	} {
		exact := make([]float64, n)
		for i := range exact {
			exact[i] = value(i)
		}
		slices.Sort(exact)
		op := RealFunc(n, func(dst, src []float64) {
			for i, x := range src {
				dst[i] = value(i) * x
			}
		})
		for _, k := range []int{1, 3, 5} {
			result, err := Lowest(context.Background(), op, k, nil)
			verifyResult(t, name, op, result, err, exact, k)
		}
	}
}

func TestLowestWholeMatrix(t *testing.T) {
	for _, n := range []int{1, 2, 3, 17, DenseDimension} {
		levels := bulk(n, -1, -1)[:n]
		slices.Sort(levels)
		for _, isComplex := range []bool{false, true} {
			op := prescribed(levels, 7, isComplex)
			for _, k := range []int{1, (n + 1) / 2, n} {
				result, err := Lowest(context.Background(), op, k, nil)
				verifyResult(t, "whole", op, result, err, levels, k)
				if !result.Dense || result.Products != n+k {
					t.Errorf("n=%d k=%d: dense %v, %d products", n, k, result.Dense, result.Products)
				}
			}
		}
	}
	levels := bulk(300, -2)
	op := prescribed(levels, 8, true)
	result, err := Lowest(context.Background(), op, 300, nil)
	verifyResult(t, "k = dim", op, result, err, levels, 300)
	if !result.Dense {
		t.Error("k = dim: not by the whole matrix")
	}
}

// A list of most of the spectrum without the whole matrix, forced by calling the
// search itself.
func TestSearchReachesTheWholeSpectrum(t *testing.T) {
	levels := bulk(60, -1, -1, -1)
	for _, k := range []int{50, 57, 60} {
		for _, isComplex := range []bool{false, true} {
			op := prescribed(levels, 9, isComplex)
			s, err := resolve(op, k, &Options{})
			if err != nil {
				t.Fatal(err)
			}
			s.Krylov = 60
			var result *Result
			if isComplex {
				search := newSearch(context.Background(), op, s, complexField{})
				result, err = search.find()
				search.space.crew.close()
			} else {
				search := newSearch(context.Background(), op, s, realField{})
				result, err = search.find()
				search.space.crew.close()
			}
			verifyResult(t, "spectrum", op, result, err, levels, k)
		}
	}
}
