package main

import (
	"context"
	"errors"
	"fmt"
	"sort"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/lanczos/label"
	"ketloom/operator/matrix"
	"ketloom/script/progress"
)

// sector is one row of one representation.
type sector struct {
	twiceSz      int
	momentum     string // k/2π along a1 and a2
	name         string // point of the Brillouin zone and representation
	multiplicity int    // dimension of the whole representation, and both signs of S_z
	spec         basis.Sector
	dimension    int64

	basis  *basis.Basis
	result *lanczos.Result
	twiceS []int // of each level; nil where S is no good number
}

// level is one level of one sector.
type level struct {
	sector, index int
	energy        float64
}

// solve finds the lowest levels of all sectors, the smallest first. Sectors without
// states are left out.
func solve(ctx context.Context, s settings, m *magnet, sectors []*sector, bar *progress.Display) error {
	order := make([]int, len(sectors))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(a, b int) bool { return sectors[order[a]].dimension < sectors[order[b]].dimension })
	for n, i := range order {
		bar.Report("sectors", int64(n), int64(len(order)), 0)
		if sectors[i].dimension == 0 {
			continue
		}
		if err := sectors[i].solve(ctx, s, m); err != nil {
			return fmt.Errorf("sector %s at %s: %w", sectors[i].name, sectors[i].momentum, err)
		}
	}
	return nil
}

func (k *sector) solve(ctx context.Context, s settings, m *magnet) error {
	var err error
	if k.basis, err = basis.New(ctx, m.space, k.spec, nil); err != nil {
		return err
	}
	if int64(k.basis.Len()) != k.dimension {
		return fmt.Errorf("%d states were enumerated, Burnside's formula counts %d", k.basis.Len(), k.dimension)
	}
	h, err := matrix.New(ctx, m.h, k.basis, nil)
	if err != nil {
		return err
	}
	wanted := min(s.levels, k.basis.Len())
	k.result, err = lanczos.Lowest(ctx, h, wanted, &lanczos.Options{Seed: s.seed})
	if err != nil || !m.rotations {
		return err
	}
	return k.findSpins(ctx)
}

// findSpins labels the levels with their total spin, multiplet by multiplet.
func (k *sector) findSpins(ctx context.Context) error {
	var energies []float64
	var vectors [][]complex128
	for i, v := range k.result.Vectors {
		energies = append(energies, k.result.Levels[i].Energy)
		vectors = append(vectors, v.AsComplex())
	}
	multiplets, err := label.Multiplets(energies, 1e-8)
	if err != nil {
		return err
	}
	for _, r := range multiplets {
		spins, err := label.Spin(ctx, k.basis, vectors[r[0]:r[1]+1], nil)
		if err != nil && r[1]+1 < len(vectors) {
			return err
		}
		twice := spins.Twice
		for len(twice) < r[1]+1-r[0] { // a multiplet that the list cuts off
			twice = append(twice, -1)
		}
		k.twiceS = append(k.twiceS, twice...)
	}
	return nil
}

// gathered returns the levels of all sectors, the lowest first.
func gathered(sectors []*sector) []level {
	var all []level
	for i, k := range sectors {
		if k.result == nil {
			continue
		}
		for j, l := range k.result.Levels {
			all = append(all, level{i, j, l.Energy})
		}
	}
	sort.SliceStable(all, func(a, b int) bool { return all[a].energy < all[b].energy-1e-10 })
	return all
}

// spin writes the total spin of a level.
func (k *sector) spin(j int) string {
	if j >= len(k.twiceS) || k.twiceS[j] < 0 {
		return "-"
	}
	if k.twiceS[j]%2 == 0 {
		return fmt.Sprint(k.twiceS[j] / 2)
	}
	return fmt.Sprintf("%d/2", k.twiceS[j])
}

// known is the energy up to which no level is missing: the lowest of the highest levels
// of sectors that have more than those.
func known(sectors []*sector) (float64, error) {
	lowest, found := 0.0, false
	for _, k := range sectors {
		if k.result == nil || len(k.result.Levels) == k.basis.Len() {
			continue
		}
		if top := k.result.Levels[len(k.result.Levels)-1].Energy; !found || top < lowest {
			lowest, found = top, true
		}
	}
	if !found {
		return 0, errors.New("every level of every sector is known")
	}
	return lowest, nil
}

// mostPrinted is the number of levels in the table that is printed.
const mostPrinted = 16

func printLevels(m *magnet, sectors []*sector, levels []level) {
	total := int64(0)
	for _, k := range sectors {
		total += k.dimension * int64(k.multiplicity)
	}
	fmt.Printf("%d sectors, %d states with their multiplicities\n", len(sectors), total)
	fmt.Println("\n      energy (J)        E - E0     bound   mult  S     sector       k/2π          2Sz")
	for n, l := range levels {
		if n == mostPrinted {
			break
		}
		k := sectors[l.sector]
		fmt.Printf("%16.10f  %12.8f  %8.1e  %4d  %-4s  %-11s  %-12s  %3d\n",
			l.energy, max(0, l.energy-levels[0].energy), k.result.Levels[l.index].Bound, k.multiplicity, k.spin(l.index), k.name, k.momentum, k.twiceSz)
	}
	if top, err := known(sectors); err == nil {
		fmt.Printf("\nno level is missing up to %.10f\n", top)
	} else {
		fmt.Println("\nno level is missing:", err)
	}
}
