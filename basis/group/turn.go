package group

import (
	"fmt"
	"math"
)

// Turn is the phase exp(2πi·Num/Den), held as an exact fraction of a turn.
// The zero value is no turn. Values made by [NewTurn] and by the methods are
// normalised: Den > 0, 0 <= Num < Den, lowest terms; the fields may be set by
// hand to any fraction with Den > 0.
type Turn struct {
	Num int64 `json:"num"`
	Den int64 `json:"den"`
}

// largestDenominator keeps products of two denominators inside an int64.
const largestDenominator = 1 << 31

// NewTurn returns num/den of a turn, normalised: NewTurn(-1, 4) is 3/4. A den
// of zero gives an invalid Turn that [Turn.Check] refuses.
func NewTurn(num, den int64) Turn {
	return Turn{num, den}.normal()
}

// Check reports whether t is a usable fraction: Den positive (or both fields
// zero) and at most 2^31.
func (t Turn) Check() error {
	if t == (Turn{}) {
		return nil
	}
	if t.Den <= 0 || t.Den > largestDenominator {
		return fmt.Errorf("group: the phase %d/%d of a turn: the denominator must lie between 1 and 2^31", t.Num, t.Den)
	}
	return nil
}

// normal returns t with 0 <= Num < Den in lowest terms. A fraction without a
// usable denominator is returned as it is, for Check to refuse.
func (t Turn) normal() Turn {
	if t.Den == 0 {
		if t.Num == 0 {
			return Turn{0, 1}
		}
		return t
	}
	if t.Den < 0 {
		if t.Den == math.MinInt64 || t.Num == math.MinInt64 {
			return Turn{1, 0}
		}
		t.Num, t.Den = -t.Num, -t.Den
	}
	if t.Num == 0 || t.Den == 1 {
		return Turn{0, 1}
	}
	t.Num %= t.Den
	if t.Num < 0 {
		t.Num += t.Den
	}
	d := gcd(t.Num, t.Den)
	return Turn{t.Num / d, t.Den / d}
}

func gcd(a, b int64) int64 {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

// Add returns the phase of the product exp(2πi t)·exp(2πi u).
func (t Turn) Add(u Turn) Turn {
	t, u = t.normal(), u.normal()
	if t.Den <= 0 || u.Den <= 0 {
		return Turn{1, 0}
	}
	if t.Num == 0 {
		return u
	}
	if u.Num == 0 {
		return t
	}
	d := gcd(t.Den, u.Den)
	return Turn{t.Num*(u.Den/d) + u.Num*(t.Den/d), t.Den / d * u.Den}.normal()
}

// Neg returns the phase of the complex conjugate.
func (t Turn) Neg() Turn {
	t = t.normal()
	return Turn{-t.Num, t.Den}.normal()
}

// Times returns the phase of the n-th power, for any integer n.
func (t Turn) Times(n int64) Turn {
	t = t.normal()
	if t.Den <= 0 {
		return t
	}
	n %= t.Den
	return Turn{t.Num * n, t.Den}.normal()
}

// Equal reports whether t and u are the same phase.
func (t Turn) Equal(u Turn) bool { return t.normal() == u.normal() }

// IsZero reports whether the phase is one.
func (t Turn) IsZero() bool { return t.normal().Num == 0 }

// IsReal reports whether the phase is +1 or -1.
func (t Turn) IsReal() bool {
	t = t.normal()
	return t.Num == 0 || 2*t.Num == t.Den
}

// Complex returns exp(2πi t). Multiples of an eighth of a turn come out with
// exactly equal or vanishing parts, and conjugate phases are exact
// conjugates.
func (t Turn) Complex() complex128 {
	t = t.normal()
	if t.Den <= 0 {
		return complex(math.NaN(), math.NaN())
	}
	// Reduce to the first eighth of a turn, where sine and cosine are accurate.
	eighths := 8 * t.Num / t.Den
	rest := 8*t.Num - eighths*t.Den
	if eighths%2 == 1 {
		rest = t.Den - rest
	}
	s, c := math.Sincos(float64(rest) / float64(t.Den) * math.Pi / 4)
	if rest == t.Den {
		s, c = math.Sqrt2/2, math.Sqrt2/2
	}
	switch eighths {
	case 0:
		return complex(c, s)
	case 1:
		return complex(s, c)
	case 2:
		return complex(-s, c)
	case 3:
		return complex(-c, s)
	case 4:
		return complex(-c, -s)
	case 5:
		return complex(-s, -c)
	case 6:
		return complex(s, -c)
	default:
		return complex(c, -s)
	}
}

// String writes the fraction of a turn, such as 3/4.
func (t Turn) String() string {
	t = t.normal()
	return fmt.Sprintf("%d/%d", t.Num, t.Den)
}
