package lanczos

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"time"

	"ketloom/basis/pages"
)

const (
	epsilon = 0x1p-52
	// exhaustion is the coupling, in units of ‖H‖, below which a Krylov space counts
	// as invariant.
	exhaustion = 64 * epsilon
	// runTolerance is the part of the tolerance that a run may use up; the rest is
	// for the couplings to vectors found before.
	runTolerance = 0.35
)

// errLimit ends a run at the limit of products.
var errLimit = errors.New("limit of products")

// found is a converged vector that has been set aside, or the best approximation
// where a search ended early.
type found[T scalar] struct {
	energy, residual float64
	vector           []T
}

// spent counts what a search has used up.
type spent struct{ products, restarts, starts int }

// beginning is what a checking run starts from, beside the found vectors.
type beginning struct {
	spent spent
	check Check
	size  float64
}

// search holds the state of one call of Lowest.
type search[T scalar] struct {
	settings
	ctx    context.Context
	op     Operator
	f      field[T]
	space  *space[T]
	clock  *clock
	basis  [][]T // Krylov+1 vectors
	found  []found[T]
	locked [][]T // the vectors of found
	matrix *projected
	watch  *watch // nil in runs that do not check

	all   [][]T // locked vectors and the basis up to the current one
	work  []T
	turn  []T     // coefficients of a rotation in the basis
	size  float64 // lower bound of ‖H‖
	spent spent
	check Check
	cut   bool

	judged  int        // size of the space at the last look at the Ritz values
	resumed bool       // the next run goes on instead of beginning
	before  *beginning // of the checking run; nil in others
	saved   time.Time
}

func newSearch[T scalar](ctx context.Context, op Operator, s settings, f field[T]) *search[T] {
	r := &search[T]{settings: s, ctx: ctx, op: op, f: f, clock: newClock(s.Progress), saved: time.Now()}
	r.space = newSpace(f, s.dim, s.Workers)
	r.basis = make([][]T, s.Krylov+1)
	for i := range r.basis {
		r.basis[i] = make([]T, s.dim)
		pages.Advise(r.basis[i])
	}
	r.matrix = newProjected(s.Krylov)
	r.turn = make([]T, s.Krylov*s.Krylov)
	return r
}

// find runs until k levels are found and checked.
func (s *search[T]) find() (*Result, error) {
	var err error
	if s.Resume != nil {
		err = s.resume()
	} else {
		err = s.warmStart()
	}
	for err == nil && len(s.found) < s.k {
		err = s.gather()
	}
	if err == nil && s.Unchecked {
		return s.finish(true, nil, "all levels converged; no check asked for")
	}
	for err == nil && !s.check.Done {
		if err = s.checkpoint(false); err == nil {
			s.before = &beginning{s.spent, s.check, s.size}
			err = s.verify()
		}
		if err == nil {
			s.before = nil
		}
	}
	if err == nil {
		return s.finish(true, nil, "all levels converged and checked")
	}
	ctxErr := s.ctx.Err()
	switch {
	case errors.Is(err, errLimit):
		s.salvage()
		return s.finish(true, nil, fmt.Sprintf("limit of %d products", s.Products))
	case ctxErr != nil && errors.Is(err, ctxErr):
		if err := s.checkpoint(true); err != nil {
			return nil, err
		}
		s.salvage()
		return s.finish(false, ctxErr, ctxErr.Error())
	}
	return nil, err
}

// gather is a run from a random vector for the levels that are still missing.
func (s *search[T]) gather() error {
	if !s.randomStart() {
		return fmt.Errorf("lanczos: no direction is left outside %d found vectors of dimension %d: %w", len(s.found), s.dim, ErrNotHermitian)
	}
	return s.collect()
}

// collect is a run from the first basis vector for the levels that are missing.
func (s *search[T]) collect() error {
	return s.run(func(exhausted bool) (int, bool) {
		need := s.k - len(s.found)
		if exhausted {
			return min(need, s.matrix.size), true
		}
		if s.matrix.size < need {
			return 0, false
		}
		for c := range need {
			if !s.converged(c) {
				return 0, false
			}
		}
		return need, true
	})
}

func (s *search[T]) converged(c int) bool {
	return s.matrix.residual(c) <= runTolerance*s.Tolerance*s.size
}

// randomStart puts a random unit vector of the complement of the found vectors in
// the first place of the basis; false where the complement is empty.
func (s *search[T]) randomStart() bool {
	v := s.basis[0]
	s.space.fillRandom(v, streamOf(s.Seed, s.spent.starts))
	s.spent.starts++
	norm := s.space.norm(v)
	s.space.scaleBy(v, s.f.number(1/norm))
	if len(s.found) >= s.dim {
		return false
	}
	s.reserve()
	norm = s.space.orthogonalise(v, s.locked, s.work)
	if norm == 0 {
		return false
	}
	s.space.scaleBy(v, s.f.number(1/norm))
	return true
}

// reserve makes room for the coefficients of all vectors.
func (s *search[T]) reserve() {
	if need := len(s.locked) + len(s.basis); len(s.work) < 2*need {
		s.work = make([]T, 2*need)
		s.all = make([][]T, 0, need)
	}
}

// run builds a Krylov space from the first basis vector until judge, called with
// fresh Ritz values, ends it. Then the number of lowest Ritz vectors that judge
// named is set aside.
func (s *search[T]) run(judge func(exhausted bool) (take int, done bool)) error {
	s.reserve()
	m := s.matrix
	if !s.resumed {
		m.reset()
		s.judged = 0
	}
	s.resumed = false
	interval := 4 // products between two looks at the Ritz values
	if s.dim > 20000 {
		interval = 2
	}
	for {
		if err := s.step(); err != nil {
			return err
		}
		exhausted := m.coupling() <= exhaustion*s.size || m.size >= s.dim-len(s.locked)
		full, limit := m.size == s.Krylov, s.spent.products >= s.Products
		if !exhausted && s.watch != nil {
			s.watch.step(m)
		}
		if !exhausted && !full && !limit && m.size-s.judged < max(interval, m.size/10) {
			continue
		}
		s.judged = m.size
		if err := m.solve(); err != nil {
			return err
		}
		s.size = max(s.size, math.Abs(m.values[0]), math.Abs(m.values[m.size-1]))
		take, done := judge(exhausted)
		if done {
			s.setAside(take)
			m.reset()
			return nil
		}
		if limit {
			return errLimit
		}
		if full {
			s.condense()
			s.judged = m.size
			if s.watch == nil {
				if err := s.checkpoint(false); err != nil {
					return err
				}
			}
		}
	}
}

// step extends the Krylov space by one product.
func (s *search[T]) step() error {
	m := s.matrix
	j := m.size
	v, w := s.basis[j], s.basis[j+1]
	if err := s.multiply(w, v); err != nil {
		return err
	}
	overlap := s.work[len(s.work)/2:]
	norm := s.space.project(w, nil, nil, s.basis[j:j+1], overlap)
	if norm-norm != 0 {
		return s.notFinite()
	}
	s.size = max(s.size, norm)
	alpha, twist := s.f.parts(overlap[0])
	near, factors := s.known(j, alpha, overlap)
	s.all = append(append(s.all[:0], s.locked...), s.basis[:j+1]...)
	before := s.space.project(w, near, factors, s.all, s.work)
	if violation := max(math.Abs(twist), s.violation(j)); violation > HermitianTolerance*s.size {
		return s.notHermitian(violation)
	}
	correction, _ := s.f.parts(s.work[len(s.locked)+j])
	beta := s.space.subtract(w, s.all, s.work)
	for range 3 {
		if beta > 0.5*before || beta == 0 {
			break
		}
		s.space.project(w, nil, nil, s.all, s.work)
		before, beta = beta, s.space.subtract(w, s.all, s.work)
	}
	m.alpha[j], m.beta[j] = alpha+correction, beta
	m.size++
	if beta > exhaustion*s.size {
		s.space.scaleBy(w, s.f.number(1/beta))
	}
	return nil
}

// known returns the basis vectors on which a product with vector j has components
// by the recurrence, and these components.
func (s *search[T]) known(j int, alpha float64, factors []T) ([][]T, []T) {
	m := s.matrix
	if j > m.kept {
		factors[0], factors[1] = s.f.number(m.beta[j-1]), s.f.number(alpha)
		return s.basis[j-1 : j+1], factors[:2]
	}
	for i, x := range m.arrow[:j] {
		factors[i] = s.f.number(x)
	}
	factors[j] = s.f.number(alpha)
	return s.basis[:j+1], factors[:j+1]
}

// violation returns the largest component of what the recurrence has left over on
// the basis vectors before j. It vanishes for a Hermitian operator, since then
// ⟨v_i|H v_j⟩ = conj⟨v_j|H v_i⟩ and the products with v_i are known.
func (s *search[T]) violation(j int) float64 {
	top := 0.0
	for _, z := range s.work[len(s.locked) : len(s.locked)+j] {
		top = max(top, magnitude(s.f, z))
	}
	return top
}

func (s *search[T]) notHermitian(violation float64) error {
	return fmt.Errorf("lanczos: ⟨x|Hy⟩ and ⟨Hx|y⟩ differ by %.3g for unit vectors of the Krylov space after %d products, with ‖H‖ of %.3g or more; add the adjoint of every term, and check that equal vectors have equal products: %w", violation, s.spent.products, s.size, ErrNotHermitian)
}

func (s *search[T]) notFinite() error {
	return fmt.Errorf("lanczos: product %d holds NaN or an infinity, or overflows; look at the coefficients of the operator: %w", s.spent.products, ErrNotFinite)
}

func (s *search[T]) multiply(dst, src []T) error {
	if err := s.ctx.Err(); err != nil {
		return err
	}
	s.f.apply(s.op, dst, src)
	s.spent.products++
	s.clock.tick("products", s.spent.products, 0)
	return nil
}

// condense keeps the lowest Ritz vectors of a full space.
func (s *search[T]) condense() {
	m := s.matrix
	wanted := max(1, s.k-len(s.found))
	keep := min(wanted+(m.size-wanted)*2/5, m.size-2)
	s.rotateBasis(s.basis[:keep])
	s.basis[keep], s.basis[m.size] = s.basis[m.size], s.basis[keep]
	if s.watch != nil {
		s.watch.condense(m, keep, s.size)
	}
	m.condense(keep)
	s.spent.restarts++
}

// rotateBasis writes the lowest Ritz vectors into the given vectors.
func (s *search[T]) rotateBasis(into [][]T) {
	n := s.matrix.size
	u := s.turn[:n*len(into)]
	for r := range n {
		for c := range into {
			u[r*len(into)+c] = s.f.number(s.matrix.vectors[r*n+c])
		}
	}
	s.space.rotate(into, s.basis[:n], u)
}

// setAside copies the lowest Ritz vectors to the found ones.
func (s *search[T]) setAside(count int) {
	fresh := make([][]T, count)
	for c := range fresh {
		fresh[c] = make([]T, s.dim)
		pages.Advise(fresh[c])
	}
	s.rotateBasis(fresh)
	for c, v := range fresh {
		s.found = append(s.found, found[T]{s.matrix.values[c], s.matrix.residual(c), v})
	}
	s.arrange()
}

// arrange sorts the found vectors by energy.
func (s *search[T]) arrange() {
	sortByEnergy(s.found)
	s.locked = s.locked[:0]
	for _, f := range s.found {
		s.locked = append(s.locked, f.vector)
	}
}

func sortByEnergy[T scalar](list []found[T]) {
	slices.SortStableFunc(list, func(a, b found[T]) int {
		switch {
		case a.energy < b.energy:
			return -1
		case a.energy > b.energy:
			return 1
		}
		return 0
	})
}

// salvage sets the unfinished Ritz vectors of an interrupted run aside.
func (s *search[T]) salvage() {
	m := s.matrix
	if m.size == 0 || m.solve() != nil {
		return
	}
	count := min(s.k-len(s.found), m.size)
	if count <= 0 {
		count = 0
		for count < m.size && m.values[count] < s.found[s.k-1].energy-s.slack() {
			count++
		}
	}
	s.setAside(count)
}
