package lanczos

import (
	"errors"
	"fmt"
)

var (
	// ErrArgument says that an argument or option of Lowest cannot be used.
	ErrArgument = errors.New("unusable argument")
	// ErrNotHermitian says that products contradict ⟨x|Hy⟩ = ⟨Hx|y⟩.
	ErrNotHermitian = errors.New("operator is not Hermitian")
	// ErrNotFinite says that a product holds NaN or an infinity.
	ErrNotFinite = errors.New("product is not finite")
	// ErrNotConverged says that fewer levels than asked for have a residual within
	// the tolerance. The result that comes with it holds what was reached.
	ErrNotConverged = errors.New("levels are not converged")
	// ErrUnchecked says that all levels are converged, but the search for levels
	// that were missed did not end. The result that comes with it holds the levels.
	ErrUnchecked = errors.New("levels are not checked for completeness")
)

// StopError is the error of a search that ended early. It wraps ErrNotConverged or
// ErrUnchecked, and the error of the context where that ended the search.
type StopError struct {
	Wanted    int   // levels asked for
	Converged int   // levels whose residual is within the tolerance, counted from the lowest
	Products  int   // products used
	Cause     error // error of the context; nil where the limit of products was reached
}

// Error says what was reached and what to do.
func (e *StopError) Error() string {
	what := fmt.Sprintf("%d of %d levels converged after %d products", e.Converged, e.Wanted, e.Products)
	if e.Converged >= e.Wanted {
		what = fmt.Sprintf("all %d levels converged after %d products, but the search for missed ones did not end", e.Wanted, e.Products)
	}
	if e.Cause != nil {
		return fmt.Sprintf("lanczos: %s: %v; continue with the returned vectors as Options.Start", what, e.Cause)
	}
	return fmt.Sprintf("lanczos: %s; raise Options.Products or Options.Krylov, or continue with the returned vectors as Options.Start", what)
}

// Unwrap returns the errors named in the type's comment.
func (e *StopError) Unwrap() []error {
	list := []error{ErrNotConverged}
	if e.Converged >= e.Wanted {
		list[0] = ErrUnchecked
	}
	if e.Cause != nil {
		list = append(list, e.Cause)
	}
	return list
}

func argument(format string, values ...any) error {
	return fmt.Errorf("lanczos: "+format+": %w", append(values, ErrArgument)...)
}
