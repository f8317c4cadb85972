package basis

import "ketloom/basis/group"

// Transform is a symmetry that acts on the product states of a space, in or out
// of any sector.
type Transform struct {
	space  *Space
	images *images
	units  *units
}

// Transform compiles an action. Errors: those of [Space.Resolve], and phases
// with a common denominator above 2^20.
func (s *Space) Transform(a group.Action) (*Transform, error) {
	mv, err := s.Resolve(a)
	if err != nil {
		return nil, err
	}
	u, err := newUnits(s, []group.Element{{Action: a}}, []*Mover{mv})
	if err != nil {
		return nil, err
	}
	plain := natural(s)
	return &Transform{space: s, images: newImages(plain, plain, 0, []*Mover{mv}, u), units: u}, nil
}

// Image returns c' and ε with g|c⟩ = ε|c'⟩. c must be a configuration of the space.
func (t *Transform) Image(c Configuration) (image Configuration, factor complex128) {
	phase := t.images.phase(0, uint64(c), t.units.half())
	return Configuration(t.images.image(0, uint64(c))), t.units.roots[phase%t.units.denominator]
}
