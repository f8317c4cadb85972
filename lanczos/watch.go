package lanczos

import "math"

// watch follows, at fixed energies x, the values q_i(x) of the polynomials for
// which vector i of the Krylov space is q_i(H)b, b the start vector. An eigenvector
// u of an energy x has ⟨u|v_i⟩ = q_i(x)⟨u|b⟩, and the squares of these overlaps with
// orthonormal v_i add to at most one, so |⟨u|b⟩|² <= 1/Σ q_i(x)². All roots of the
// q_i lie above the lowest Ritz value; the sum therefore only grows below x.
type watch struct {
	at     []float64   // ascending
	q      [][]float64 // q[p][i] = q_i(at[p])
	weight []float64   // smallest bound on |⟨u|b⟩|² seen
	ritz   []float64   // new values while a space is condensed
}

// enough ends the growth of the polynomials before they overflow.
const enough = 1e-100

func newWatch(at []float64, most int) *watch {
	w := &watch{at: at, q: make([][]float64, len(at)), weight: make([]float64, len(at)), ritz: make([]float64, most)}
	for p := range at {
		w.q[p] = make([]float64, most+1)
		w.q[p][0] = 1
		w.weight[p] = 1
	}
	return w
}

// step appends the polynomial of the vector after the last of m, whose coupling
// must not vanish.
func (w *watch) step(m *projected) {
	j := m.size - 1
	for p, x := range w.at {
		if w.weight[p] < enough {
			continue
		}
		q := w.q[p]
		next := (x - m.alpha[j]) * q[j]
		switch {
		case j > m.kept:
			next -= m.beta[j-1] * q[j-1]
		case j == m.kept:
			for i, s := range m.arrow[:m.kept] {
				next -= s * q[i]
			}
		}
		q[j+1] = next / m.beta[j]
		sum := 0.0
		for _, y := range q[:j+2] {
			sum += y * y
		}
		w.weight[p] = min(w.weight[p], 1/sum)
	}
}

// condense follows the change to keep Ritz vectors and the vector after the last,
// before m itself is condensed.
func (w *watch) condense(m *projected, keep int, size float64) {
	n := m.size
	for p, x := range w.at {
		if w.weight[p] < enough {
			continue
		}
		q := w.q[p]
		next := q[n]
		ritz := w.ritz[:keep]
		clear(ritz)
		for c := range ritz {
			if d := x - m.values[c]; math.Abs(d) > 1e-6*size {
				ritz[c] = m.coupling() * m.last(c) * next / d // no cancellation
				continue
			}
			for r := range n {
				ritz[c] += m.vectors[r*n+c] * q[r]
			}
		}
		copy(q, ritz)
		q[keep] = next
	}
}

// chance returns the probability that a vector drawn evenly from the unit sphere
// has at most the given weight on a given direction of n dimensions, bounded from
// above: nw for complex and sqrt(2nw/π) for real vectors.
func chance(weight float64, n int, complexVectors bool) float64 {
	if complexVectors {
		return min(1, float64(n)*weight)
	}
	return min(1, math.Sqrt(2*float64(n)*weight/math.Pi))
}
