package model

import (
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

func TestHubbardRingOfTen(t *testing.T) {
	c, space := ring(t, 10, basis.Electron())
	h := built[operator.Operator](t)(Hubbard(space, c, []float64{1}, 4, nil))
	want, r := value[[]float64](t, "C2-hubbard-ring10-55-U4.0")
	sector := charges(space.ParticleNumber().Is(10), space.TwiceSz().Is(0))
	expect(t, r, "lowest three", merged(lowestByMomentum(t, h, c, sector, 2)), want)
}

func TestHubbardLadder(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.Cylinder(lattice.Square(), 4, 2))
	space := onSites(t, c, basis.Electron())
	h := built[operator.Operator](t)(Hubbard(space, c, []float64{1}, 4, nil))
	want, r := value[float64](t, "C3-hubbard-ladder2x4-U4.0")
	sector := charges(space.ParticleNumber().Is(8), space.TwiceSz().Is(0))
	expect(t, r, "lowest three", merged(lowestByMomentum(t, h, c, sector, 3)), append([]float64{want}, r.Data.Next...))
}

// Electrons on the 4×4 torus at zero momentum, by the representation of the point
// group: eigenvalue of the rotation through π/2, and of the reflection in the x-axis.
func TestHubbardTorus(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.Torus(lattice.Square(), 4, 4))
	space := onSites(t, c, basis.Electron())
	rotation := built[group.Action](t)(c.Rotation([2]float64{}, 4))
	reflection := built[group.Action](t)(c.Reflection([2]float64{}, [2]float64{1, 0}))
	for id, m := range map[string]struct {
		electrons          int
		u                  float64
		rotated, reflected int64 // halves of a turn
	}{
		"C8-hubbard-4x4-33-U8.0": {6, 8, 1, 1},  // B2
		"C8-hubbard-4x4-55-U4.0": {10, 4, 0, 0}, // A1
		"C8-hubbard-4x4-55-U8.0": {10, 8, 0, 0},
	} {
		if m.electrons > 6 && testing.Short() {
			continue
		}
		h := built[operator.Operator](t)(Hubbard(space, c, []float64{1}, m.u, nil))
		sector := charges(space.ParticleNumber().Is(m.electrons), space.TwiceSz().Is(0))
		sector.Symmetries = append(c.Sector(c.Momentum(0, 0)),
			group.Eigenvalue{Generator: rotation, Turn: group.NewTurn(m.rotated, 2)},
			group.Eigenvalue{Generator: reflection, Turn: group.NewTurn(m.reflected, 2)})
		want, r := value[float64](t, id)
		expect(t, r, "E0", lowest(t, h, sector, 1), []float64{want})
	}
}

// Complex hopping between all pairs of orbitals: every sign of the fermion order counts.
func TestHoppingBetweenAllOrbitals(t *testing.T) {
	const n = 8
	space := built[*basis.Space](t)(basis.Uniform(n, basis.Fermion()))
	o := operator.On(space)
	mod := func(a, m int) float64 { return float64((a%m + m) % m) }
	var terms []operator.Operator
	for i := range n {
		for j := range n {
			half := complex((mod(3*i+5*j+i*j, 7)-3)/4, (mod(2*i-3*j, 5)-2)/3) / 2
			hop := o.Create(i).Times(o.Annihilate(j)).Scale(half)
			terms = append(terms, hop, hop.Adjoint())
		}
	}
	type summary struct {
		Low         []float64
		High, Sumsq float64
	}
	want, r := value[summary](t, "C6-free-dense8-n3")
	e := spectrum(t, operator.Sum(terms).NormalOrdered(), charges(space.ParticleNumber().Is(3)))
	square := 0.0
	for _, x := range e {
		square += x * x
	}
	expect(t, r, "lowest three, highest, ΣE²", []float64{e[0], e[1], e[2], e[len(e)-1], square}, append(want.Low, want.High, want.Sumsq))
}
