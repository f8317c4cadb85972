package lanczos

import "fmt"

// Level is one eigenvalue with its evidence.
type Level struct {
	// Energy is the Ritz value v†Hv.
	Energy float64
	// Residual is ‖Hv - Energy·v‖ from an explicit product with the final vector
	// (from the recurrence where the context ended the search).
	Residual float64
	// Bound on |Energy - exact|, the smaller of two bounds, never below the rounding
	// floor RoundingFloor·‖H‖. The first is Residual, for the list as a whole the
	// norm of all residuals together. The second is quadratic: ‖R‖²/(b - Energy), R
	// all residuals of the list, b a lower bound of the rest of the spectrum. That b
	// is Check.Next, so the second bound holds as far as the check does; it is not used
	// where no check ended.
	//
	// T. Kato, J. Phys. Soc. Jpn. 4, 334 (1949) and G. Temple, Proc. R. Soc. A 119,
	// 276 (1928) for one level; C.-K. Li and R.-C. Li, Linear Algebra Appl. 395, 183
	// (2005) for several.
	Bound float64
}

// Check says how a list of levels was searched for omissions.
//
// Runs start from random vectors in the orthogonal complement of all found levels.
// If the complement held a level E <= Below, the weight of the start vector on it
// could be at most 1/K(E), where K(x) is the sum of the squares at x of the
// orthonormal polynomials that belong to the vectors of the run (Christoffel's
// bound; N. I. Akhiezer, The Classical Moment Problem, 1965, chapter 2). Chance is
// the probability that a random vector has so little weight on a given direction.
// The statement needs no assumption on the spectrum; rounding, and the residuals of
// the found levels, are neglected.
type Check struct {
	// Done is true where a check ran to its end.
	Done bool
	// Below is the energy up to which a missed level would have been noticed. It lies
	// above the k-th level, by an amount of the order of the gap. Where level k+1 equals
	// the k-th (CutMultiplet), or is too close for that, Below lies below the multiplet
	// of the k-th level, and between the two only the convergence of the complement's
	// lowest Ritz value speaks.
	Below float64
	// Chance bounds the probability that a level up to Below was missed all the same.
	Chance float64
	// Next is a lower bound of the first level above the list. It is Below, with the
	// same Chance, where Below is above the k-th level; else it is an estimate, the
	// complement's lowest Ritz value minus its residual norm. A converged level that was
	// pushed out of the list lowers it. HasNext is false where no level follows.
	Next    float64
	HasNext bool
	// Runs and Products count all runs in complements and their products.
	Runs, Products int
}

// Result of Lowest. It can be written as JSON; the vectors are left out of that.
type Result struct {
	// Levels ascend; each multiplet appears with its multiplicity.
	Levels []Level
	// Vectors[j] belongs to Levels[j]: orthonormal, real for a real operator. The first
	// component whose magnitude is within the factor 1-dense.PhaseTolerance of the
	// largest is real and positive. Vectors of one multiplet are a basis of their space
	// and no more. Nil with Options.EnergiesOnly.
	Vectors []Vector `json:"-"`
	// Converged counts from the lowest level on those with Residual within the
	// tolerance.
	Converged int
	// Complete is true where all levels are converged and the check for missed ones
	// ended without finding any; see Check for what that means.
	Complete bool
	// CutMultiplet is true where level k+1 equals level k within the tolerance: the
	// last multiplet of the list is not whole.
	CutMultiplet bool
	Check        Check
	Dim          int
	Norm         float64 // largest magnitude of a Ritz value, at most ‖H‖
	Tolerance    float64 // the tolerance used, in units of Norm
	Products     int     // all products, those for the residuals included
	Restarts     int     // how often a Krylov space was condensed
	Krylov       int     // largest number of vectors in the Krylov space
	Seed         uint64  // the seed used
	Dense        bool    // the whole matrix was built and diagonalised
	Reason       string  // why the search ended
}

// String returns three lines: levels and their evidence, completeness, and cost.
func (r *Result) String() string {
	if len(r.Levels) == 0 {
		return fmt.Sprintf("no level of dimension %d\nnot checked for missed levels\n%d products: %s", r.Dim, r.Products, r.Reason)
	}
	low, high := r.Levels[0], r.Levels[len(r.Levels)-1]
	residual, bound := 0.0, 0.0
	for _, l := range r.Levels {
		residual, bound = max(residual, l.Residual), max(bound, l.Bound)
	}
	text := fmt.Sprintf("%d of %d levels converged, %.12g to %.12g, residuals up to %.1e, errors up to %.1e\n", r.Converged, len(r.Levels), low.Energy, high.Energy, residual, bound)
	return text + r.completeness() + "\n" + r.cost()
}

func (r *Result) completeness() string {
	cut := ""
	if r.CutMultiplet {
		cut = "; the last multiplet is cut"
	}
	switch {
	case r.Dense:
		return "complete: the whole matrix was diagonalised" + cut
	case !r.Check.Done:
		return "not checked for missed levels"
	case !r.Complete:
		return "incomplete" + cut
	}
	return fmt.Sprintf("complete up to %.12g: chance of a missed level below %.1e, %d check runs%s", r.Check.Below, r.Check.Chance, r.Check.Runs, cut)
}

func (r *Result) cost() string {
	if r.Dense {
		return fmt.Sprintf("%d products, dimension %d: %s", r.Products, r.Dim, r.Reason)
	}
	return fmt.Sprintf("%d products, dimension %d, %d restarts of %d vectors, seed %d: %s", r.Products, r.Dim, r.Restarts, r.Krylov, r.Seed, r.Reason)
}
