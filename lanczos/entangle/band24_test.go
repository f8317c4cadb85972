package entangle_test

import (
	"context"
	"math"
	"testing"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/lanczos/entangle"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

// Eight fermions in the checkerboard band on 6×4 cells: energies of the three ground
// states, the gap above them, and the particle cut of their equal mixture. Numbers from
// an independent NumPy program, computed once; the count 1,088 by the closed formula of
// Regnault and Bernevig (Phys. Rev. X 1, 021014, 2011).
func TestParticleCutOfThe24OrbitalBand(t *testing.T) {
	if testing.Short() {
		t.Skip("three sectors of thirty thousand states")
	}
	ctx := context.Background()
	p, err := model.Checkerboard(1, model.NeupertSecond, 0, 1).Projected(6, 4, nil)
	if err != nil {
		t.Fatal(err)
	}
	var states []entangle.State
	for kx, want := range map[int]float64{0: 0.28852579414392, 2: 0.29080574042781, 4: 0.29080574042781} {
		b, err := basis.New(ctx, p.Space, p.Sector(8, kx, 0), nil)
		if err != nil {
			t.Fatal(err)
		}
		m, err := matrix.New(ctx, p.Operator, b, nil)
		if err != nil {
			t.Fatal(err)
		}
		result, err := lanczos.Lowest(ctx, m, 2, nil)
		if err != nil {
			t.Fatal(err)
		}
		if e := result.Levels[0].Energy; math.Abs(e-want) > 1e-7 {
			t.Errorf("(%d,0): energy %.12f, want %.12f", kx, e, want)
		}
		if e := result.Levels[1].Energy; kx == 0 && math.Abs(e-0.38448609750686) > 1e-7 {
			t.Errorf("fourth level %.12f, want 0.384486097507", e)
		}
		s, err := entangle.ComplexState(b, result.Vectors[0].AsComplex())
		if err != nil {
			t.Fatal(err)
		}
		states = append(states, s)
	}
	cut, err := entangle.ParticleCut(ctx, states, 3, nil)
	if err != nil {
		t.Fatal(err)
	}
	gap := cut.LargestGap()
	if n := len(cut.Levels()); n != 2024 || gap.Below != 1088 {
		t.Errorf("%d levels, %d below the gap, want 2024 and 1088", n, gap.Below)
	}
	if math.Abs(gap.XiBelow-7.8154396335604) > 1e-5 || math.Abs(gap.XiAbove-10.91363525155) > 1e-5 {
		t.Errorf("gap from %.8f to %.8f, want 7.81543963 to 10.91363525", gap.XiBelow, gap.XiAbove)
	}
}
