package lattice

import "fmt"

// LargestPeriod bounds the components of period vectors and lengths.
const LargestPeriod = 1 << 16

// periods are two period vectors in units of a1, a2 and what is needed to find
// the number of a cell: the Hermite normal form (m, 0), (s, h).
type periods struct {
	t1, t2  [2]int
	det     int
	m, s, h int
}

// newPeriods checks the period vectors and brings them to normal form.
func newPeriods(t1, t2 [2]int) (periods, error) {
	for _, v := range []int{t1[0], t1[1], t2[0], t2[1]} {
		if v > LargestPeriod || v < -LargestPeriod {
			return periods{}, fmt.Errorf("lattice: the period vectors %v and %v; components up to %d are possible", t1, t2, LargestPeriod)
		}
	}
	p := periods{t1: t1, t2: t2, det: t1[0]*t2[1] - t1[1]*t2[0]}
	if p.det == 0 {
		return periods{}, fmt.Errorf("lattice: the period vectors %v and %v span no area; give two independent vectors", t1, t2)
	}
	h, u, v := bezout(t1[1], t2[1])
	p.h, p.m = h, max(p.det, -p.det)/h
	p.s = modulo(u*t1[0]+v*t2[0], p.m)
	return p, nil
}

// bezout returns the greatest common divisor g > 0 and u·a + v·b = g.
func bezout(a, b int) (g, u, v int) {
	if b == 0 {
		if a < 0 {
			return -a, -1, 0
		}
		return a, 1, 0
	}
	g, u, v = bezout(b, a%b)
	return g, v, u - a/b*v
}

// floorDiv returns ⌊a/b⌋ for b ≠ 0.
func floorDiv(a, b int) int {
	q := a / b
	if a%b != 0 && (a < 0) != (b < 0) {
		q--
	}
	return q
}

// modulo returns a - n⌊a/n⌋ for n > 0.
func modulo(a, n int) int { return a - n*floorDiv(a, n) }

// number returns the number of the cell, 0 … |det|-1.
func (p periods) number(cell [2]int) int {
	q := floorDiv(cell[1], p.h)
	return modulo(cell[0]-q*p.s, p.m) + p.m*(cell[1]-q*p.h)
}

// turns returns how many periods the cell lies away from the equivalent cell
// in the parallelogram of t1 and t2.
func (p periods) turns(cell [2]int) (w1, w2 int) {
	return floorDiv(cell[0]*p.t2[1]-cell[1]*p.t2[0], p.det), floorDiv(p.t1[0]*cell[1]-p.t1[1]*cell[0], p.det)
}

// home returns the equivalent cell in the parallelogram.
func (p periods) home(cell [2]int) [2]int {
	w1, w2 := p.turns(cell)
	return [2]int{cell[0] - w1*p.t1[0] - w2*p.t2[0], cell[1] - w1*p.t1[1] - w2*p.t2[1]}
}
