package main

import (
	"context"
	"errors"
	"fmt"
	"math"
	"time"

	"ketloom/lanczos"
	"ketloom/operator/model"
	"ketloom/script/progress"
)

// flowPoint is the lower end of the spectrum of one sector at one flux.
type flowPoint struct {
	flux     float64
	kx, ky   int
	manifold int // how many of the energies belong to the manifold
	energies []float64
}

// threadFlux computes the levels of the manifold and the next one in its sectors
// (or in all) while the flux grows from 0 to one quantum. Each sector begins with
// the vectors of the step before.
func threadFlux(ctx context.Context, s settings, bands model.TightBinding, sectors []sector, m manifold, bar *progress.Display) ([]flowPoint, error) {
	var followed []int
	for i := range sectors {
		if s.everywhere || m.counts[i] > 0 {
			followed = append(followed, i)
		}
	}
	vectors := make([][]lanczos.Vector, len(sectors))
	for _, i := range followed {
		vectors[i] = sectors[i].result.Vectors
	}
	var points []flowPoint
	begun, total := time.Now(), int64((s.steps+1)*len(followed))
	for step := 0; step <= s.steps; step++ {
		flux := float64(step) / float64(s.steps)
		p, err := project(s, bands, flux)
		if err != nil {
			return nil, err
		}
		for n, i := range followed {
			sec := sectors[i]
			sec.h = p.Operator
			levels := m.counts[i] + 1
			if levels > len(vectors[i]) {
				levels = len(vectors[i])
			}
			result, err := solve(ctx, sec, levels, &lanczos.Options{
				Seed: s.seed, Start: vectors[i][:levels],
				Tolerance: 1e-8, MissChance: 1e-3, // energies are good to 1e-14 all the same
			})
			if err != nil {
				return nil, fmt.Errorf("sector (%d,%d) at flux %g: %w", sec.kx, sec.ky, flux, err)
			}
			vectors[i] = result.Vectors
			point := flowPoint{flux: flux, kx: sec.kx, ky: sec.ky, manifold: m.counts[i]}
			for _, l := range result.Levels {
				point.energies = append(point.energies, l.Energy)
			}
			points = append(points, point)
			done := int64(step*len(followed) + n + 1)
			bar.Report("flux", done, total, float64(done)/time.Since(begun).Seconds())
		}
	}
	return points, nil
}

// closest returns the smallest distance, over all fluxes, from the manifold to
// the rest of the levels followed, and whether they stay apart.
func closest(points []flowPoint) float64 {
	top, rest := map[float64]float64{}, map[float64]float64{}
	for _, p := range points {
		for j, e := range p.energies {
			if j < p.manifold {
				if old, known := top[p.flux]; !known || e > old {
					top[p.flux] = e
				}
			} else if old, known := rest[p.flux]; !known || e < old {
				rest[p.flux] = e
			}
		}
	}
	distance := math.Inf(1)
	for flux, e := range top {
		if above, known := rest[flux]; known {
			distance = math.Min(distance, above-e)
		}
	}
	return distance
}

// moved returns the sector that a sector of flux 0 has the spectrum of at one
// flux quantum: the momentum of every particle has grown by one step.
func (s settings) moved(kx, ky int) (int, int) {
	if s.direction == "y" {
		return kx, (ky + s.particles) % s.ly
	}
	return (kx + s.particles) % s.lx, ky
}

// printFlow states how the levels flow.
func printFlow(s settings, points []flowPoint) {
	fmt.Printf("\nflux through %s, levels of the manifold in %d steps to one quantum:\n", s.direction, s.steps)
	fmt.Println("  kx  ky   flux   energies (V), next level in brackets")
	for _, p := range points {
		if p.manifold == 0 {
			continue
		}
		fmt.Printf("%4d%4d  %5.3f ", p.kx, p.ky, p.flux)
		for j, e := range p.energies {
			if j < p.manifold {
				fmt.Printf("  %12.9f", e)
			} else {
				fmt.Printf("  [%12.9f]", e)
			}
		}
		fmt.Println()
	}
	fmt.Println("\nafter one flux quantum each sector has the levels of another one at flux 0:")
	worst := 0.0
	for _, p := range points {
		if p.flux != 1 || p.manifold == 0 {
			continue
		}
		kx, ky := s.moved(p.kx, p.ky)
		off, err := compareAtStart(points, p, kx, ky)
		if err != nil {
			fmt.Printf("  (%d,%d) -> (%d,%d): %v\n", p.kx, p.ky, kx, ky, err)
			worst = math.Inf(1)
			continue
		}
		worst = math.Max(worst, off)
		fmt.Printf("  (%d,%d) -> (%d,%d)\n", p.kx, p.ky, kx, ky)
	}
	distance := closest(points)
	if worst < 1e-7 && distance > 0 {
		fmt.Printf("the manifold flows into itself and stays apart: yes (smallest distance to the rest %.6f V)\n", distance)
	} else {
		fmt.Printf("the manifold flows into itself and stays apart: no (levels differ by %.2g V, smallest distance to the rest %.6f V)\n", worst, distance)
	}
}

// compareAtStart returns the largest difference between the manifold's energies
// of a point and those of sector (kx, ky) at flux 0.
func compareAtStart(points []flowPoint, end flowPoint, kx, ky int) (float64, error) {
	for _, p := range points {
		if p.flux != 0 || p.kx != kx || p.ky != ky {
			continue
		}
		if p.manifold != end.manifold {
			return 0, fmt.Errorf("%d levels of the manifold become %d", end.manifold, p.manifold)
		}
		off := 0.0
		for j := 0; j < end.manifold; j++ {
			off = math.Max(off, math.Abs(p.energies[j]-end.energies[j]))
		}
		return off, nil
	}
	return 0, errors.New("that sector holds no level of the manifold")
}
