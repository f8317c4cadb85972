package operator

import (
	"fmt"
	"math"

	"ketloom/basis"
)

// Symbol is the kind of an elementary operator on one mode.
type Symbol uint8

// The elementary operators. The order of the constants is that in which the
// factors of a canonical product stand.
const (
	Number   Symbol = iota + 1 // n: the level, of bosons and fermions
	SpinZ                      // Sᶻ: level - S
	Raise                      // S⁺, b† or c†
	Lower                      // S⁻, b or c
	Transfer                   // |to⟩⟨from|
)

var symbolNames = map[Symbol]string{Number: "number", SpinZ: "z", Raise: "raise", Lower: "lower", Transfer: "transfer"}

// String names the symbol.
func (s Symbol) String() string { return symbolNames[s] }

// Factor is an elementary operator on one mode. To and From are levels, used
// by Transfer only.
type Factor struct {
	Mode     int
	Symbol   Symbol
	To, From int
}

// Term is a product of factors with a coefficient; the rightmost factor acts
// first. No factors stand for the identity.
type Term struct {
	Coefficient complex128
	Factors     []Factor
}

// odd reports whether the factor changes the parity of a fermion mode.
func (f Factor) odd(space *basis.Space) bool {
	return space.Mode(f.Mode).Fermionic && (f.Symbol == Raise || f.Symbol == Lower)
}

// adjoint returns the factor's adjoint.
func (f Factor) adjoint() Factor {
	switch f.Symbol {
	case Raise:
		f.Symbol = Lower
	case Lower:
		f.Symbol = Raise
	case Transfer:
		f.To, f.From = f.From, f.To
	}
	return f
}

// local is an operator on the levels of one mode that changes the level by a
// definite number: |s⟩ -> amplitude[s] |s+shift⟩.
type local struct {
	shift     int
	amplitude []complex128
}

func identity(levels int) local {
	l := local{amplitude: make([]complex128, levels)}
	for s := range l.amplitude {
		l.amplitude[s] = 1
	}
	return l
}

// matrix returns the factor as an operator on the levels of its mode.
func (f Factor) matrix(space *basis.Space) local {
	mode := space.Mode(f.Mode)
	kind := space.Site(mode.Site).Kind
	l := local{amplitude: make([]complex128, mode.Levels)}
	top := mode.Levels - 1
	switch f.Symbol {
	case Number:
		for s := range l.amplitude {
			l.amplitude[s] = complex(float64(s), 0)
		}
	case SpinZ:
		for s := range l.amplitude {
			l.amplitude[s] = complex(float64(2*s-top)/2, 0)
		}
	case Raise:
		l.shift = 1
		for s := range top {
			l.amplitude[s] = complex(raising(kind, top, s), 0)
		}
	case Lower:
		l.shift = -1
		for s := 1; s <= top; s++ {
			l.amplitude[s] = complex(raising(kind, top, s-1), 0)
		}
	case Transfer:
		l.shift = f.To - f.From
		l.amplitude[f.From] = 1
	}
	return l
}

// raising returns the matrix element from level s to s+1: of S⁺ it is
// (S(S+1) - m(m+1))^½ = ((2S-s)(s+1))^½, of a creator (s+1)^½.
func raising(kind basis.Kind, top, s int) float64 {
	if kind == basis.KindSpin {
		return math.Sqrt(float64((top - s) * (s + 1)))
	}
	return math.Sqrt(float64(s + 1))
}

// times returns the product l·m, in which m acts first.
func (l local) times(m local) local {
	p := local{shift: l.shift + m.shift, amplitude: make([]complex128, len(m.amplitude))}
	for s, a := range m.amplitude {
		if mid := s + m.shift; a != 0 && mid >= 0 && mid < len(l.amplitude) {
			p.amplitude[s] = l.amplitude[mid] * a
		}
	}
	return p
}

// piece is a canonical elementary operator with a coefficient; symbol 0 stands
// for the identity.
type piece struct {
	coefficient complex128
	factor      Factor
}

// expand writes l on a mode in the canonical elementary operators.
func (l local) expand(space *basis.Space, m int) []piece {
	if space.Mode(m).Levels == 2 {
		return l.expandTwoLevels(space, m)
	}
	var pieces []piece
	if l.shift == 0 && l.amplitude[0] != 0 {
		pieces = append(pieces, piece{l.amplitude[0], Factor{}})
	}
	for s, a := range l.amplitude {
		to := s + l.shift
		if l.shift == 0 {
			a -= l.amplitude[0]
		}
		if a != 0 && to >= 0 && to < len(l.amplitude) {
			pieces = append(pieces, piece{a, Factor{Mode: m, Symbol: Transfer, To: to, From: s}})
		}
	}
	return pieces
}

func (l local) expandTwoLevels(space *basis.Space, m int) []piece {
	empty, full := l.amplitude[0], l.amplitude[1]
	var one, other piece
	switch l.shift {
	case 1:
		other = piece{empty, Factor{Mode: m, Symbol: Raise}}
	case -1:
		other = piece{full, Factor{Mode: m, Symbol: Lower}}
	case 0:
		if space.Site(space.Mode(m).Site).Kind == basis.KindSpin {
			one, other = piece{(empty + full) / 2, Factor{}}, piece{full - empty, Factor{Mode: m, Symbol: SpinZ}}
		} else {
			one, other = piece{empty, Factor{}}, piece{full - empty, Factor{Mode: m, Symbol: Number}}
		}
	}
	var pieces []piece
	for _, p := range []piece{one, other} {
		if p.coefficient != 0 {
			pieces = append(pieces, p)
		}
	}
	return pieces
}

// check reports why the factor is not one of the space.
func (f Factor) check(space *basis.Space) error {
	if f.Mode < 0 || f.Mode >= space.Modes() {
		return fmt.Errorf("operator: a factor on mode %d; the space has the modes 0 … %d", f.Mode, space.Modes()-1)
	}
	mode := space.Mode(f.Mode)
	kind := space.Site(mode.Site).Kind
	switch f.Symbol {
	case Raise, Lower:
		return nil
	case SpinZ:
		if kind == basis.KindSpin {
			return nil
		}
	case Number:
		if kind != basis.KindSpin {
			return nil
		}
	case Transfer:
		if mode.Fermionic {
			return fmt.Errorf("operator: |%d⟩⟨%d| on the fermion mode %d; use create, annihilate and number", f.To, f.From, f.Mode)
		}
		if f.To < 0 || f.From < 0 || f.To >= mode.Levels || f.From >= mode.Levels {
			return fmt.Errorf("operator: |%d⟩⟨%d| on site %d, which has the levels 0 … %d", f.To, f.From, mode.Site, mode.Levels-1)
		}
		return nil
	}
	return fmt.Errorf("operator: no operator %q on site %d, which is a %v", f.Symbol, mode.Site, space.Site(mode.Site))
}
