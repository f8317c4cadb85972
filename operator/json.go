package operator

import (
	"encoding/json"
	"fmt"
	"math"

	"ketloom/basis"
)

// termForm is the JSON form of a term: [re, im] and its factors.
type termForm struct {
	Coefficient [2]float64   `json:"coefficient"`
	Factors     []factorForm `json:"factors,omitempty"`
}

// factorForm is the JSON form of a factor.
type factorForm struct {
	Mode   int    `json:"mode"`
	Symbol string `json:"symbol"`
	To     int    `json:"to,omitempty"`
	From   int    `json:"from,omitempty"`
}

// MarshalJSON writes the terms as they stand: coefficients as [re, im], factors
// by mode and name, the rightmost acting first. An operator with an error is
// not written.
func (a Operator) MarshalJSON() ([]byte, error) {
	if a.err != nil {
		return nil, a.err
	}
	forms := make([]termForm, len(a.terms))
	for i, t := range a.terms {
		forms[i].Coefficient = [2]float64{real(t.Coefficient), imag(t.Coefficient)}
		for _, f := range t.Factors {
			forms[i].Factors = append(forms[i].Factors, factorForm{f.Mode, f.Symbol.String(), f.To, f.From})
		}
	}
	return json.Marshal(forms)
}

// Decode reads an operator on the space from its JSON form. Errors: text that
// is not this form, unknown symbols, modes or levels that the space does not
// have, coefficients that are not finite.
func Decode(space *basis.Space, data []byte) (Operator, error) {
	if space == nil {
		return Operator{}, On(nil).Zero().err
	}
	var forms []termForm
	if err := json.Unmarshal(data, &forms); err != nil {
		return Operator{}, fmt.Errorf("operator: not the description of an operator: %w", err)
	}
	symbols := map[string]Symbol{}
	for s, name := range symbolNames {
		symbols[name] = s
	}
	a := Operator{space: space, terms: make([]Term, len(forms))}
	for i, form := range forms {
		re, im := form.Coefficient[0], form.Coefficient[1]
		if math.IsInf(re, 0) || math.IsInf(im, 0) || math.IsNaN(re) || math.IsNaN(im) {
			return Operator{}, fmt.Errorf("operator: term %d has the coefficient (%v, %v); coefficients must be finite", i, re, im)
		}
		a.terms[i].Coefficient = complex(re, im)
		for _, f := range form.Factors {
			factor := Factor{f.Mode, symbols[f.Symbol], f.To, f.From}
			if err := factor.check(space); err != nil {
				return Operator{}, fmt.Errorf("operator: term %d: %w", i, err)
			}
			a.terms[i].Factors = append(a.terms[i].Factors, factor)
		}
	}
	return a, nil
}
