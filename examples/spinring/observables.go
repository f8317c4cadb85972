package main

import (
	"context"
	"encoding/json"
	"fmt"
	"math"
	"os"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/lanczos/entangle"
	"ketloom/operator"
	"ketloom/operator/matrix"
)

// expectation returns the real part of ⟨ψ|A|ψ⟩ for an operator that keeps the
// sector.
func expectation(ctx context.Context, a operator.Operator, b *basis.Basis, psi lanczos.Vector) (float64, error) {
	m, err := matrix.New(ctx, a, b, nil)
	if err != nil {
		return 0, err
	}
	x := psi.AsComplex()
	y := make([]complex128, len(x))
	m.ApplyComplex(y, x)
	sum := 0.0
	for i := range x {
		sum += real(x[i])*real(y[i]) + imag(x[i])*imag(y[i])
	}
	return sum, nil
}

// structureFactor returns S(q) = Σ_r exp(iqr) C(r) for q = 2πn/L, from the
// correlations C(r) = (1/L) Σ_i ⟨Sᶻ_i Sᶻ_{i+r}⟩ of the ground state.
func structureFactor(ctx context.Context, s settings, r ring, ground sector) ([]float64, error) {
	o := operator.On(r.space)
	correlation := make([]float64, s.length)
	for d := 0; d <= s.length/2; d++ {
		var pairs []operator.Operator
		for i := 0; i < s.length; i++ {
			pairs = append(pairs, o.Sz(i).Times(o.Sz((i+d)%s.length)))
		}
		sum := operator.Sum(pairs).Scale(complex(1/float64(s.length), 0))
		c, err := expectation(ctx, sum, ground.basis, ground.result.Vectors[0])
		if err != nil {
			return nil, err
		}
		correlation[d] = c
		correlation[(s.length-d)%s.length] = c
	}
	factor := make([]float64, s.length)
	for n := range factor {
		for d, c := range correlation {
			factor[n] += math.Cos(2*math.Pi*float64(n*d%s.length)/float64(s.length)) * c
		}
	}
	return factor, nil
}

func printStructureFactor(factor []float64) {
	fmt.Println("\n   n   structure factor Szz(2πn/L)")
	for n := 0; n <= len(factor)/2; n++ {
		fmt.Printf("%4d   %.10f\n", n, factor[n])
	}
}

// halfEntropy returns the von Neumann entropy of the first half of the ring.
func halfEntropy(ctx context.Context, s settings, ground sector) (float64, error) {
	state, err := entangle.ComplexState(ground.basis, ground.result.Vectors[0].AsComplex())
	if err != nil {
		return 0, err
	}
	var half []int
	for i := 0; i < s.length/2; i++ {
		half = append(half, i)
	}
	cut, err := entangle.SpaceCut(ctx, []entangle.State{state}, half, nil)
	if err != nil {
		return 0, err
	}
	return cut.Entropy(), nil
}

// output is the JSON form of the results.
type output struct {
	Length     int            `json:"length"`
	Up         int            `json:"up"`
	Coupling   float64        `json:"coupling"`
	Anisotropy float64        `json:"anisotropy"`
	Sectors    []outputSector `json:"sectors"`
	Ground     outputGround   `json:"ground"`
	Gap        *float64       `json:"gap"`
	Factor     []float64      `json:"structure_factor"`
	Entropy    float64        `json:"half_entropy"`
}

type outputSector struct {
	Momentum  int           `json:"momentum"`
	Dimension int           `json:"dimension"`
	Levels    []outputLevel `json:"levels"`
}

type outputLevel struct {
	Energy   float64 `json:"energy"`
	Residual float64 `json:"residual"`
	Bound    float64 `json:"bound"`
}

type outputGround struct {
	Energy   float64 `json:"energy"`
	Momentum int     `json:"momentum"`
}

func writeJSON(s settings, sectors []sector, ground int, gap float64, known bool, factor []float64, entropy float64) error {
	out := output{Length: s.length, Up: s.up, Coupling: s.coupling, Anisotropy: s.anisotropy, Factor: factor, Entropy: entropy}
	if known {
		out.Gap = &gap
	}
	out.Ground = outputGround{sectors[ground].result.Levels[0].Energy, sectors[ground].momentum}
	for _, sec := range sectors {
		row := outputSector{Momentum: sec.momentum, Dimension: sec.basis.Len()}
		for _, l := range sec.result.Levels {
			row.Levels = append(row.Levels, outputLevel{l.Energy, l.Residual, l.Bound})
		}
		out.Sectors = append(out.Sectors, row)
	}
	data, err := json.MarshalIndent(out, "", " ")
	if err != nil {
		return err
	}
	return os.WriteFile(s.json, append(data, '\n'), 0o666)
}
