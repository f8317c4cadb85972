package basis

import (
	"errors"
	"fmt"

	"ketloom/basis/group"
)

// Sector says which states of a space are meant: those with the given values
// of charges, that no constraint forbids, and on which each symmetry acts as
// its eigenvalue. The zero value is the whole space.
type Sector struct {
	Charges     []ChargeValue      `json:"charges,omitempty"`
	Symmetries  []group.Eigenvalue `json:"symmetries,omitempty"`
	Constraints []Constraint       `json:"constraints,omitempty"`
}

// ErrEmpty is wrapped by the errors for sectors that hold no state.
var ErrEmpty = errors.New("the sector holds no state")

// Check reports the first reason for which the sector is not one of the space:
// an impossible charge, symmetry or constraint, a symmetry that changes a
// charge or a constraint.
func (k Sector) Check(space *Space) error {
	for _, q := range k.Charges {
		if err := q.Charge.Check(space); err != nil {
			return err
		}
		if q.Value > LargestWeight*MostBits || q.Value < -LargestWeight*MostBits {
			return fmt.Errorf("basis: the value %d of the charge %q is beyond any configuration", q.Value, q.Charge.Name)
		}
	}
	for _, c := range k.Constraints {
		if err := c.check(space); err != nil {
			return err
		}
	}
	for i, e := range k.Symmetries {
		mv, err := space.Resolve(e.Generator)
		if err != nil {
			return fmt.Errorf("basis: generator %d of the symmetries: %w", i, err)
		}
		for _, q := range k.Charges {
			if !q.preserved(space, mv) {
				return fmt.Errorf("basis: generator %d of the symmetries does not keep the charge %q = %d; drop one of the two, or take a value that it keeps", i, q.Charge.Name, q.Value)
			}
		}
		if err := k.keepsConstraints(space, i, e.Generator); err != nil {
			return err
		}
	}
	return nil
}

// preserved reports whether the symmetry keeps the charge at its value: the
// charge of the image is the charge itself plus nothing, or minus the charge
// plus what makes up for it.
func (q ChargeValue) preserved(space *Space, mv *Mover) bool {
	w, constant := q.Charge.ModeWeights(space)
	for _, sign := range []int{1, -1} {
		shift, ok := 0, true
		for m := range w {
			offset := w[mv.To[m]][mv.Levels[m][0]] - sign*w[m][0]
			for level := range w[m] {
				change := w[mv.To[m]][mv.Levels[m][level]] - sign*w[m][level] - offset
				ok = ok && q.Charge.reduce(change) == 0
			}
			shift += offset
		}
		// The image has the charge sign·(value-constant) + shift + constant.
		if ok && q.Charge.reduce(sign*(q.Value-constant)+shift+constant-q.Value) == 0 {
			return true
		}
	}
	return false
}

// keepsConstraints reports which constraint a symmetry breaks: each must be
// carried to one of the same list, by a symmetry that keeps its levels.
func (k Sector) keepsConstraints(space *Space, generator int, a group.Action) error {
	if len(k.Constraints) == 0 {
		return nil
	}
	known := map[string]bool{}
	for _, c := range k.Constraints {
		known[c.key()] = true
	}
	for n, c := range k.Constraints {
		image := Constraint{Most: c.Most}
		for _, site := range c.Sites {
			image.Sites = append(image.Sites, a.Sites[site])
			for level := range space.sites[site].Levels {
				if !keepsParticles(space.sites[site], level, a.Level(site, level)) {
					return fmt.Errorf("basis: generator %d of the symmetries relabels the levels of site %d, on which constraint %d counts; such a symmetry does not keep the constraint", generator, site, n)
				}
			}
		}
		if !known[image.key()] {
			return fmt.Errorf("basis: generator %d of the symmetries carries constraint %d (sites %v) to sites %v, where no such constraint stands", generator, n, c.Sites, image.Sites)
		}
	}
	return nil
}

func keepsParticles(site Site, level, image int) bool {
	if site.Kind == KindElectron {
		return level&1+level>>1 == image&1+image>>1
	}
	return level == image
}

// describe names the sector for messages.
func (k Sector) describe() string {
	text := ""
	for _, q := range k.Charges {
		text += fmt.Sprintf(" %s=%d", q.Charge.Name, q.Value)
		if q.Charge.Modulus > 0 {
			text += fmt.Sprintf(" (mod %d)", q.Charge.Modulus)
		}
	}
	for i, e := range k.Symmetries {
		text += fmt.Sprintf(" generator %d = exp(2πi·%v)", i, e.Turn)
	}
	if len(k.Constraints) > 0 {
		text += fmt.Sprintf(" %d constraints", len(k.Constraints))
	}
	if text == "" {
		return " the whole space"
	}
	return text
}
