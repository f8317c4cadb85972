package report

import (
	"errors"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// The straight line through points with errors has closed formulas: with w = 1/σ²,
// Δ = S·Sxx - Sx², offset (Sxx·Sy - Sx·Sxy)/Δ with the variance Sxx/Δ.
func TestStraightLineFit(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 14))
	for range 50 {
		n := 3 + r.IntN(8)
		var x, y, e []float64
		for range n {
			x, y, e = append(x, 0.01+r.Float64()), append(y, r.NormFloat64()), append(e, 0.1+r.Float64())
		}
		var s, sx, sy, sxx, sxy float64
		for i := range x {
			w := 1 / (e[i] * e[i])
			s, sx, sy, sxx, sxy = s+w, sx+w*x[i], sy+w*y[i], sxx+w*x[i]*x[i], sxy+w*x[i]*y[i]
		}
		delta := s*sxx - sx*sx
		offset, slope := (sxx*sy-sx*sxy)/delta, (s*sxy-sx*sy)/delta
		f, err := FitPolynomial(x, y, e, 1)
		if err != nil {
			t.Fatal(err)
		}
		value, sigma := f.At(0)
		for _, c := range [][2]float64{{f.Coefficients[0], offset}, {f.Coefficients[1], slope}, {f.Error, math.Sqrt(sxx / delta)}, {value, offset}, {sigma, f.Error}} {
			if math.Abs(c[0]-c[1]) > 1e-9*(1+math.Abs(c[1])) {
				t.Fatalf("%v, want %v", c[0], c[1])
			}
		}
		if f.Freedom != n-2 || !f.HasError {
			t.Fatalf("%+v", f)
		}
	}
}

// exactFit solves the normal equations of a fit in rational numbers, which do not round:
// coefficients, and the inverse of the matrix.
func exactFit(x, y, errs []int64, degree int) (c []*big.Rat, inverse [][]*big.Rat) {
	k := degree + 1
	rows := make([][]*big.Rat, k) // AᵀA, Aᵀb, 1
	for i := range rows {
		rows[i] = make([]*big.Rat, 2*k+1)
		for j := range rows[i] {
			rows[i][j] = new(big.Rat)
		}
		rows[i][k+1+i].SetInt64(1)
		for n := range x {
			weight := big.NewRat(1, errs[n]*errs[n])
			power := func(p int) *big.Rat {
				v := new(big.Rat).Set(weight)
				for range p {
					v.Mul(v, big.NewRat(x[n], 1))
				}
				return v
			}
			for j := range k {
				rows[i][j].Add(rows[i][j], power(i+j))
			}
			rows[i][k].Add(rows[i][k], new(big.Rat).Mul(power(i), big.NewRat(y[n], 1)))
		}
	}
	for i := range rows { // positive matrices need no exchange of rows
		pivot := new(big.Rat).Inv(rows[i][i])
		for j := range rows[i] {
			rows[i][j].Mul(rows[i][j], pivot)
		}
		for other := range rows {
			if other == i {
				continue
			}
			factor := new(big.Rat).Set(rows[other][i])
			for j := range rows[i] {
				rows[other][j].Sub(rows[other][j], new(big.Rat).Mul(factor, rows[i][j]))
			}
		}
	}
	for i := range rows {
		c, inverse = append(c, rows[i][k]), append(inverse, rows[i][k+1:])
	}
	return c, inverse
}

// Fits of degrees 0 to 4 agree with rational arithmetic, at 0 and elsewhere.
func TestFitsAgreeWithExactArithmetic(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 55))
	near := func(what string, got float64, want *big.Rat) {
		t.Helper()
		if w, _ := want.Float64(); math.Abs(got-w) > 1e-8*math.Abs(w) {
			t.Fatalf("%s: %v, want %v", what, got, w)
		}
	}
	for range 40 {
		n := 6 + r.IntN(5)
		degree := r.IntN(5)
		var x, y, e []int64
		var fx, fy, fe []float64
		for i := range n {
			x, y, e = append(x, int64(2*i+1+r.IntN(2))), append(y, int64(1+r.IntN(100))), append(e, int64(1+r.IntN(5)))
			fx, fy, fe = append(fx, float64(x[i])), append(fy, float64(y[i])), append(fe, float64(e[i]))
		}
		c, inverse := exactFit(x, y, e, degree)
		f, err := FitPolynomial(fx, fy, fe, degree)
		if err != nil {
			t.Fatal(err)
		}
		for i := range c {
			near("coefficient", f.Coefficients[i], c[i])
		}
		chi := new(big.Rat)
		for i := range x {
			miss, power := big.NewRat(y[i], 1), big.NewRat(1, 1)
			for _, v := range c {
				miss.Sub(miss, new(big.Rat).Mul(v, power))
				power.Mul(power, big.NewRat(x[i], 1))
			}
			chi.Add(chi, miss.Mul(miss, miss).Mul(miss, big.NewRat(1, e[i]*e[i])))
		}
		near("chi square", f.ChiSquare, chi)
		near("variance at 0", f.Error*f.Error, inverse[0][0])
		const place = 3
		variance, p := new(big.Rat), big.NewRat(1, 1)
		for i := range c {
			q := new(big.Rat).Set(p)
			for j := range c {
				variance.Add(variance, new(big.Rat).Mul(q, inverse[i][j]))
				q.Mul(q, big.NewRat(place, 1))
			}
			p.Mul(p, big.NewRat(place, 1))
		}
		_, sigma := f.At(place)
		near("variance at 3", sigma*sigma, variance)
		if f.Value != f.Coefficients[0] || f.Freedom != n-degree-1 || !f.HasError {
			t.Fatalf("%+v", f)
		}
	}
}

// Units do not matter: other units of places, values and errors give the same numbers in
// these.
func TestFitsInOtherUnits(t *testing.T) {
	x, y, e := []float64{0.1, 0.2, 0.4, 0.7}, []float64{3, 2.5, 2.2, 2.4}, []float64{0.1, 0.2, 0.1, 0.3}
	scaled := func(list []float64, by float64) []float64 {
		out := make([]float64, len(list))
		for i, v := range list {
			out[i] = v * by
		}
		return out
	}
	a, err := FitPolynomial(x, y, e, 2)
	if err != nil {
		t.Fatal(err)
	}
	for _, unit := range [][2]float64{{1e-12, 1e9}, {1e8, 1e-14}} {
		b, err := FitPolynomial(scaled(x, unit[0]), scaled(y, unit[1]), scaled(e, unit[1]), 2)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(b.Value/unit[1]-a.Value) > 1e-10 || math.Abs(b.Error/unit[1]-a.Error) > 1e-10 || math.Abs(b.ChiSquare-a.ChiSquare) > 1e-9 {
			t.Errorf("%+v in other units, %+v", b, a)
		}
	}
}

// Two thirds of the extrapolations lie within one standard error of the truth, with given
// and with unknown errors (normal distribution: 0.683; a sample of 2000 has ±0.010).
func TestErrorsOfFitsCover(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 71))
	x := []float64{0.03, 0.04, 0.05, 0.07, 0.1, 0.125, 0.16, 0.2, 0.25, 0.3, 0.4, 0.5}
	for _, given := range []bool{true, false} {
		inside := 0
		const trials = 2000
		for range trials {
			var y, e []float64
			for _, v := range x {
				y = append(y, 0.7-1.3*v+2*v*v+0.02*r.NormFloat64())
				e = append(e, 0.02)
			}
			if !given {
				e = nil
			}
			f, err := FitPolynomial(x, y, e, 2)
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(f.Coefficients[0]-0.7) < f.Error {
				inside++
			}
		}
		// With 9 degrees of freedom and an error from the scatter Student's distribution
		// has 0.657 within one.
		if part := float64(inside) / trials; part < 0.62 || part > 0.72 {
			t.Errorf("errors given %v: %.3f within one standard error, want about 0.67", given, part)
		}
	}
}

func TestFitsThatCannotBe(t *testing.T) {
	exact, err := FitPolynomial([]float64{1, 2}, []float64{3, 5}, nil, 1)
	if err != nil || exact.HasError || math.Abs(exact.Coefficients[0]-1) > 1e-12 {
		t.Errorf("two points: %+v, %v", exact, err)
	}
	for name, try := range map[string]func() (Fit, error){
		"lengths":  func() (Fit, error) { return FitPolynomial([]float64{1}, []float64{1, 2}, nil, 0) },
		"degree":   func() (Fit, error) { return FitPolynomial([]float64{1}, []float64{1}, nil, 1) },
		"places":   func() (Fit, error) { return FitPolynomial([]float64{1, 1, 1}, []float64{1, 2, 3}, nil, 1) },
		"errors":   func() (Fit, error) { return FitPolynomial([]float64{1}, []float64{1}, []float64{0}, 0) },
		"numbers":  func() (Fit, error) { return FitPolynomial([]float64{math.NaN()}, []float64{1}, nil, 0) },
		"infinite": func() (Fit, error) { return FitPolynomial([]float64{1}, []float64{math.Inf(1)}, nil, 0) },
		"two places": func() (Fit, error) {
			return FitPolynomial([]float64{0.1, 0.3, 0.3, 0.1}, []float64{1, 2, 2.1, 1.1}, nil, 2)
		},
		"close": func() (Fit, error) {
			return FitPolynomial([]float64{1, 1 + 1e-14, 1 + 2e-14}, []float64{1, 2, 3}, nil, 1)
		},
		"tiny errors": func() (Fit, error) {
			return FitPolynomial([]float64{0.1, 0.2, 0.3}, []float64{1, 2, 3.1}, []float64{1e-200, 1e-200, 1e-200}, 1)
		},
		"tiny places": func() (Fit, error) {
			return FitPolynomial([]float64{1e-300, 2e-300, 3e-300}, []float64{1, 2, 3.1}, nil, 2)
		},
	} {
		if f, err := try(); !errors.Is(err, ErrData) {
			t.Errorf("%s: %+v, %v", name, f, err)
		}
	}
}

// The reference curves integrate to one on [0, 1] and have the means that are printed
// beside them.
func TestReferenceDistributions(t *testing.T) {
	for _, c := range (LevelStatistics{Unitary: true}).references() {
		const n = 200000
		norm, mean := 0.0, 0.0
		for i := range n {
			r := (float64(i) + 0.5) / n
			norm += c.density(r) / n
			mean += r * c.density(r) / n
		}
		if math.Abs(norm-1) > 1e-8 || math.Abs(mean-c.mean) > 1e-8 {
			t.Errorf("%s: norm %v, mean %v, want 1 and %v", c.name, norm, mean, c.mean)
		}
	}
}

// Independent levels have the ratio 2 ln 2 - 1 on average; three levels have one ratio.
func TestSpacingRatios(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 61))
	levels := make([]float64, 40001)
	for i := range levels {
		levels[i] = r.Float64()
	}
	ratios, err := SpacingRatios(levels, 0.5)
	if err != nil {
		t.Fatal(err)
	}
	mean := 0.0
	for _, x := range ratios {
		mean += x / float64(len(ratios))
	}
	if math.Abs(mean-MeanRatioPoisson) > 0.008 { // four standard errors
		t.Errorf("mean ratio %v of independent levels, want %v", mean, MeanRatioPoisson)
	}
	if three, err := SpacingRatios([]float64{3, 0, 1}, 0); err != nil || len(three) != 1 || three[0] != 0.5 {
		t.Errorf("%v, %v", three, err)
	}
	for name, bad := range map[string][]float64{"pair": {1, 2, 2, 4}, "split by rounding": {1, 2, 2 + 1e-15, 4}, "few": {1, 2}, "equal": {1, 1, 1, 2}, "no number": {1, math.NaN(), 2}} {
		if x, err := SpacingRatios(bad, 0); !errors.Is(err, ErrData) {
			t.Errorf("%s: %v, %v", name, x, err)
		}
	}
}

// The surmise is exact for real random matrices of three levels: their ratios have the
// mean 4 - 2√3, and a histogram of them follows the curve.
func TestSurmiseOfRandomMatrices(t *testing.T) {
	r := rand.New(rand.NewPCG(6, 28))
	const samples = 20000
	f := LevelStatistics{Bins: 5}
	mean := 0.0
	for range samples {
		m := mat.NewSymDense(3, nil)
		for i := range 3 {
			m.SetSym(i, i, math.Sqrt2*r.NormFloat64())
			for j := range i {
				m.SetSym(i, j, r.NormFloat64())
			}
		}
		var e mat.EigenSym
		if !e.Factorize(m, false) {
			t.Fatal("no levels")
		}
		ratios, err := SpacingRatios(e.Values(nil), 0)
		if err != nil {
			t.Fatal(err)
		}
		mean += ratios[0] / samples
		f.Ratios = append(f.Ratios, ratios...)
	}
	if math.Abs(mean-MeanRatioGOE) > 0.007 { // four standard errors
		t.Errorf("mean %v, want %v", mean, MeanRatioGOE)
	}
	counts, err := f.counts()
	if err != nil {
		t.Fatal(err)
	}
	goe := f.references()[1].density
	for i, c := range counts {
		part := 0.0
		const fine = 1000
		for n := range fine {
			part += goe((float64(i)+(float64(n)+0.5)/fine)/5) / 5 / fine
		}
		if sigma := math.Sqrt(samples * part * (1 - part)); math.Abs(float64(c)-samples*part) > 4*sigma {
			t.Errorf("bin %d holds %d ratios, want %.0f ± %.0f", i, c, samples*part, sigma)
		}
	}
}
