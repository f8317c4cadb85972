package report

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
)

// Fit is a polynomial c₀ + c₁x + c₂x² + … fitted to points by least squares.
type Fit struct {
	// Value is c₀, the value extrapolated to x = 0.
	Value float64
	// Error is the standard error of Value: from the given errors of the points, or, where
	// none are given, from the scatter about the curve. HasError is false, and Error 0,
	// where that needs more points than coefficients.
	Error    float64
	HasError bool
	// Coefficients c₀, c₁, ….
	Coefficients []float64
	// ChiSquare is Σ ((y-fit)/error)², with errors of one where none are given. Freedom
	// is the number of points less that of coefficients.
	ChiSquare float64
	Freedom   int

	root []float64 // W of the covariance WWᵀ of the coefficients, row after row; nil without error
}

// mostCondition is the largest condition number of a fit: beyond it rounding alone would
// change the third digit of the coefficients.
const mostCondition = 1e13

// FitPolynomial fits a polynomial of a degree, 0 to 8, to the points (x, y). errs are the
// standard errors of y, all positive, or nil where they are equal and unknown.
//
// The coefficients solve the weighted least squares A c = y/err, A_ik = x_i^k/err_i, by
// the factorisation A = QR; their covariance is R⁻¹R⁻ᵀ, times ChiSquare/Freedom where
// errs is nil (W. H. Press et al., Numerical Recipes (Cambridge University Press, 1992),
// section 15.4, from memory).
//
// Errors: ErrData for lists of different lengths, numbers that are not finite, errors
// that are not positive, fewer points or different x than coefficients, x too close
// together for the degree, or a result beyond the range of numbers.
func FitPolynomial(x, y, errs []float64, degree int) (Fit, error) {
	if err := checkPoints(x, y, errs, degree); err != nil {
		return Fit{}, err
	}
	s := newSystem(x, y, errs, degree+1)
	var qr mat.QR
	qr.Factorize(s.a)
	if cond := qr.Cond(); !(cond < mostCondition) {
		return Fit{}, fmt.Errorf("%w: places from %v to %v are too close together, or their errors too different, for a polynomial of degree %d; give a lower degree, or places further apart",
			ErrData, slices.Min(x), slices.Max(x), degree)
	}
	var c mat.VecDense
	if err := qr.SolveVecTo(&c, false, s.b); err != nil {
		return Fit{}, fmt.Errorf("%w: a polynomial of degree %d through these places: %v; give a lower degree", ErrData, degree, err)
	}
	f := s.result(&c, &qr)
	numbers := slices.Concat(f.Coefficients, f.root, []float64{f.ChiSquare, f.Error})
	if slices.ContainsFunc(numbers, func(v float64) bool { return !finite(v) }) {
		return Fit{}, fmt.Errorf("%w: the polynomial of degree %d has coefficients, errors or a sum of squares beyond the range of numbers; give places, values and errors in another unit",
			ErrData, degree)
	}
	return f, nil
}

// system is A c = b in powers of x/scale, with weights relative to the smallest error.
type system struct {
	a        *mat.Dense
	b        *mat.VecDense
	scale    float64
	smallest float64 // error; 0 where none are given
}

func newSystem(x, y, errs []float64, coefficients int) system {
	s := system{a: mat.NewDense(len(x), coefficients, nil), b: mat.NewVecDense(len(x), nil), scale: 1}
	if largest := math.Max(slices.Max(x), -slices.Min(x)); largest > 0 {
		s.scale = largest
	}
	if errs != nil {
		s.smallest = slices.Min(errs)
	}
	for i := range x {
		w := 1.0
		if errs != nil {
			w = s.smallest / errs[i]
		}
		s.b.SetVec(i, w*y[i])
		for k := range coefficients {
			s.a.Set(i, k, w)
			w *= x[i] / s.scale
		}
	}
	return s
}

// result takes the units of x and of the errors back.
func (s system) result(c *mat.VecDense, qr *mat.QR) Fit {
	n, k := s.a.Dims()
	var rest mat.VecDense
	rest.MulVec(s.a, c)
	rest.SubVec(s.b, &rest)
	f := Fit{Freedom: n - k, ChiSquare: mat.Dot(&rest, &rest), HasError: s.smallest > 0 || n > k}
	sigma := math.Sqrt(f.ChiSquare / math.Max(1, float64(f.Freedom)))
	if s.smallest > 0 {
		sigma = s.smallest
		f.ChiSquare = f.ChiSquare / s.smallest / s.smallest
	}
	units := make([]float64, k)
	for i := range units {
		units[i] = math.Pow(s.scale, float64(i))
		f.Coefficients = append(f.Coefficients, c.AtVec(i)/units[i])
	}
	f.Value = f.Coefficients[0]
	if !f.HasError {
		return f
	}
	inverse := inverseOf(qr, k)
	f.root = make([]float64, k*k)
	for i := range k {
		for j := i; j < k; j++ {
			f.root[i*k+j] = sigma * inverse.At(i, j) / units[i]
		}
	}
	_, f.Error = f.At(0)
	return f
}

// inverseOf is R⁻¹, by substitution backwards.
func inverseOf(qr *mat.QR, k int) *mat.Dense {
	var r mat.Dense
	qr.RTo(&r)
	inverse := mat.NewDense(k, k, nil)
	for j := range k {
		inverse.Set(j, j, 1/r.At(j, j))
		for i := j - 1; i >= 0; i-- {
			sum := 0.0
			for l := i + 1; l <= j; l++ {
				sum += r.At(i, l) * inverse.At(l, j)
			}
			inverse.Set(i, j, -sum/r.At(i, i))
		}
	}
	return inverse
}

func checkPoints(x, y, errs []float64, degree int) error {
	if len(x) != len(y) || errs != nil && len(errs) != len(x) {
		return fmt.Errorf("%w: %d places, %d values and %d errors; give as many of each, or no errors", ErrData, len(x), len(y), len(errs))
	}
	if degree < 0 || degree > 8 || degree+1 > len(x) {
		return fmt.Errorf("%w: a polynomial of degree %d through %d points; give a degree from 0 to 8 and more points than that", ErrData, degree, len(x))
	}
	for i := range x {
		if err := errors.Join(checkNumber(fmt.Sprintf("place %d", i), x[i]), checkNumber(fmt.Sprintf("value %d", i), y[i])); err != nil {
			return err
		}
		if errs != nil && (!(errs[i] > 0) || !finite(errs[i]) || errs[i] > MostMagnitude) {
			return fmt.Errorf("%w: an error of %v at point %d; give positive numbers below %.0e, or nil where they are unknown", ErrData, errs[i], i, MostMagnitude)
		}
	}
	sorted := slices.Clone(x)
	slices.Sort(sorted)
	if different := len(slices.Compact(sorted)); degree+1 > different {
		return fmt.Errorf("%w: a polynomial of degree %d through points at %d different places; give more places or a lower degree", ErrData, degree, different)
	}
	return nil
}

// At returns the fitted value at x and its standard error, 0 where that is unknown.
func (f Fit) At(x float64) (value, standardError float64) {
	n := len(f.Coefficients)
	parts := make([]float64, n) // of the error: pᵀW with the powers p of x
	power := 1.0
	for i, c := range f.Coefficients {
		value += c * power
		for j := i; j < n && f.root != nil; j++ {
			parts[j] += power * f.root[i*n+j]
		}
		power *= x
	}
	for _, v := range parts {
		standardError = math.Hypot(standardError, v)
	}
	return value, standardError
}
