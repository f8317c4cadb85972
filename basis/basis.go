package basis

import (
	"context"
	"fmt"
	"math"
	"runtime"

	"ketloom/basis/group"
)

// Options tunes how a basis is made. A nil *Options and zero fields stand for
// the defaults.
type Options struct {
	// Workers is the number of goroutines; default: GOMAXPROCS. The result
	// does not depend on it.
	Workers int
	// Memory is the largest number of bytes that the basis may take; default
	// DefaultMemory. A larger one is refused with the numbers, before it is made.
	Memory int64
	// Progress, if not nil, is told how many of the candidate configurations
	// have been visited. It is called by one goroutine at a time.
	Progress func(what string, done, total int64, rate float64)
}

// DefaultMemory is the default limit on the memory of one basis: 8 GiB.
const DefaultMemory = 8 << 30

func (o *Options) withDefaults() Options {
	var out Options
	if o != nil {
		out = *o
	}
	if out.Workers <= 0 {
		out.Workers = runtime.GOMAXPROCS(0)
	}
	if out.Memory <= 0 {
		out.Memory = DefaultMemory
	}
	return out
}

// Basis is the numbered list of the states of a sector: state i belongs to the
// representative At(i), ascending in i. A Basis does not change after it is
// made and may be used by many goroutines.
type Basis struct {
	space   *Space
	sector  Sector
	sym     *symmetry // nil without symmetries
	ladder  *ladder   // of the words
	rank    *ranker   // without symmetries
	numbers *numbering
	listed  bool     // representatives are a proper part of the charge sector
	list    []uint64 // words: configurations, or their rearrangement by sublattice
	stab    []uint16 // size of the stabiliser, less one
	index   index
	length  int
}

// New enumerates the states of a sector. Without symmetries and constraints
// nothing is stored but tables; otherwise 8 bytes a state (10 with symmetries)
// and 1⅓ bits for each candidate, a configuration that the charges allow and,
// with symmetries, whose upper bits are the smallest of their orbit.
//
// Errors: an impossible sector (see the message), [ErrEmpty] where no state
// exists, a basis larger than Options.Memory, and the error of the context.
//
// Cost: one visit to each candidate, with a look-up or two for each image of the
// upper places (two sublattices: two). The 6×6 square lattice at S_z = 0 with all
// 576 symmetries has 9.1e9 configurations, 41 million candidates and 15.8 million
// states.
func New(ctx context.Context, space *Space, sector Sector, opts *Options) (*Basis, error) {
	if space == nil {
		return nil, fmt.Errorf("basis: no space; make one with NewSpace or Uniform")
	}
	if err := sector.Check(space); err != nil {
		return nil, err
	}
	o := opts.withDefaults()
	b := &Basis{space: space, sector: sector}
	var err error
	if b.ladder, err = newLadder(space, sector.Charges); err != nil {
		return nil, err
	}
	if b.ladder.total == 0 {
		return nil, fmt.Errorf("basis: %w: no configuration has%s", ErrEmpty, sector.describe())
	}
	elements, err := group.Generate(sector.Symmetries)
	if err != nil {
		return nil, err
	}
	if b.sym, err = newSymmetry(space, sector.Symmetries, elements, b.ladder.total); err != nil {
		return nil, err
	}
	if err := b.setNumbers(); err != nil {
		return nil, err
	}
	if err := b.refuseTooLarge(o.Memory); err != nil {
		return nil, err
	}
	b.listed = b.sym != nil || len(sector.Constraints) > 0
	if !b.listed {
		b.length = int(b.ladder.total)
		return b, nil
	}
	if err := b.enumerate(ctx, o); err != nil {
		return nil, err
	}
	if b.length == 0 {
		return nil, fmt.Errorf("basis: %w: every orbit drops out of%s", ErrEmpty, sector.describe())
	}
	return b, nil
}

// setNumbers prepares the numbering: of all configurations of the charges
// without symmetries, else of the candidates among the words.
func (b *Basis) setNumbers() error {
	if b.sym == nil {
		b.rank = newRanker(b.ladder)
		return nil
	}
	if !b.sym.words.isNatural() {
		var err error
		if b.ladder, err = newLadder(b.sym.words.space, b.sector.Charges); err != nil {
			return err
		}
	}
	b.numbers = newNumbering(b.sym, b.ladder)
	return nil
}

// words returns the space that the words are configurations of.
func (b *Basis) words() *Space {
	if b.sym == nil {
		return b.space
	}
	return b.sym.words.space
}

// refuseTooLarge compares a lower estimate of the memory with the limit.
func (b *Basis) refuseTooLarge(limit int64) error {
	total := b.ladder.total
	if total > math.MaxInt64/64 {
		return fmt.Errorf("basis: the sector has more than 1e17 configurations; fix more charges or take fewer sites")
	}
	if b.sym == nil || len(b.sector.Constraints) > 0 {
		return nil
	}
	need := int64(total)/int64(b.order())*10 + int64(b.numbers.total)/4
	if need > limit {
		return fmt.Errorf("basis: about %d states out of %d configurations need %d MiB, more than the limit of %d MiB; use more symmetries, or raise Options.Memory", total/uint64(b.order()), total, need>>20, limit>>20)
	}
	return nil
}

func (b *Basis) order() int {
	if b.sym == nil {
		return 1
	}
	return b.sym.order
}

// Space returns the space of the basis.
func (b *Basis) Space() *Space { return b.space }

// Sector returns the sector of the basis; its slices must not be changed.
func (b *Basis) Sector() Sector { return b.sector }

// Len returns the number of states.
func (b *Basis) Len() int { return b.length }

// GroupOrder returns the number of elements |G| of the symmetry group, 1 without
// symmetries.
func (b *Basis) GroupOrder() int { return b.order() }

// At returns the representative of state i, 0 <= i < Len().
func (b *Basis) At(i int) Configuration {
	if i < 0 || i >= b.length {
		panic("basis: state number out of range")
	}
	switch {
	case !b.listed:
		return b.ladder.unrank(uint64(i))
	case b.sym == nil:
		return Configuration(b.list[i])
	}
	return b.sym.configuration(b.list[i])
}

// ModeOrder returns the modes in the order in which they count where
// configurations are compared, the least first; see the package comment.
func (b *Basis) ModeOrder() []int {
	order := natural(b.space).mode
	if b.sym != nil {
		order = b.sym.words.mode
	}
	return append([]int(nil), order...)
}

// Index returns the number of the state whose representative is c; ok is false
// where c is not a representative of the basis (see [Basis.Component] for any
// configuration).
func (b *Basis) Index(c Configuration) (i int, ok bool) {
	if b.sym != nil {
		if uint64(c)&b.sym.outside != 0 {
			return 0, false
		}
		return b.find(b.sym.word(c))
	}
	rank, ok := b.rank.rank(c)
	if !ok || !b.listed {
		return int(rank), ok
	}
	return b.index.find(b.list, uint64(c), rank)
}

// find returns the place of a word in a symmetry sector.
func (b *Basis) find(w uint64) (int, bool) {
	number, ok := b.numbers.numberOf(w)
	if !ok {
		return 0, false
	}
	return b.index.find(b.list, w, number)
}

// Norm returns N_r = ‖Σ_g χ(g)* g|r⟩‖² of state i, the order of the group times
// that of the stabiliser; 1 without symmetries.
func (b *Basis) Norm(i int) float64 {
	return float64(b.order()) * float64(b.Stabiliser(i))
}

// Stabiliser returns the number of symmetries that keep the representative of
// state i; the orbit has GroupOrder()/Stabiliser(i) configurations.
func (b *Basis) Stabiliser(i int) int {
	if b.stab == nil {
		return 1
	}
	return int(b.stab[i]) + 1
}

// Stabilisers returns the sizes of all stabilisers, each less one; nil without
// symmetries. The slice is shared and must not be changed.
func (b *Basis) Stabilisers() []uint16 { return b.stab }

// Real reports whether all phases of the basis are +1 or -1, so that operators
// with real matrix elements between product states have real ones here.
func (b *Basis) Real() bool { return b.sym == nil || b.sym.units.denominator <= 2 }

// Memory returns the bytes that the basis holds.
func (b *Basis) Memory() int64 {
	bytes := int64(len(b.list))*8 + int64(len(b.stab))*2 + b.index.memory()
	if b.sym == nil {
		return bytes + b.rank.memory()
	}
	return bytes + b.sym.memory() + b.numbers.memory()
}

// String names the sector and its dimension.
func (b *Basis) String() string {
	return fmt.Sprintf("%d states with%s", b.length, b.sector.describe())
}
