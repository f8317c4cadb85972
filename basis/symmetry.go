package basis

import (
	"fmt"
	"math/bits"

	"ketloom/basis/group"
)

// symmetry is the group of a sector, compiled into tables that give the image
// of a configuration under an element in a few look-ups, one a chunk of
// neighbouring modes.
type symmetry struct {
	order  int
	chunks []chunk
	stride int // entries an element

	images  []uint64 // image of the bits of a chunk
	inverts []uint64 // fermions: xor of the masks of modes that they overtake
	phases  []uint32 // phase of the bits of a chunk, in units of 1/denominator
	chi     []uint32 // χ(g)*, in the same units

	denominator uint32
	roots       []complex128 // exp(2πi j/denominator)
}

// chunk is a run of neighbouring modes that one look-up covers.
type chunk struct {
	shift  uint
	mask   uint64
	offset int
	modes  []int
}

// chunkBits is the widest chunk of more than one mode.
const chunkBits = 9

// mostDenominator bounds the common denominator of all phases of a sector.
const mostDenominator = 1 << 20

// newSymmetry compiles the elements that the generators span; a group of one
// element gives nil.
func newSymmetry(space *Space, generators []group.Eigenvalue, elements []group.Element) (*symmetry, error) {
	if len(elements) == 1 {
		return nil, nil
	}
	s := &symmetry{order: len(elements)}
	s.cut(space)
	movers := make([]*Mover, len(elements))
	for g, e := range elements {
		mv, err := space.Resolve(e.Action)
		if err != nil {
			return nil, err
		}
		movers[g] = mv
	}
	if err := s.setDenominator(space, elements, movers); err != nil {
		return nil, err
	}
	entries := len(elements) * s.stride
	s.images = make([]uint64, entries)
	if space.fermions != 0 {
		s.inverts = make([]uint64, entries)
	}
	if s.denominator > 1 {
		s.phases = make([]uint32, entries)
	}
	for g, mv := range movers {
		s.chi = append(s.chi, s.units(elements[g].Turn.Neg()))
		s.fill(space, g, mv)
	}
	if err := s.resolveSigns(generators, elements, movers); err != nil {
		return nil, err
	}
	return s, nil
}

// resolveSigns makes the elements multiply as operators do. Where fermions are
// exchanged with holes, the product of two symmetries can be minus the symmetry
// that their composition names; the sign is then put into its character. A
// group in which the identity would come out as minus one has no such signs.
func (s *symmetry) resolveSigns(generators []group.Eigenvalue, elements []group.Element, movers []*Mover) error {
	if !anyFlipped(movers) {
		return nil
	}
	place := map[string]int{}
	for g, e := range elements {
		place[e.Action.Key()] = g
	}
	bare := append([]uint32(nil), s.chi...)
	sign := make([]int, len(elements)) // 0: not known yet
	sign[0] = 1
	for done, queue := 0, []int{0}; done < len(queue); done++ {
		g := queue[done]
		for i, e := range generators {
			a := place[e.Generator.Key()]
			h := place[e.Generator.Compose(elements[g].Action).Key()]
			// Both ways to the same product state; what differs is the sign.
			twice := s.phase(g, 0) - bare[g] + s.phase(a, s.image(g, 0)) - bare[a]
			once := s.phase(h, 0) - bare[h]
			value := sign[g]
			if (twice+4*s.denominator-once)%s.denominator != 0 {
				value = -value
			}
			if sign[h] != 0 && sign[h] != value {
				return fmt.Errorf("basis: the symmetries exchange occupied and empty fermion modes so that generator %d closes only up to a sign; give it the phase of a quarter turn on one level of one site more, or drop it", i)
			}
			if sign[h] == 0 {
				sign[h] = value
				queue = append(queue, h)
			}
		}
	}
	for h, v := range sign {
		if v < 0 {
			s.chi[h] = (s.chi[h] + s.denominator/2) % s.denominator
		}
	}
	return nil
}

func anyFlipped(movers []*Mover) bool {
	for _, mv := range movers {
		for _, f := range mv.Flipped {
			if f {
				return true
			}
		}
	}
	return false
}

// cut divides the modes into chunks.
func (s *symmetry) cut(space *Space) {
	for m := 0; m < len(space.modes); {
		c := chunk{shift: uint(space.modes[m].Shift), offset: s.stride}
		bits := 0
		for ; m < len(space.modes) && (bits == 0 || bits+space.modes[m].Width <= chunkBits); m++ {
			bits += space.modes[m].Width
			c.modes = append(c.modes, m)
		}
		c.mask = 1<<bits - 1
		s.stride += 1 << bits
		s.chunks = append(s.chunks, c)
	}
}

// setDenominator finds the common denominator of all phases; it is even where
// signs of fermions occur.
func (s *symmetry) setDenominator(space *Space, elements []group.Element, movers []*Mover) error {
	d := int64(1)
	if space.fermions != 0 {
		d = 2
	}
	include := func(t group.Turn) error {
		den := t.Add(group.Turn{}).Den
		d = d / greatestDivisor(d, den) * den
		if d > mostDenominator {
			return fmt.Errorf("basis: the phases of the symmetries have a common denominator above %d; use simpler fractions of a turn", mostDenominator)
		}
		return nil
	}
	for g, e := range elements {
		if err := include(e.Turn); err != nil {
			return err
		}
		for _, list := range movers[g].Phases {
			for _, t := range list {
				if err := include(t); err != nil {
					return err
				}
			}
		}
	}
	s.denominator = uint32(d)
	s.roots = make([]complex128, d)
	for j := range s.roots {
		s.roots[j] = group.NewTurn(int64(j), d).Complex()
	}
	return nil
}

func greatestDivisor(a, b int64) int64 {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

// units writes a phase as a number of 1/denominator turns.
func (s *symmetry) units(t group.Turn) uint32 {
	t = t.Add(group.Turn{}) // normalised
	return uint32(t.Num * (int64(s.denominator) / t.Den))
}

// fill computes the tables of element g.
func (s *symmetry) fill(space *Space, g int, mv *Mover) {
	overtakes, vacuum := reordering(space, mv)
	base := g * s.stride
	for _, c := range s.chunks {
		for value := uint64(0); value <= c.mask; value++ {
			at := base + c.offset + int(value)
			phase := group.Turn{}
			for _, m := range c.modes {
				mode := space.modes[m]
				level := mode.Level(Configuration(value << c.shift))
				if level >= mode.Levels {
					continue
				}
				to := space.modes[mv.To[m]]
				s.images[at] |= uint64(mv.Levels[m][level]) << to.Shift
				phase = phase.Add(mv.Phases[m][level])
				if mode.Fermionic && level == 1 {
					s.inverts[at] ^= overtakes[m]
					if vacuum[m] {
						phase = phase.Add(group.NewTurn(1, 2))
					}
				}
			}
			if s.phases != nil {
				s.phases[at] = s.units(phase)
			}
		}
	}
}

// reordering returns what the sign of the reordering needs: for each fermionic
// mode the higher modes whose images lie lower, and whether the number of
// exchanged (filled) modes below its image is odd.
func reordering(space *Space, mv *Mover) (overtakes []uint64, vacuum []bool) {
	overtakes, vacuum = make([]uint64, len(space.modes)), make([]bool, len(space.modes))
	var filled uint64
	for m, flipped := range mv.Flipped {
		if flipped {
			filled |= 1 << space.modes[mv.To[m]].Shift
		}
	}
	for m, mode := range space.modes {
		if !mode.Fermionic {
			continue
		}
		to := space.modes[mv.To[m]].Shift
		for higher := m + 1; higher < len(space.modes); higher++ {
			if space.modes[higher].Fermionic && space.modes[mv.To[higher]].Shift < to {
				overtakes[m] |= 1 << space.modes[higher].Shift
			}
		}
		vacuum[m] = bits.OnesCount64(filled&(1<<to-1))%2 == 1
	}
	return overtakes, vacuum
}

// image returns the configuration that element g makes of c.
func (s *symmetry) image(g int, c uint64) uint64 {
	table := s.images[g*s.stride : (g+1)*s.stride]
	var out uint64
	for i := range s.chunks {
		k := &s.chunks[i]
		out |= table[k.offset+int(c>>k.shift&k.mask)]
	}
	return out
}

// phase returns χ(g)*·ε in units of 1/denominator, where g|c⟩ = ε|image⟩.
func (s *symmetry) phase(g int, c uint64) uint32 {
	sum := s.chi[g]
	base := g * s.stride
	if s.phases != nil {
		for i := range s.chunks {
			k := &s.chunks[i]
			sum += s.phases[base+k.offset+int(c>>k.shift&k.mask)]
		}
	}
	if s.inverts != nil {
		var x uint64
		for i := range s.chunks {
			k := &s.chunks[i]
			x ^= s.inverts[base+k.offset+int(c>>k.shift&k.mask)]
		}
		sum += uint32(bits.OnesCount64(x&c)&1) * (s.denominator / 2)
	}
	return sum % s.denominator
}

// smallest returns the smallest configuration of the orbit of c and the first
// element that carries c to it.
func (s *symmetry) smallest(c uint64) (r uint64, g int) {
	r = c
	for h := 1; h < s.order; h++ {
		if image := s.image(h, c); image < r {
			r, g = image, h
		}
	}
	return r, g
}

// stabiliser reports whether c is the smallest of its orbit and, if it is,
// the number of elements that keep it; 0 where their phases cancel.
func (s *symmetry) stabiliser(c uint64) (size int, smallest bool) {
	cancel := false
	size = 1
	for h := 1; h < s.order; h++ {
		image := s.image(h, c)
		if image < c {
			return 0, false
		}
		if image == c {
			size++
			cancel = cancel || s.phase(h, c) != 0
		}
	}
	if cancel {
		return 0, true
	}
	return size, true
}

func (s *symmetry) memory() int64 {
	return int64(len(s.images)+len(s.inverts))*8 + int64(len(s.phases))*4 + int64(len(s.roots))*16
}
