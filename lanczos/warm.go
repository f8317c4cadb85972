package lanczos

// warmStart uses Options.Start: it diagonalises the operator in their span, sets
// converged vectors aside and begins the first run with the sum of the others.
func (s *search[T]) warmStart() error {
	vectors := s.independentStart()
	n := len(vectors)
	if n == 0 {
		return nil
	}
	products := s.basis[n : 2*n]
	for i, v := range vectors {
		if err := s.multiply(products[i], v); err != nil {
			return err
		}
		norm := s.space.norm(products[i])
		if norm-norm != 0 {
			return s.notFinite()
		}
		s.size = max(s.size, norm)
	}
	values, err := s.rotateToRitz(vectors, products)
	if err != nil {
		return err
	}
	var rest [][]T
	for i, v := range vectors {
		residual := s.space.residual(products[i], v, values[i])
		if residual <= runTolerance*s.Tolerance*s.size {
			s.found = append(s.found, found[T]{values[i], residual, append([]T(nil), v...)})
		} else {
			rest = append(rest, v)
		}
	}
	s.arrange()
	if len(rest) == 0 || len(s.found) >= s.k {
		return nil
	}
	return s.collectFrom(rest)
}

// independentStart copies the start vectors to the basis, orthonormal.
func (s *search[T]) independentStart() [][]T {
	n := 0
	for _, v := range s.Start {
		s.reserve()
		x := s.basis[n]
		copy(x, s.f.read(v))
		s.space.scaleBy(x, s.f.number(1/s.f.largest(x)))
		norm := s.space.norm(x)
		s.space.scaleBy(x, s.f.number(1/norm))
		norm = s.space.orthogonalise(x, s.basis[:n], s.work)
		if norm > 1e-10 {
			s.space.scaleBy(x, s.f.number(1/norm))
			n++
		}
	}
	return s.basis[:n:n]
}

// collectFrom is the first run, from the sum of vectors.
func (s *search[T]) collectFrom(vectors [][]T) error {
	u := make([]T, len(vectors))
	for i := range u {
		u[i] = s.f.number(1)
	}
	s.space.rotate(s.basis[:1], vectors, u)
	s.reserve()
	norm := s.space.orthogonalise(s.basis[0], s.locked, s.work)
	s.space.scaleBy(s.basis[0], s.f.number(1/norm))
	return s.collect()
}
