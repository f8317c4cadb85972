package model

import (
	"fmt"
	"math"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// Options are the boundary conditions of a model on a periodic cluster; nil
// means none of them.
type Options struct {
	// Twist is the boundary twist in turns through the two periods: 0.5 is
	// antiperiodic. Default: none. No effect along an open direction.
	Twist [2]float64
	// Gauge says where the twist sits. Default: lattice.Uniform, which keeps the
	// translations as symmetries.
	Gauge lattice.Gauge
}

// Phases returns the phase that the twist gives to c†_To c_From on each bond,
// which must be made by the cluster; nil if there is no twist. See
// lattice.Cluster.BondPhase.
func Phases(c *lattice.Cluster, bonds []lattice.Bond, opts *Options) []complex128 {
	if opts == nil || opts.Twist == [2]float64{} {
		return nil
	}
	phases := make([]complex128, len(bonds))
	for i, b := range bonds {
		phases[i] = c.BondPhase(b, opts.Twist, opts.Gauge)
	}
	return phases
}

// shellBonds is what a model on a cluster sums over: the bonds of a shell with
// their phases.
type shellBonds struct {
	bonds  []lattice.Bond
	phases []complex128
}

// shells returns the bonds of the shells 1 … count; a shell for which wanted
// is false is left empty, so that a coupling of zero asks nothing of the
// cluster.
func shells(space *basis.Space, c *lattice.Cluster, count int, wanted func(int) bool, opts *Options) ([]shellBonds, error) {
	if space == nil || c == nil {
		return nil, fmt.Errorf("model: no space or no cluster; make them with basis.Uniform and lattice.Torus")
	}
	if space.Sites() != c.Sites() {
		return nil, fmt.Errorf("model: a space of %d sites for a cluster of %d (%v); make the space with basis.Uniform(cluster.Sites(), …)", space.Sites(), c.Sites(), c)
	}
	list := make([]shellBonds, count)
	for i := range list {
		if !wanted(i) {
			continue
		}
		bonds, err := c.Bonds(i + 1)
		if err != nil {
			return nil, fmt.Errorf("model: coupling %d of %d: %w", i+1, count, err)
		}
		list[i] = shellBonds{bonds, Phases(c, bonds, opts)}
	}
	return list, nil
}

// checkPhases refuses phases that are not one a bond.
func checkPhases(bonds []lattice.Bond, phases []complex128) error {
	if phases != nil && len(phases) != len(bonds) {
		return fmt.Errorf("model: %d phases for %d bonds; give one a bond, or none", len(phases), len(bonds))
	}
	return nil
}

// phaseOf returns the phase of bond i, one if there are none.
func phaseOf(phases []complex128, i int) complex128 {
	if phases == nil {
		return 1
	}
	return phases[i]
}

// checkNumbers refuses couplings that are not finite.
func checkNumbers(what string, list ...float64) error {
	for _, x := range list {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return fmt.Errorf("model: %s is %v; give a finite number", what, x)
		}
	}
	return nil
}

// done returns the sum of the terms, or their error.
func done(space *basis.Space, terms []operator.Operator) (operator.Operator, error) {
	sum := operator.Sum(append([]operator.Operator{operator.On(space).Zero()}, terms...))
	return sum, sum.Err()
}
