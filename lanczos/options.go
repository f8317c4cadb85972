package lanczos

import (
	"math"
	"runtime"
	"time"
)

const (
	// DefaultTolerance is the largest residual norm of a converged level in units of
	// ‖H‖. Energies are then good to about 1e-20·‖H‖²/gap, or to rounding.
	DefaultTolerance = 1e-10
	// SmallestTolerance is the least tolerance that can be asked for; rounding
	// hides smaller residuals.
	SmallestTolerance = 1e-13
	// DefaultProducts is the least default of the limit of products; for k levels
	// the default is DefaultProducts + 200k.
	DefaultProducts = 5000
	// DefaultSeed starts the random vectors when Options.Seed is zero.
	DefaultSeed uint64 = 20240229
	// DefaultMissChance is the default of Options.MissChance.
	DefaultMissChance = 1e-5
	// LeastKrylov, KrylovPerLevel and KrylovBeyond give the default Krylov space: the larger of
	// LeastKrylov and KrylovPerLevel·k + KrylovBeyond vectors.
	LeastKrylov    = 32
	KrylovPerLevel = 2
	KrylovBeyond   = 16
	// DenseDimension is the dimension up to which the whole matrix is built from
	// products with unit vectors and diagonalised at once.
	DenseDimension = 200
	// DenseLimit is the dimension up to which that is also done where the default
	// Krylov space would take a quarter of all dimensions or more.
	DenseLimit = 1500
	// HermitianTolerance is the largest violation of ⟨x|Hy⟩ = ⟨Hx|y⟩ between vectors
	// of the Krylov space, in units of ‖H‖, that counts as rounding.
	HermitianTolerance = 1e-10
)

// Options steer Lowest. A nil pointer and zero fields mean the defaults; the
// struct is only read.
type Options struct {
	// Tolerance is the largest residual norm ‖Hv-Ev‖ of a converged level in units
	// of ‖H‖, for which the largest magnitude of a Ritz value is taken (never more
	// than ‖H‖). From SmallestTolerance to 0.01; default DefaultTolerance.
	Tolerance float64
	// Products limits the products of the search. The products that compute the
	// residuals of the result, one a level, come on top. Default see DefaultProducts.
	Products int
	// Krylov is the largest number of vectors in the Krylov space, k+3 or more; one
	// more is kept beside it. A smaller space saves memory and costs products.
	// Default see LeastKrylov; at most the dimension is used.
	Krylov int
	// Memory is a limit in bytes for all vectors, Krylov space and found levels
	// together. It lowers the default of Krylov and is an error where k+3 vectors do
	// not fit beside 2k levels. 0 means no limit. No effect where Krylov is given.
	Memory int64
	// Seed of the random vectors. 0 means DefaultSeed.
	Seed uint64
	// Start holds vectors that approximate wanted eigenvectors, from a similar
	// operator or an earlier search; at most (Krylov+1)/2 of them. They need not be
	// normalised or orthogonal and are not modified. Each costs one product.
	Start []Vector
	// MissChance is the largest acceptable probability, over the random start of a
	// check, that the check overlooks a missed level; see Check. Between 1e-12 and
	// 0.1; default DefaultMissChance. A tenth of it costs two to four products more.
	MissChance float64
	// Unchecked ends the search when k levels are converged, without looking for
	// missed ones. Degenerate levels are then found once. Saves a third to a half of
	// the products.
	Unchecked bool
	// EnergiesOnly leaves Result.Vectors nil. The search is the same.
	EnergiesOnly bool
	// Workers is the number of goroutines that add vectors; it does not change the
	// result. 0 means one for each processor.
	Workers int
	// Checkpoint, if not nil, is handed the state of the search now and then, between
	// two restarts, and where the context ends a run that collects levels. Its error
	// ends the search. See Checkpoint.Save.
	Checkpoint func(c *Checkpoint) error
	// CheckpointEvery is the least time between two calls of Checkpoint; default
	// DefaultCheckpointEvery.
	CheckpointEvery time.Duration
	// Resume goes on from a checkpoint of a search for the same levels of the same
	// operator with the same settings; Start is then not used. Products, Memory,
	// Workers and the hooks may differ where they lead to the same Krylov.
	Resume *Checkpoint
	// Progress is called at most about ten times a second, from the goroutine that
	// called Lowest, with the number of products done; total 0 means unknown; rate
	// is products a second.
	Progress func(what string, done, total int64, rate float64)
}

// settings are options with defaults filled in.
type settings struct {
	Options
	k, dim int
}

func resolve(op Operator, k int, opts *Options) (settings, error) {
	s := settings{k: k}
	if opts != nil {
		s.Options = *opts
	}
	if err := checkOperator(op); err != nil {
		return s, err
	}
	s.dim = op.Dim()
	if s.dim < 1 {
		return s, argument("operator of dimension %d; expected 1 or more; choose a sector that holds states", s.dim)
	}
	if k < 1 || k > s.dim {
		return s, argument("%d levels of an operator of dimension %d; ask for 1 to %d", k, s.dim, s.dim)
	}
	if s.Tolerance == 0 {
		s.Tolerance = DefaultTolerance
	}
	if !(s.Tolerance >= SmallestTolerance && s.Tolerance <= 0.01) {
		return s, argument("Options.Tolerance %g; expected %g to 0.01, relative to the norm of the operator", s.Tolerance, SmallestTolerance)
	}
	if s.MissChance == 0 {
		s.MissChance = DefaultMissChance
	}
	if !(s.MissChance >= 1e-12 && s.MissChance <= 0.1) {
		return s, argument("Options.MissChance %g; expected 1e-12 to 0.1", s.MissChance)
	}
	if s.Products < 0 || s.Krylov < 0 || s.Memory < 0 || s.Workers < 0 {
		return s, argument("negative option (Products %d, Krylov %d, Memory %d, Workers %d); expected 0 for the default or a positive number", s.Products, s.Krylov, s.Memory, s.Workers)
	}
	if s.Products == 0 {
		s.Products = DefaultProducts + 200*k
	}
	if s.Seed == 0 {
		s.Seed = DefaultSeed
	}
	if s.CheckpointEvery <= 0 {
		s.CheckpointEvery = DefaultCheckpointEvery
	}
	if s.Workers == 0 {
		s.Workers = runtime.GOMAXPROCS(0)
	}
	return s, nil
}

func checkOperator(op Operator) error {
	switch f := op.(type) {
	case nil:
		return argument("nil operator; expected one with a product, as from RealFunc")
	case realFunc:
		if f.apply == nil {
			return argument("RealFunc with a nil product; expected a function")
		}
	case complexFunc:
		if f.apply == nil {
			return argument("ComplexFunc with a nil product; expected a function")
		}
	}
	return nil
}

// wholly reports whether the whole matrix is diagonalised at once.
func (s *settings) wholly() bool {
	if s.dim <= DenseDimension || s.k+3 > s.dim {
		return true
	}
	return s.dim <= DenseLimit && 4*(KrylovPerLevel*s.k+KrylovBeyond) >= s.dim
}

// chooseKrylov fills in the size of the Krylov space for components of the given
// number of bytes.
func (s *settings) chooseKrylov(component int64) error {
	least, bytes := s.k+3, component*int64(s.dim)
	if s.Krylov != 0 {
		if s.Krylov < least {
			return argument("Options.Krylov %d for %d levels; expected %d or more", s.Krylov, s.k, least)
		}
		s.Krylov = min(s.Krylov, s.dim)
		return nil
	}
	s.Krylov = min(s.dim, max(LeastKrylov, KrylovPerLevel*s.k+KrylovBeyond))
	if s.Memory == 0 {
		return nil
	}
	room := s.Memory/bytes - 2*int64(s.k) - 1
	if room < int64(least) {
		need := float64(bytes) * float64(least+2*s.k+1)
		return argument("Options.Memory %d bytes; %d levels of dimension %d need %.3g bytes at least; ask for fewer levels or give more", s.Memory, s.k, s.dim, math.Ceil(need))
	}
	s.Krylov = int(min(room, int64(s.Krylov)))
	return nil
}
