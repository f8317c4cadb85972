package model

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// One particle on a twisted cluster has the band energies at 2π(n+twist)/L, in
// the sector of the momentum 2πn/L.
func TestOneParticleOnAClusterHasTheBandEnergies(t *testing.T) {
	r := rand.New(rand.NewPCG(41, 42))
	models := []TightBinding{Checkerboard(1, SunSecond, SunThird, 1), Haldane(1, 0.2, 0.7, 0.3, 1), randomBands(r, 3), randomBands(r, 2)}
	for _, m := range models {
		c := built[*lattice.Cluster](t)(lattice.Torus(m.Lattice, 4, 3))
		space := onSites(t, c, basis.Fermion())
		for _, twist := range [][2]float64{{}, {0.25, 0.5}, {r.Float64(), r.Float64()}} {
			var all []float64
			one := charges(space.ParticleNumber().Is(1))
			m.Interactions = nil // they do not act on one particle, and may be too long for this cluster
			h := built[operator.Operator](t)(m.OnCluster(space, c, &Options{Twist: twist}))
			for _, k := range c.Momenta() {
				one.Symmetries = c.Sector(k)
				e := spectrum(t, h, one)
				bands := built[[]BandState](t)(m.Bands((float64(k.Index[0])+twist[0])/4, (float64(k.Index[1])+twist[1])/3))
				for b, s := range bands {
					all = append(all, s.Energy)
					if math.Abs(e[b]-s.Energy) > 1e-10 {
						t.Fatalf("%s, twist %v, momentum %v: energies %v, bands %+v", m.Name, twist, k, e, bands)
					}
				}
			}
			boundary := built[operator.Operator](t)(m.OnCluster(space, c, &Options{Twist: twist, Gauge: lattice.Boundary}))
			one.Symmetries = nil
			for i, e := range spectrum(t, boundary, one) {
				if math.Abs(e-merged([][]float64{all})[i]) > 1e-10 {
					t.Fatalf("%s, twist %v, boundary gauge: level %d is %v", m.Name, twist, i, e)
				}
			}
		}
	}
}

// With an energy gap far above the interaction, the lowest levels of two
// fermions on the lattice are those of the projected interaction.
func TestLatticeModelApproachesItsProjection(t *testing.T) {
	const far = 1e5
	m := Checkerboard(1, SunSecond, 0, 1)
	p := project(t, m, 3, 3, nil)
	want := merged(sectors(t, p, 2))
	c := built[*lattice.Cluster](t)(lattice.Torus(m.Lattice, 3, 3))
	space := onSites(t, c, basis.Fermion())
	o := operator.On(space)
	interactions := m
	interactions.Hoppings = nil
	h := built[operator.Operator](t)(interactions.OnCluster(space, c, nil))
	// Add far·(1 - projector) for one particle, by the Bloch states.
	terms := []operator.Operator{h}
	for j := range p.States {
		upper := m.bands(float64(j/3)/3, float64(j%3)/3)[1]
		var create []operator.Operator
		for site := range c.Sites() {
			cell, a := c.CellOf(site)
			amplitude := upper.Amplitudes[a] * turn(float64(j/3*cell[0]+j%3*cell[1])/3) / 3
			create = append(create, o.Create(site).Scale(amplitude))
		}
		gamma := operator.Sum(create)
		terms = append(terms, gamma.Times(gamma.Adjoint()).Scale(far))
	}
	e := spectrum(t, operator.Sum(terms).NormalOrdered(), charges(space.ParticleNumber().Is(2)))
	for i, w := range want {
		if math.Abs(e[i]-w) > 3/far {
			t.Errorf("level %d: %v on the lattice, %v projected", i, e[i], w)
		}
	}
	if e[len(want)] < far/2 {
		t.Errorf("level %d is %v, not in the upper band", len(want), e[len(want)])
	}
}

func TestOpenClusterDropsTheTermsBeyondIt(t *testing.T) {
	m := Checkerboard(1, 0, 0, 2)
	c := built[*lattice.Cluster](t)(lattice.Open(m.Lattice, 2, 2))
	space := onSites(t, c, basis.Fermion())
	h := built[operator.Operator](t)(m.OnCluster(space, c, nil))
	bonds := built[[]lattice.Bond](t)(c.Bonds(1))
	repulsion := built[operator.Operator](t)(Repulsion(space, bonds, 2))
	count := 0
	for i := range h.Len() {
		if len(h.At(i).Factors) == 2 && h.At(i).Factors[0].Symbol == operator.Number {
			count++
		}
	}
	if count != repulsion.Len() || count != len(bonds) {
		t.Errorf("%d repulsions on an open cluster with %d bonds", count, len(bonds))
	}
}

func TestImpossibleModelsOnClustersAreRefused(t *testing.T) {
	m := Checkerboard(1, 1, 0, 1)
	c := built[*lattice.Cluster](t)(lattice.Torus(m.Lattice, 2, 2))
	narrow := built[*lattice.Cluster](t)(lattice.Torus(m.Lattice, 1, 4))
	square := built[*lattice.Cluster](t)(lattice.Torus(lattice.Square(), 2, 4))
	space := onSites(t, c, basis.Fermion())
	for name, f := range map[string]struct {
		cluster *lattice.Cluster
		space   *basis.Space
		says    string
	}{
		"other lattice": {square, space, "2 orbitals a cell"},
		"too narrow":    {narrow, space, "to itself"},
		"sites":         {c, onSites(t, square, basis.Fermion()), ""},
		"spins":         {c, onSites(t, c, basis.SpinHalf()), "spin"},
		"no cluster":    {nil, space, "no cluster"},
	} {
		_, err := m.OnCluster(f.space, f.cluster, nil)
		if f.says == "" {
			if err != nil {
				t.Errorf("%s: %v", name, err)
			}
			continue
		}
		if err == nil || !strings.Contains(err.Error(), f.says) {
			t.Errorf("%s: error %v, want one that says %q", name, err, f.says)
		}
	}
}
