package main

import (
	"context"
	"errors"
	"fmt"
	"math"
	"sort"
	"time"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
	"ketloom/script/progress"
)

// sector is a momentum sector with its lowest levels.
type sector struct {
	kx, ky int
	basis  *basis.Basis
	h      operator.Operator
	result *lanczos.Result
}

// project returns the interaction in the lowest band, at a flux in quanta.
func project(s settings, bands model.TightBinding, flux float64) (*model.Projection, error) {
	twist := [2]float64{flux, 0}
	if s.direction == "y" {
		twist = [2]float64{0, flux}
	}
	return bands.Projected(s.lx, s.ly, &model.ProjectOptions{Twist: twist, Dispersion: s.dispersion})
}

// solveSectors computes the lowest levels of every momentum sector that holds
// states.
func solveSectors(ctx context.Context, s settings, bands model.TightBinding, bar *progress.Display) ([]sector, error) {
	p, err := project(s, bands, 0)
	if err != nil {
		return nil, err
	}
	sectors, err := makeBases(ctx, s, p)
	if err != nil {
		return nil, err
	}
	if err := printPlan(sectors); err != nil {
		return nil, err
	}
	begun := time.Now()
	for i := range sectors {
		sectors[i].result, err = solve(ctx, sectors[i], s.levels, &lanczos.Options{Seed: s.seed})
		if err != nil {
			return nil, fmt.Errorf("sector (%d,%d): %w", sectors[i].kx, sectors[i].ky, err)
		}
		bar.Report("sectors", int64(i+1), int64(len(sectors)), float64(i+1)/time.Since(begun).Seconds())
	}
	return sectors, reachGap(ctx, s, sectors)
}

// reachGap computes more levels in sectors whose levels all lie below the largest
// gap of the levels found so far, until every sector reaches beyond it.
func reachGap(ctx context.Context, s settings, sectors []sector) error {
	for again := true; again; {
		again = false
		edge := lowerEdge(sectors)
		for i, sec := range sectors {
			found := sec.result.Levels
			if len(found) == sec.basis.Len() || found[len(found)-1].Energy > edge {
				continue
			}
			result, err := solve(ctx, sec, 2*len(found), &lanczos.Options{Seed: s.seed, Start: sec.result.Vectors})
			if err != nil {
				return fmt.Errorf("sector (%d,%d): %w", sec.kx, sec.ky, err)
			}
			sectors[i].result = result
			again = true
		}
	}
	return nil
}

// lowerEdge returns the energy below the largest gap between neighbouring levels
// of all sectors together.
func lowerEdge(sectors []sector) float64 {
	var all []float64
	for _, sec := range sectors {
		for _, l := range sec.result.Levels {
			all = append(all, l.Energy)
		}
	}
	sort.Float64s(all)
	edge, gap := math.Inf(-1), 0.0
	for i := 0; i+1 < len(all); i++ {
		if d := all[i+1] - all[i]; d > gap {
			edge, gap = all[i], d
		}
	}
	return edge
}

// makeBases numbers the states of every sector; sectors without states are left
// out.
func makeBases(ctx context.Context, s settings, p *model.Projection) ([]sector, error) {
	var sectors []sector
	for kx := 0; kx < s.lx; kx++ {
		for ky := 0; ky < s.ly; ky++ {
			b, err := basis.New(ctx, p.Space, p.Sector(s.particles, kx, ky), nil)
			if errors.Is(err, basis.ErrEmpty) {
				continue
			}
			if err != nil {
				return nil, err
			}
			sectors = append(sectors, sector{kx: kx, ky: ky, basis: b, h: p.Operator})
		}
	}
	return sectors, nil
}

// printPlan says what is coming: sizes and memory, from the largest sector.
func printPlan(sectors []sector) error {
	largest, total := 0, 0
	for i, sec := range sectors {
		total += sec.basis.Len()
		if sec.basis.Len() > sectors[largest].basis.Len() {
			largest = i
		}
	}
	plan, err := matrix.Estimate(sectors[largest].h, sectors[largest].basis, nil)
	if err != nil {
		return err
	}
	fmt.Printf("plan       %d sectors, %d states in all; largest: %v\n", len(sectors), total, plan)
	return nil
}

// solve returns the lowest levels of a sector, with vectors.
func solve(ctx context.Context, sec sector, levels int, opts *lanczos.Options) (*lanczos.Result, error) {
	m, err := matrix.New(ctx, sec.h, sec.basis, nil)
	if err != nil {
		return nil, err
	}
	if levels > m.Dim() {
		levels = m.Dim()
	}
	return lanczos.Lowest(ctx, m, levels, opts)
}

// printSectors prints the table of levels.
func printSectors(sectors []sector) {
	fmt.Println()
	fmt.Println("  kx  ky  dimension    energy (V)       residual    bound")
	for _, sec := range sectors {
		for j, l := range sec.result.Levels {
			if j == 0 {
				fmt.Printf("%4d%4d%11d", sec.kx, sec.ky, sec.basis.Len())
			} else {
				fmt.Printf("%19s", "")
			}
			fmt.Printf("  %14.10f   %9.1e  %9.1e\n", l.Energy, l.Residual, l.Bound)
		}
	}
	complete := 0
	for _, sec := range sectors {
		if sec.result.Complete {
			complete++
		}
	}
	fmt.Printf("\nsearched for missed levels: %d of %d sectors complete\n", complete, len(sectors))
}
