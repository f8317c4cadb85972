package lanczos

import (
	"math"

	"ketloom/lanczos/dense"
)

// RoundingFloor times ‖H‖ is the least error bound that is ever stated.
const RoundingFloor = 32 * epsilon

// finish makes the result of the lowest found vectors. With products it
// diagonalises the operator in their span and computes residuals with explicit
// products; without, the numbers of the recurrence stand.
func (s *search[T]) finish(products bool, cause error, reason string) (*Result, error) {
	list := s.found[:min(s.k, len(s.found))]
	if products {
		if cause == nil {
			s.before = &beginning{s.spent, s.check, s.size}
		}
		if err := s.rayleighRitz(list); err != nil {
			if ctxErr := s.ctx.Err(); ctxErr != nil {
				cause, reason = ctxErr, ctxErr.Error()
				if err := s.checkpoint(true); err != nil {
					return nil, err
				}
			} else {
				return nil, err
			}
		}
	}
	r := &Result{
		Check: s.check, CutMultiplet: s.cut, Dim: s.dim, Norm: s.size, Tolerance: s.Tolerance,
		Products: s.spent.products, Restarts: s.spent.restarts, Krylov: s.Krylov, Seed: s.Seed, Reason: reason,
	}
	for _, f := range list {
		r.Levels = append(r.Levels, Level{Energy: f.energy, Residual: f.residual})
		if !s.EnergiesOnly {
			fixPhase(s.f, s.space, f.vector)
			r.Vectors = append(r.Vectors, s.f.vector(f.vector))
		}
	}
	bound(r)
	return r, r.conclude(s.k, s.Unchecked, cause)
}

// conclude counts the converged levels and returns the error that goes with them.
func (r *Result) conclude(k int, unchecked bool, cause error) error {
	for r.Converged < len(r.Levels) && r.Levels[r.Converged].Residual <= r.Tolerance*r.Norm {
		r.Converged++
	}
	r.Complete = r.Converged == k && r.Check.Done
	if cause == nil && (r.Complete || r.Converged == k && unchecked) {
		return nil
	}
	if cause == nil && r.Check.Done {
		r.Reason = "residuals stay above the tolerance"
	}
	return &StopError{Wanted: k, Converged: r.Converged, Products: r.Products, Cause: cause}
}

// bound fills in Level.Bound.
func bound(r *Result) {
	all := 0.0
	for _, l := range r.Levels {
		all = math.Hypot(all, l.Residual)
	}
	floor := RoundingFloor * r.Norm
	for i := range r.Levels {
		l := &r.Levels[i]
		l.Bound = all
		if gap := r.Check.Next - l.Energy; r.Check.Done && r.Check.HasNext && gap > 0 {
			l.Bound = min(all, all*(all/gap))
		}
		l.Bound = max(l.Bound, floor)
	}
}

// rayleighRitz replaces the vectors of list by the Ritz vectors of their span. The
// basis, no longer needed, takes the products.
func (s *search[T]) rayleighRitz(list []found[T]) error {
	n := len(list)
	if n == 0 {
		return nil
	}
	vectors, products := make([][]T, n), s.basis[:n]
	for i, f := range list {
		vectors[i] = f.vector
		if err := s.multiply(products[i], f.vector); err != nil {
			return err
		}
	}
	if _, err := s.rotateToRitz(vectors, products); err != nil {
		return err
	}
	overlap := make([]T, 1)
	for i, v := range vectors {
		shrink := s.f.number(1 / s.space.norm(v)) // rotations left the norm off by some ε
		s.space.scaleBy(v, shrink)
		s.space.scaleBy(products[i], shrink)
		s.space.project(products[i], nil, nil, vectors[i:i+1], overlap)
		list[i].energy, _ = s.f.parts(overlap[0])
		list[i].residual = s.space.residual(products[i], v, list[i].energy)
	}
	sortByEnergy(list)
	return nil
}

// rotateToRitz diagonalises the operator in the span of orthonormal vectors, given
// their products, and rotates both.
func (s *search[T]) rotateToRitz(vectors, products [][]T) ([]float64, error) {
	n := len(vectors)
	a, column := make([]T, n*n), make([]T, n)
	for j, w := range products {
		s.space.project(w, nil, nil, vectors, column)
		for i, z := range column {
			a[i*n+j] = z
		}
	}
	half := s.f.number(0.5)
	for i := range n {
		for j := range i + 1 {
			z := half*a[i*n+j] + half*conjugate(a[j*n+i])
			a[i*n+j], a[j*n+i] = z, conjugate(z)
		}
	}
	values, columns, err := s.f.eigen(a, n)
	if err != nil {
		return nil, err
	}
	u := make([]T, n*n)
	for c := range n {
		for r := range n {
			u[r*n+c] = columns[c*n+r]
		}
	}
	s.space.rotate(vectors, vectors, u)
	s.space.rotate(products, products, u)
	return values, nil
}

// fixPhase makes the first component that is within dense.PhaseTolerance of the
// largest real and positive.
func fixPhase[T scalar](f field[T], s *space[T], v []T) {
	top := 0.0
	for _, z := range v {
		top = max(top, magnitude(f, z))
	}
	for i, z := range v {
		size := magnitude(f, z)
		if size < (1-dense.PhaseTolerance)*top || size == 0 {
			continue
		}
		if re, im := f.parts(z); im != 0 || re < 0 {
			s.scaleBy(v, conjugate(z)*f.number(1/size))
			v[i] = f.number(size)
		}
		return
	}
}
