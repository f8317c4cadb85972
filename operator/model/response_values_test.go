package model

import (
	"context"
	"fmt"
	"math"
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator"
	"ketloom/operator/matrix"
)

// All numbers in this file are from an independent NumPy program (two routes agree
// unless noted).

// Poles and weights of S(q, ω) on a ring of eight spins: a matrix between two momentum
// sectors of the same S_z.
func TestPolesOfTheSpinRing(t *testing.T) {
	ctx := context.Background()
	ring, h := heisenbergRing(t, 8, 1)
	space := h.Space()
	solve := func(k int) (*basis.Basis, *lanczos.Result) {
		sector := charges(space.TwiceSz().Is(0))
		sector.Symmetries = ring.Sector(ring.Momentum(k, 0))
		b := built[*basis.Basis](t)(basis.New(ctx, space, sector, nil))
		m := built[*matrix.Matrix](t)(matrix.New(ctx, h, b, nil))
		return b, built[*lanczos.Result](t)(lanczos.Lowest(ctx, m, b.Len(), nil))
	}
	home, ground := solve(0)
	for k, want := range map[int][][2]float64{
		0: {},
		1: {{1.1923549000423, 0.073903098742313}, {3.0227149820541, 6.78910891824e-05}, {3.1384102058733, 0.00025104151772665}, {4.5437867665924, 7.1155192512356e-07}},
		2: {{1.7964557292187, 0.1689740194629}, {3.0541251256999, 0.00017078394295785}, {4.102699371893, 4.4322817031542e-05}},
		3: {{1.5059450350165, 0.30468451067269}, {2.7921698592269, 0.021645551487725}, {3.9165461205127, 3.1699953747223e-05}, {5.0968194021792, 3.7190510719483e-08}},
		4: {{0.5226743450926, 0.77804647250249}, {2.4494537332138, 0.082405998521585}, {4.9811521485052, 1.9211849309427e-07}},
	} {
		b, all := solve(k)
		m := built[*matrix.Matrix](t)(matrix.Between(ctx, operator.On(space).Sz(3), home, b, nil))
		image := make([]complex128, b.Len())
		m.ApplyComplex(image, ground.Vectors[0].AsComplex())
		found := 0
		for n := 0; n < len(all.Levels); n++ {
			omega := all.Levels[n].Energy - ground.Levels[0].Energy
			weight := 0.0
			for ; n < len(all.Levels) && all.Levels[n].Energy-ground.Levels[0].Energy < omega+1e-9; n++ {
				var z complex128
				for i, x := range all.Vectors[n].AsComplex() {
					z += complex(real(x), -imag(x)) * image[i]
				}
				weight += 8 * (real(z)*real(z) + imag(z)*imag(z))
			}
			n--
			if weight < 1e-10 {
				continue
			}
			if found >= len(want) || math.Abs(omega-want[found][0]) > 1e-8 || math.Abs(weight-want[found][1]) > 1e-8 {
				t.Errorf("k = %d: pole at %.10f with weight %.10g, want %v", k, omega, weight, want)
				break
			}
			found++
		}
		if found != len(want) {
			t.Errorf("k = %d: %d poles, want %d", k, found, len(want))
		}
	}
}

// Thermodynamics of twelve spins from the complete spectrum by sectors.
func TestThermodynamicsOfTheSpinRing(t *testing.T) {
	const n = 12
	ring, h := heisenbergRing(t, n, 1)
	var levels, spins []float64
	for m := -n; m <= n; m += 2 {
		for k := range n {
			sector := charges(h.Space().TwiceSz().Is(m))
			sector.Symmetries = ring.Sector(ring.Momentum(k, 0))
			b, err := basis.New(context.Background(), h.Space(), sector, nil)
			if err != nil {
				continue // an empty sector; the number of levels is checked below
			}
			for _, e := range spectrum(t, h, b.Sector()) {
				levels, spins = append(levels, e), append(spins, float64(m)/2)
			}
		}
	}
	if len(levels) != 1<<n {
		t.Fatalf("%d levels", len(levels))
	}
	for temperature, want := range map[float64][5]float64{ // e, C, chi, S a site; ln Z
		0.1: {-0.44640272714022, 0.091216966503745, 0.044501861446115, 0.032608250325594, 53.959626260734},
		0.2: {-0.43168545860731, 0.19426018848822, 0.10939095257722, 0.13061772321238, 27.468540194987},
		0.5: {-0.34148278718357, 0.35000651404649, 0.14403219137355, 0.39416731443208, 12.925594665591},
		1:   {-0.20465179237557, 0.1886519540799, 0.13654261547332, 0.59073644654786, 9.5446588670812},
		2:   {-0.10220344259729, 0.053358170453692, 0.094473747500404, 0.66704629691937, 8.6177762186161},
		5:   {-0.03919588517515, 0.0081381222746306, 0.045017607283406, 0.68917427143535, 8.3641613816446},
	} {
		base := levels[0]
		for _, e := range levels {
			base = min(base, e)
		}
		var z, e1, e2, m2 float64
		for i, e := range levels {
			w := math.Exp(-(e - base) / temperature)
			z, e1, e2, m2 = z+w, e1+w*e, e2+w*e*e, m2+w*spins[i]*spins[i]
		}
		e1, e2, m2 = e1/z, e2/z, m2/z
		lnZ := math.Log(z) - base/temperature
		got := [5]float64{e1 / n, (e2 - e1*e1) / (temperature * temperature * n), m2 / (n * temperature), (lnZ + e1/temperature) / n, lnZ}
		for i := range got {
			if math.Abs(got[i]-want[i]) > 1e-9 {
				t.Errorf("T = %v: %.12v, want %.12v", temperature, got, want)
				break
			}
		}
	}
}

// Chebyshev moments Tr T_n(H/5)/256 of the ring of eight, from the spectrum.
func TestMomentsOfTheSpinRing(t *testing.T) {
	_, h := heisenbergRing(t, 8, 1)
	levels := spectrum(t, h, basis.Sector{})
	for n, want := range []float64{1, 0, -0.88, -0.024, 0.5944, 0.0768, -0.292384, -0.1036224, 0.07600384} {
		sum := 0.0
		for _, e := range levels {
			sum += math.Cos(float64(n) * math.Acos(e/5))
		}
		if math.Abs(sum/256-want) > 1e-10 {
			t.Errorf("moment %d is %.12f, want %.12f", n, sum/256, want)
		}
	}
}

// The stiffness d²E/dφ² from energies at a small uniform twist; computed once, so the
// tolerance is that of the second difference.
func TestStiffness(t *testing.T) {
	for _, c := range []struct {
		n     int
		delta float64
		want  float64
	}{{8, 0.5, 0.039945219478869}, {12, 0, 0.026831272952474}} {
		ring := built[*lattice.Cluster](t)(lattice.Ring(c.n))
		space := onSites(t, ring, basis.SpinHalf())
		energy := func(turns float64) float64 {
			h := built[operator.Operator](t)(XXZ(space, ring, []float64{1}, []float64{c.delta}, &Options{Twist: [2]float64{turns, 0}}))
			return spectrum(t, h, charges(space.TwiceSz().Is(0)))[0]
		}
		const turns = 1e-3
		angle := 2 * math.Pi * turns
		got := 2 * (energy(turns) - energy(0)) / (angle * angle)
		if math.Abs(got-c.want) > 1e-6 {
			t.Errorf("%s: %.9f, want %.9f", fmt.Sprintf("%d sites, Δ = %v", c.n, c.delta), got, c.want)
		}
	}
}
