package report

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"
)

// gapNode is the gap at one flux; between neighbouring nodes its ends are straight.
type gapNode struct{ flux, below, above float64 }

func (n gapNode) width() float64 { return n.above - n.below }

// findGap fills gap: at each flux, and for followed levels also where two lines
// cross between fluxes.
func (d *flow) findGap() error {
	if !d.ShadeGap {
		return nil
	}
	for i, flux := range d.Flux {
		n := d.gapOfFlows(i, 0)
		if d.sorted != nil {
			n = d.gapOfLevels(i)
		}
		n.flux = flux
		if !finite(n.below) || !finite(n.above) {
			return fmt.Errorf("%w: no gap to shade at flux %v; give levels inside and outside the manifold at each flux", ErrData, flux)
		}
		if i > 0 && d.sorted == nil {
			for _, t := range d.crossings(i - 1) {
				cross := d.gapOfFlows(i-1, t)
				cross.flux = mix(d.Flux[i-1], flux, t)
				d.gap = append(d.gap, cross)
			}
		}
		d.gap = append(d.gap, n)
	}
	return nil
}

func (d *flow) gapOfLevels(i int) gapNode {
	levels := d.sorted[i]
	if d.Manifold == 0 || d.Manifold == len(levels) {
		return gapNode{below: math.Inf(-1), above: math.Inf(1)}
	}
	return gapNode{below: levels[d.Manifold-1], above: levels[d.Manifold]}
}

// gapOfFlows is the gap at the fraction t of the way from flux i to the next.
func (d *flow) gapOfFlows(i int, t float64) gapNode {
	n := gapNode{below: math.Inf(-1), above: math.Inf(1)}
	for _, l := range d.Flows {
		v := l.Energies[i]
		if t > 0 {
			v = mix(v, l.Energies[i+1], t)
		}
		if l.Manifold {
			n.below = math.Max(n.below, v)
		} else {
			n.above = math.Min(n.above, v)
		}
	}
	return n
}

// mix is the value at the fraction t of the way from u to v.
func mix(u, v, t float64) float64 { return u + t*(v-u) }

// crossings returns, in ascending order, where between flux i and the next two
// lines of the manifold cross, or two others.
func (d *flow) crossings(i int) []float64 {
	var at []float64
	for a, p := range d.Flows {
		for _, q := range d.Flows[:a] {
			if p.Manifold == q.Manifold {
				if t, ok := zero(p.Energies[i]-q.Energies[i], p.Energies[i+1]-q.Energies[i+1]); ok {
					at = append(at, t)
				}
			}
		}
	}
	slices.Sort(at)
	return slices.Compact(at)
}

// zero is where a straight line from u at 0 to v at 1 changes its sign.
func zero(u, v float64) (t float64, ok bool) {
	if u < 0 && v > 0 || u > 0 && v < 0 {
		return u / (u - v), true
	}
	return 0, false
}

// shade fills the gap where it is open, each stretch as one region.
func (d *flow) shade(p *panel) {
	var lower, upper []vg.Point
	place := func(n gapNode) {
		lower = append(lower, at(p.x.at(n.flux), p.y.at(n.below)))
		upper = append(upper, at(p.x.at(n.flux), p.y.at(n.above)))
	}
	flush := func() {
		slices.Reverse(upper)
		if region := p.cutArea(append(lower, upper...)); len(region) > 2 {
			p.area(gapTint, region...)
		}
		lower, upper = nil, nil
	}
	for i, n := range d.gap {
		if i > 0 {
			before := d.gap[i-1]
			if t, ok := zero(before.width(), n.width()); ok {
				place(gapNode{mix(before.flux, n.flux, t), mix(before.below, n.below, t), mix(before.above, n.above, t)})
			}
		}
		if n.width() >= 0 {
			place(n)
		} else {
			flush()
		}
	}
	flush()
}
