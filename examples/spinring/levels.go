package main

import (
	"context"
	"errors"
	"fmt"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/operator/matrix"
	"ketloom/script/progress"
)

// sector is a momentum with its lowest levels.
type sector struct {
	momentum int
	basis    *basis.Basis
	result   *lanczos.Result
}

// solveMomenta computes the lowest levels of the momentum asked for, or of all
// that hold states.
func solveMomenta(ctx context.Context, s settings, r ring, bar *progress.Display) ([]sector, error) {
	var sectors []sector
	for k := 0; k < s.length; k++ {
		if s.momentum >= 0 && s.momentum != k {
			continue
		}
		b, err := basis.New(ctx, r.space, basis.Sector{
			Charges:    []basis.ChargeValue{r.space.TwiceSz().Is(2*s.up - s.length)},
			Symmetries: r.cluster.Sector(r.cluster.Momentum(k, 0)),
		}, nil)
		if errors.Is(err, basis.ErrEmpty) && s.momentum < 0 {
			continue
		}
		if err != nil {
			return nil, err
		}
		m, err := matrix.New(ctx, r.h, b, nil)
		if err != nil {
			return nil, err
		}
		levels := s.levels
		if levels > b.Len() {
			levels = b.Len()
		}
		result, err := lanczos.Lowest(ctx, m, levels, &lanczos.Options{Seed: s.seed})
		if err != nil {
			return nil, fmt.Errorf("momentum %d: %w", k, err)
		}
		sectors = append(sectors, sector{momentum: k, basis: b, result: result})
		bar.Report("momenta", int64(k+1), int64(s.length), 0)
	}
	return sectors, nil
}

func printLevels(sectors []sector) {
	fmt.Println()
	fmt.Println("   n  dimension         energy     residual    bound")
	for _, sec := range sectors {
		for j, l := range sec.result.Levels {
			if j == 0 {
				fmt.Printf("%4d%11d", sec.momentum, sec.basis.Len())
			} else {
				fmt.Printf("%15s", "")
			}
			fmt.Printf("  %16.10f    %9.1e  %9.1e\n", l.Energy, l.Residual, l.Bound)
		}
	}
}

// lowest returns the sector that holds the ground state, the one with the
// smaller momentum index where several do.
func lowest(sectors []sector) int {
	best := 0
	for i, sec := range sectors {
		if sec.result.Levels[0].Energy < sectors[best].result.Levels[0].Energy-1e-9 {
			best = i
		}
	}
	return best
}

// gapAbove returns the distance from the ground state to the next level of
// another energy; known is false where too few levels were computed.
func gapAbove(sectors []sector, ground int) (gap float64, known bool) {
	e0 := sectors[ground].result.Levels[0].Energy
	for _, sec := range sectors {
		for _, l := range sec.result.Levels {
			d := l.Energy - e0
			if d > 1e-9 && (!known || d < gap) {
				gap, known = d, true
			}
		}
	}
	return gap, known
}

func printGap(ground sector, gap float64, known bool) {
	fmt.Printf("\nground state: energy %.10f at momentum index %d\n", ground.result.Levels[0].Energy, ground.momentum)
	if known {
		fmt.Printf("gap to the next energy among the levels above: %.10f\n", gap)
	} else {
		fmt.Println("gap: not known, ask for more -levels")
	}
}
