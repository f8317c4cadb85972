package model

import (
	"math"
	"math/rand/v2"
	"testing"

	"ketloom/basis"
	"ketloom/lanczos/dense"
	"ketloom/operator"
)

// gapRatio returns the mean over the levels of min(s, s')/max(s, s'), s and s' being
// neighbouring spacings (Oganesyan and Huse, Phys. Rev. B 75, 155111, 2007).
func gapRatio(levels []float64) float64 {
	sum := 0.0
	for i := 2; i < len(levels); i++ {
		s, next := levels[i-1]-levels[i-2], levels[i]-levels[i-1]
		sum += min(s, next) / max(s, next)
	}
	return sum / float64(len(levels)-2)
}

// central returns the middle half of the levels.
func central(levels []float64) []float64 { return levels[len(levels)/4 : 3*len(levels)/4] }

func TestGapRatioOfRandomMatrices(t *testing.T) {
	const n, samples = 400, 60
	r := rand.New(rand.NewPCG(51, 52))
	sum := 0.0
	for range samples {
		a := make([]float64, n*n)
		for i := range n {
			a[i*n+i] = math.Sqrt2 * r.NormFloat64()
			for j := range i {
				a[i*n+j] = r.NormFloat64()
				a[j*n+i] = a[i*n+j]
			}
		}
		levels, _, err := dense.EigenReal(a, n, false)
		if err != nil {
			t.Fatal(err)
		}
		sum += gapRatio(central(levels))
	}
	want, record := value[float64](t, "A8-rmean-GOE-sampled")
	expect(t, record, "mean ratio of another sample", []float64{sum / samples}, []float64{want})
}

// A weakly disordered ring has the statistics of real random matrices.
func TestGapRatioOfAWeaklyDisorderedRing(t *testing.T) {
	if testing.Short() {
		t.Skip("eight complete spectra of 924 levels")
	}
	const n, samples, width = 12, 8, 0.5
	c, space := ring(t, n, basis.SpinHalf())
	exchange := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
	r := rand.New(rand.NewPCG(53, 54))
	sum := 0.0
	for range samples {
		fields := make([][3]float64, n)
		for i := range fields {
			fields[i][2] = width * (2*r.Float64() - 1)
		}
		h := exchange.Plus(built[operator.Operator](t)(Field(space, fields)))
		sum += gapRatio(central(spectrum(t, h, charges(space.TwiceSz().Is(0)))))
	}
	want, record := value[float64](t, "A8-rmean-GOE")
	expect(t, record, "mean ratio", []float64{sum / samples}, []float64{want})
}
