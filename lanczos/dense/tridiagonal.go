package dense

import (
	"fmt"
	"math"
)

const epsilon = 0x1p-52

// sweepsPerEigenvalue limits the QL iteration; two are usual.
const sweepsPerEigenvalue = 50

// diagonalise replaces the diagonal d of a real symmetric tridiagonal matrix with
// the off-diagonal e by its eigenvalues, in no order, and destroys e. With z not nil,
// an n×n matrix in rows, it multiplies z from the right by the eigenvectors: column
// j of z then belongs to d[j].
//
// It is the implicit QL method. The rotations of many sweeps are gathered and then
// applied to one group of rows after another while these rows are in cache.
func diagonalise(d, e, z []float64) error {
	n := len(d)
	pending := &rotations{limit: 24 * n, wanted: z != nil}
	size := 0.0
	for i := range d {
		size = max(size, math.Abs(d[i]))
	}
	for i := range n - 1 {
		size = max(size, math.Abs(e[i]))
	}
	for first := range n {
		for sweep := 0; ; sweep++ {
			last := blockEnd(d, e, first, size)
			if last == first {
				break
			}
			if sweep == sweepsPerEigenvalue {
				return fmt.Errorf("dense: eigenvalues of a tridiagonal matrix of dimension %d: %w", n, ErrIteration)
			}
			pending.sweep(d, e, first, last)
			if pending.full() {
				pending.apply(z, n)
			}
		}
	}
	pending.apply(z, n)
	return nil
}

// blockEnd returns the end of the unreduced block that begins at first.
func blockEnd(d, e []float64, first int, size float64) int {
	for m := first; m < len(d)-1; m++ {
		if x := math.Abs(e[m]); x <= epsilon*(math.Abs(d[m])+math.Abs(d[m+1])) || x <= epsilon*size {
			return m
		}
	}
	return len(d) - 1
}

// rotations are plane rotations that wait to be applied to columns.
type rotations struct {
	limit  int
	wanted bool // false: none are gathered
	cos    []float64
	sin    []float64
	chains []chain
}

// chain is a run of rotations in cos[from:to] of the column pairs
// (start, start+1), (start-1, start), …
type chain struct{ start, from, to int }

func (r *rotations) full() bool { return len(r.cos) >= r.limit }

// sweep does one implicit QL step with Wilkinson's shift on the block [first,last].
func (r *rotations) sweep(d, e []float64, first, last int) {
	from := len(r.cos)
	g := (d[first+1] - d[first]) / (2 * e[first])
	h := math.Hypot(g, 1)
	g = d[last] - d[first] + e[first]/(g+math.Copysign(h, g))
	s, c, p := 1.0, 1.0, 0.0
	i := last - 1
	for ; i >= first; i-- {
		f, b := s*e[i], c*e[i]
		h = math.Hypot(f, g)
		if i+1 < last {
			e[i+1] = h
		}
		if h == 0 { // the block falls apart here
			d[i+1] -= p
			break
		}
		s, c = f/h, g/h
		g = d[i+1] - p
		h = (d[i]-g)*s + 2*c*b
		p = s * h
		d[i+1] = g + p
		g = c*h - b
		if r.wanted {
			r.cos = append(r.cos, c)
			r.sin = append(r.sin, s)
		}
	}
	if len(r.cos) > from {
		r.chains = append(r.chains, chain{last - 1, from, len(r.cos)})
	}
	if i >= first {
		return
	}
	d[first] -= p
	e[first] = g
}

// apply multiplies the waiting rotations into the rows of z and forgets them.
func (r *rotations) apply(z []float64, n int) {
	if len(r.chains) == 0 {
		return
	}
	share((n+3)/4, 8, func(from, to int) {
		for group := from; group < to; group++ {
			row := 4 * group
			if row+4 <= n {
				r.rotateFour(z[row*n:(row+1)*n], z[(row+1)*n:(row+2)*n], z[(row+2)*n:(row+3)*n], z[(row+3)*n:(row+4)*n])
				continue
			}
			for ; row < n; row++ {
				r.rotateOne(z[row*n : (row+1)*n])
			}
		}
	})
	r.cos, r.sin, r.chains = r.cos[:0], r.sin[:0], r.chains[:0]
}

func (r *rotations) rotateOne(row []float64) {
	for _, k := range r.chains {
		cos, sin := r.cos[k.from:k.to], r.sin[k.from:k.to]
		sin = sin[:len(cos)]
		i := k.start
		high := row[i+1]
		for t, c := range cos {
			s, low := sin[t], row[i]
			row[i+1] = s*low + c*high
			high = c*low - s*high
			i--
		}
		row[i+1] = high
	}
}

// rotateFour does four rows at once, to hide the latency of the carried element.
func (r *rotations) rotateFour(p, q, u, v []float64) {
	q, u, v = q[:len(p)], u[:len(p)], v[:len(p)]
	for _, k := range r.chains {
		cos, sin := r.cos[k.from:k.to], r.sin[k.from:k.to]
		sin = sin[:len(cos)]
		i := k.start
		a, b, f, g := p[i+1], q[i+1], u[i+1], v[i+1]
		for t, c := range cos {
			s := sin[t]
			x, y, w, z := p[i], q[i], u[i], v[i]
			p[i+1], q[i+1], u[i+1], v[i+1] = s*x+c*a, s*y+c*b, s*w+c*f, s*z+c*g
			a, b, f, g = c*x-s*a, c*y-s*b, c*w-s*f, c*z-s*g
			i--
		}
		p[i+1], q[i+1], u[i+1], v[i+1] = a, b, f, g
	}
}
