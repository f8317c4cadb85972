package report

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"
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
	for name, bad := range map[string][]float64{"few": {1, 2}, "equal": {1, 1, 1, 2}, "no number": {1, math.NaN(), 2}} {
		if x, err := SpacingRatios(bad, 0); !errors.Is(err, ErrData) {
			t.Errorf("%s: %v, %v", name, x, err)
		}
	}
}
