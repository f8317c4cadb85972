package lanczos

import "context"

// Lowest finds the k lowest eigenvalues and eigenvectors of a Hermitian operator
// that is known only by its product with a vector, 1 <= k <= op.Dim().
//
// It builds Krylov spaces from three-term recurrences with full
// reorthogonalisation and condenses a full space to its lowest Ritz vectors (K. Wu
// and H. Simon, SIAM J. Matrix Anal. Appl. 22, 602 (2000); G. W. Stewart, ibid. 23,
// 601 (2001)). One such space holds only one vector of each multiplet. Converged
// vectors are therefore set aside, and further runs start from random vectors in
// their orthogonal complement until the complement is known to hold no level up to
// the k-th; see Check. A last diagonalisation in the space of all found vectors, with
// one explicit product for each, gives the energies and residuals.
//
// Cost: for lattice models of dimension 1e4 to 1e5 typically 60 to 110 products for
// one level and 130 to 170 for four, of which the check takes a third and the
// residuals k; about one run more for each further member of the largest multiplet.
// Memory: Krylov+1 vectors and the found ones, which are k and those that missed
// levels have pushed out of the list. Each product is followed by additions that
// read all kept vectors twice. Dimensions up to DenseDimension,
// and k near the dimension (see DenseLimit), use the whole matrix; that
// diagonalisation itself does not look at ctx.
//
// Results have the same bits for any number of workers, given a product that has.
//
// Errors: ErrArgument; ErrNotHermitian and ErrNotFinite from the products; these
// come without a result. A *StopError when ctx ends the search (within one product)
// or Options.Products is reached: it comes with the result reached so far, its
// vectors fit for Options.Start. Panics of the operator's own product pass through.
func Lowest(ctx context.Context, op Operator, k int, opts *Options) (*Result, error) {
	s, err := resolve(op, k, opts)
	if err != nil {
		return nil, err
	}
	if op.Real() {
		return lowest(ctx, op, s, realField{}, 8)
	}
	return lowest(ctx, op, s, complexField{}, 16)
}

func lowest[T scalar](ctx context.Context, op Operator, s settings, f field[T], component int64) (*Result, error) {
	if err := checkStart(s, f); err != nil {
		return nil, err
	}
	if s.wholly() {
		return whole(ctx, op, s, f)
	}
	if err := s.chooseKrylov(component); err != nil {
		return nil, err
	}
	if most := (s.Krylov + 1) / 2; len(s.Start) > most {
		return nil, argument("%d start vectors with a Krylov space of %d; give %d at most or raise Options.Krylov", len(s.Start), s.Krylov, most)
	}
	search := newSearch(ctx, op, s, f)
	defer search.space.crew.close()
	return search.find()
}

func checkStart[T scalar](s settings, f field[T]) error {
	for i, v := range s.Start {
		x := f.read(v)
		if v.Real != nil && v.Complex != nil || x == nil {
			return argument("start vector %d has %d real and %d complex components; expected one kind, real for a real operator", i, len(v.Real), len(v.Complex))
		}
		if len(x) != s.dim {
			return argument("start vector %d has %d components; expected the dimension %d", i, len(x), s.dim)
		}
		if top := f.largest(x); top == 0 || top-top != 0 {
			return argument("start vector %d is zero or not finite; leave it out", i)
		}
	}
	return nil
}
