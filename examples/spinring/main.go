// Spinring solves a ring of spins 1/2,
//
//	H = J Σ_i [ (S⁺_i S⁻_{i+1} + h.c.)/2 + Δ Sᶻ_i Sᶻ_{i+1} ],
//
// at a fixed number of up spins: the lowest levels of each momentum, the gap,
// the static structure factor and the half-ring entropy of the ground state.
// At Δ = 1 it is the model of Heisenberg (Z. Phys. 49, 619, 1928).
//
// The scenario is invented: a compound whose magnetic ions form rings.
// Run it with -h for the flags.
package main

import (
	"context"
	"flag"
	"fmt"
	"math"
	"os"
	"os/signal"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
	"ketloom/operator/model"
	"ketloom/script/progress"
)

// settings are the flags.
type settings struct {
	length     int
	up         int
	coupling   float64
	anisotropy float64
	momentum   int
	levels     int
	seed       uint64
	json       string
}

// ring is the model: its space, cluster and Hamiltonian.
type ring struct {
	space   *basis.Space
	cluster *lattice.Cluster
	h       operator.Operator
}

func main() {
	s := settings{}
	flag.IntVar(&s.length, "length", 16, "number of sites")
	flag.IntVar(&s.up, "up", -1, "number of up spins, -1 for half of the sites")
	flag.Float64Var(&s.coupling, "coupling", 1, "exchange J, positive for antiferromagnetic")
	flag.Float64Var(&s.anisotropy, "anisotropy", 1, "anisotropy Δ of the Sᶻ Sᶻ term")
	flag.IntVar(&s.momentum, "momentum", -1, "momentum index n of k = 2πn/length, -1 for all")
	flag.IntVar(&s.levels, "levels", 3, "levels to compute at each momentum")
	flag.Uint64Var(&s.seed, "seed", 1, "seed of the start vectors")
	flag.StringVar(&s.json, "json", "", "file for the results as JSON")
	flag.Parse()
	if s.up < 0 {
		s.up = s.length / 2
	}

	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	err := study(ctx, s)
	stop()
	if err != nil {
		fmt.Fprintln(os.Stderr, "spinring:", err)
		os.Exit(1)
	}
}

func study(ctx context.Context, s settings) error {
	if err := s.check(); err != nil {
		return err
	}
	r, err := newRing(s)
	if err != nil {
		return err
	}
	fmt.Printf("ring of %d spins 1/2, %d up (Sz = %g), J = %g, anisotropy = %g\n",
		s.length, s.up, float64(2*s.up-s.length)/2, s.coupling, s.anisotropy)
	bar := progress.Terminal(os.Stderr)
	sectors, err := solveMomenta(ctx, s, r, bar)
	bar.Close()
	if err != nil {
		return err
	}
	printLevels(sectors)
	ground := lowest(sectors)
	gap, known := gapAbove(sectors, ground)
	printGap(sectors[ground], gap, known)
	factor, err := structureFactor(ctx, s, r, sectors[ground])
	if err != nil {
		return err
	}
	printStructureFactor(factor)
	entropy, err := halfEntropy(ctx, s, sectors[ground])
	if err != nil {
		return err
	}
	fmt.Printf("\nentropy of sites 0 to %d: %.10f nats\n", s.length/2-1, entropy)
	if s.json != "" {
		return writeJSON(s, sectors, ground, gap, known, factor, entropy)
	}
	return nil
}

// check reports flags that cannot be used.
func (s settings) check() error {
	switch {
	case s.length < 3 || s.length > 64:
		return fmt.Errorf("-length %d: 3 to 64 sites are possible", s.length)
	case s.up > s.length:
		return fmt.Errorf("-up %d: a ring of %d sites has at most %d up spins", s.up, s.length, s.length)
	case s.momentum < -1 || s.momentum >= s.length:
		return fmt.Errorf("-momentum %d: give 0 to %d, or -1 for all", s.momentum, s.length-1)
	case s.levels < 1:
		return fmt.Errorf("-levels %d: at least one level is needed", s.levels)
	case math.IsNaN(s.coupling) || math.IsInf(s.coupling, 0) || math.IsNaN(s.anisotropy) || math.IsInf(s.anisotropy, 0):
		return fmt.Errorf("-coupling %v -anisotropy %v: give finite numbers", s.coupling, s.anisotropy)
	case flag.NArg() > 0:
		return fmt.Errorf("unexpected %q: all settings are flags, see -h", flag.Arg(0))
	}
	return nil
}

func newRing(s settings) (ring, error) {
	var r ring
	var err error
	if r.cluster, err = lattice.Ring(s.length); err != nil {
		return r, err
	}
	if r.space, err = basis.Uniform(s.length, basis.SpinHalf()); err != nil {
		return r, err
	}
	r.h, err = model.XXZ(r.space, r.cluster, []float64{s.coupling}, []float64{s.coupling * s.anisotropy}, nil)
	return r, err
}
