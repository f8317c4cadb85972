package entangle

import (
	"context"
	"strings"
	"testing"

	"ketloom/basis"
)

// A charge of a boson site need not be a sum over its bosons. It labels the parts
// that are sites, not those that are particles. Weights of the same state without
// charges.
func TestChargesThatAreNotSumsOverParticles(t *testing.T) {
	r := rng(31)
	space := makeSpace(t, repeated(4, basis.Boson(3))...)
	number := space.ParticleNumber()
	pairs := basis.Charge{Name: "pairs", Weights: [][]int{{0, 0, 1, 3}, {0, 0, 1, 3}, {0, 0, 1, 3}, {0, 0, 1, 3}}}
	parity := basis.Charge{Name: "parity", Modulus: 2, Weights: [][]int{{1, 0, 1, 0}, {0, 1, 0, 1}, {0, 0, 0, 0}, {0, 3, 2, 1}}}
	for _, c := range []struct {
		charge basis.Charge
		labels bool
	}{{pairs, false}, {parity, true}, {space.Weighted("momentum", 3, []int{0, 1, 2, -1}), true}} {
		s := randomState(t, r, makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{number.Is(4), c.charge.Is(1)}}))
		bare := unfolded(t, s, false)
		for part := 1; part <= 4; part++ {
			cut := particleCut(t, []State{s}, part)
			near(t, "trace", cut.Trace(), 1, 1e-13)
			nearAll(t, c.charge.Name, weights(cut), weights(particleCut(t, []State{bare}, part)), 1e-13)
			if (len(cut.Names) == 1) != c.labels {
				t.Errorf("%s: labels %v", c.charge.Name, cut.Names)
			}
		}
		for _, sites := range [][]int{{0}, {3, 1}, {0, 1, 2}} {
			cut := spaceCut(t, []State{s}, sites...)
			nearAll(t, c.charge.Name, weights(cut), weights(spaceCut(t, []State{bare}, sites...)), 1e-13)
			if len(cut.Names) < 1 || !strings.Contains(strings.Join(cut.Names, " "), c.charge.Name) {
				t.Errorf("%s: labels %v of sites", c.charge.Name, cut.Names)
			}
		}
	}
}

// One product state can be taken apart in too many ways: for the memory, and for
// a binomial coefficient in float64.
func TestTooManyWays(t *testing.T) {
	ctx := context.Background()
	for _, c := range []struct {
		site          basis.Site
		modes, number int
		part          int
		says          string
	}{
		{basis.Fermion(), 25, 24, 12, "more than 1048576 rows and columns"},
		{basis.Boson(255), 5, 1274, 637, "more than 1.8e308 ways"},
	} {
		space := makeSpace(t, repeated(c.modes, c.site)...)
		b := makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(c.number)}})
		s := []State{randomState(t, rng(32), b)}
		for _, workers := range []int{1, 2} {
			_, err := ParticleCut(ctx, s, c.part, &Options{Memory: 1 << 20, Workers: workers})
			if err == nil || !strings.Contains(err.Error(), c.says) {
				t.Errorf("%d of %d: error %v, want one that says %q", c.part, c.number, err, c.says)
			}
		}
	}
}

// Real amplitudes give what the same complex ones give, alone and in a mixture
// with complex ones, in real and complex sectors.
func TestRealAmplitudes(t *testing.T) {
	r := rng(33)
	space := makeSpace(t, repeated(6, basis.Fermion())...)
	for _, k := range []int{0, 1, 3} {
		b := makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(3)}, Symmetries: rotation(6, k)})
		z := randomAmplitudes(r, b.Len(), true)
		x := make([]float64, len(z))
		turned := make([]complex128, len(z))
		for i := range z {
			x[i], turned[i] = real(z[i]), z[i]*(0.6+0.8i)
		}
		s, err := RealState(b, x)
		if err != nil {
			t.Fatal(err)
		}
		other := randomState(t, r, b)
		for _, same := range []State{makeState(t, b, z), makeState(t, b, turned)} {
			nearAll(t, "sites", weights(spaceCut(t, []State{s}, 0, 2)), weights(spaceCut(t, []State{same}, 0, 2)), 1e-13)
			nearAll(t, "particles", weights(particleCut(t, []State{s}, 1)), weights(particleCut(t, []State{same}, 1)), 1e-13)
			nearAll(t, "mixture", weights(spaceCut(t, []State{s, other}, 5, 1, 2)), weights(spaceCut(t, []State{same, other}, 5, 1, 2)), 1e-13)
		}
	}
}
