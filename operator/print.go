package operator

import (
	"fmt"
	"strconv"
	"strings"

	"ketloom/basis"
)

// String writes the operator in the trade's notation, in the order in which
// its terms stand, such as "0.5 S⁺₀ S⁻₁ + Sᶻ₀ Sᶻ₁". The zero operator is "0".
func (a Operator) String() string {
	if a.err != nil {
		return a.err.Error()
	}
	if len(a.terms) == 0 {
		return "0"
	}
	var b strings.Builder
	for i, t := range a.terms {
		sign, number := coefficientText(t.Coefficient, len(t.Factors) == 0)
		switch {
		case i > 0:
			b.WriteString(" " + sign + " ")
		case sign == "-":
			b.WriteString("-")
		}
		b.WriteString(strings.TrimSpace(number + " " + productText(a.space, t.Factors)))
	}
	return b.String()
}

// termText writes one term.
func termText(space *basis.Space, t Term) string {
	return Operator{space: space, terms: []Term{t}}.String()
}

// coefficientText returns the sign of a coefficient and its magnitude, which
// is empty for one where factors follow.
func coefficientText(z complex128, alone bool) (sign, number string) {
	if imag(z) != 0 {
		return "+", strings.ReplaceAll(strconv.FormatComplex(z, 'g', -1, 128), "+0i)", ")")
	}
	x := real(z)
	sign = "+"
	if x < 0 {
		sign, x = "-", -x
	}
	if x == 1 && !alone {
		return sign, ""
	}
	return sign, strconv.FormatFloat(x, 'g', -1, 64)
}

func productText(space *basis.Space, factors []Factor) string {
	words := make([]string, len(factors))
	for i, f := range factors {
		words[i] = factorText(space, f)
	}
	return strings.Join(words, " ")
}

func factorText(space *basis.Space, f Factor) string {
	mode := space.Mode(f.Mode)
	kind := space.Site(mode.Site).Kind
	place := subscript(mode.Site)
	if kind == basis.KindElectron {
		place += []string{"↑", "↓"}[mode.Component]
	}
	letter := "c"
	if kind == basis.KindBoson {
		letter = "b"
	}
	switch {
	case f.Symbol == Transfer:
		return fmt.Sprintf("|%d⟩⟨%d|%s", f.To, f.From, place)
	case f.Symbol == SpinZ:
		return "Sᶻ" + place
	case f.Symbol == Number:
		return "n" + place
	case kind == basis.KindSpin && f.Symbol == Raise:
		return "S⁺" + place
	case kind == basis.KindSpin:
		return "S⁻" + place
	case f.Symbol == Raise:
		return letter + "†" + place
	}
	return letter + place
}

func subscript(n int) string {
	digits := []rune("₀₁₂₃₄₅₆₇₈₉")
	var b strings.Builder
	for _, d := range strconv.Itoa(n) {
		b.WriteRune(digits[d-'0'])
	}
	return b.String()
}
