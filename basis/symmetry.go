package basis

import "ketloom/basis/group"

// symmetry is the group of a sector, compiled for the folding of words (see
// patterns). Every element is h·g_j, with h in the group H that keeps the upper
// places and g_j from one of its cosets; the first of both is the identity.
type symmetry struct {
	order   int
	words   *layout
	outside uint64 // bits that no configuration has
	cut     int    // bits below the upper places
	low     uint64 // mask of these
	lows    int    // chunks of these

	enter    *images  // by j: configuration to word of g_j
	exchange *images  // by j: word to word of g_j
	keep     *images  // by h: word to word
	short    []uint32 // by h: what keep does to the lower bits, where 32 bits hold it
	leave    *images  // word to configuration; nil where they are equal
	patterns *patterns

	cosets, kept int
	shortStride  int
	ofCoset      []uint32 // χ(g_j)*, in phase units
	ofKept       []uint32 // χ(h)*
	units        *units
	plain        bool // no phases but those of χ
	straight     bool // symmetries move bits and flip some, whatever the others are
}

// path names the element t·h·g_j.
type path struct{ j, h, t int }

// newSymmetry compiles the elements that the generators span; a group of one
// element gives nil. total is the number of configurations of the charges.
func newSymmetry(space *Space, generators []group.Eigenvalue, elements []group.Element, total uint64) (*symmetry, error) {
	if len(elements) == 1 {
		return nil, nil
	}
	movers := make([]*Mover, len(elements))
	for g, e := range elements {
		mv, err := space.Resolve(e.Action)
		if err != nil {
			return nil, err
		}
		movers[g] = mv
	}
	u, err := newUnits(space, elements, movers)
	if err != nil {
		return nil, err
	}
	chi, err := characters(space, generators, elements, movers, u)
	if err != nil {
		return nil, err
	}
	s := &symmetry{order: len(elements), units: u}
	if space.bits < MostBits {
		s.outside = ^uint64(0) << space.bits
	}
	for _, spare := range []bool{false, true} {
		s.words, s.cut = upperPlaces(space, movers, total, spare)
		s.low = 1<<s.cut - 1
		s.split(space, elements, movers, chi)
		if s.patterns != nil {
			break
		}
	}
	return s, nil
}

// split divides the group into H and its cosets and makes the tables.
func (s *symmetry) split(space *Space, elements []group.Element, movers []*Mover, chi []uint32) {
	var upper uint64
	for at, m := range s.words.mode {
		if s.words.space.modes[at].Shift >= s.cut {
			upper |= 1 << m
		}
	}
	var kept, cosets []int
	seen := map[uint64]bool{}
	for g, mv := range movers {
		from := preimage(mv, upper)
		if from == upper {
			kept = append(kept, g)
		}
		if !seen[from] {
			seen[from] = true
			cosets = append(cosets, g)
		}
	}
	choose := func(list []int) (mv []*Mover, phases []uint32) {
		for _, g := range list {
			mv, phases = append(mv, movers[g]), append(phases, chi[g])
		}
		return mv, phases
	}
	plain := natural(space)
	var keepers, enterers []*Mover
	keepers, s.ofKept = choose(kept)
	enterers, s.ofCoset = choose(cosets)
	s.kept, s.cosets = len(kept), len(cosets)
	s.straight = moveBits(space, enterers)
	s.enter = newImages(plain, s.words, 0, enterers, s.units)
	s.exchange = newImages(s.words, s.words, s.cut, enterers, nil)
	s.keep = newImages(s.words, s.words, s.cut, keepers, s.units)
	s.plain = s.enter.plain() && s.keep.plain()
	s.lows = 0
	for _, c := range s.keep.chunks {
		if int(c.shift) < s.cut {
			s.lows++
		}
	}
	s.shorten()
	s.leave = nil
	if !s.words.isNatural() {
		s.leave = newImages(s.words, plain, s.cut, movers[:1], nil)
	}
	s.patterns = newPatterns(s.words, s.cut, s.keep, s.kept, inverses(elements, kept))
}

// shorten copies the part of the tables of H that folding needs most into a
// small one.
func (s *symmetry) shorten() {
	if s.cut > 32 || s.lows == 0 {
		return
	}
	last := s.keep.chunks[s.lows-1]
	s.shortStride = last.offset + int(last.mask) + 1
	s.short = make([]uint32, 0, s.kept*s.shortStride)
	for h := range s.kept {
		for _, bits := range s.keep.bits[h*s.keep.stride : h*s.keep.stride+s.shortStride] {
			s.short = append(s.short, uint32(bits))
		}
	}
}

// lower returns what element h of H makes of the lower bits of w.
func (s *symmetry) lower(h int, w uint64) uint64 {
	if s.short == nil {
		return s.keep.part(h, s.lows, w)
	}
	table := s.short[h*s.shortStride : (h+1)*s.shortStride]
	var out uint32
	for i := range s.keep.chunks[:s.lows] {
		k := &s.keep.chunks[i]
		out |= table[k.offset+int(w>>k.shift&k.mask)]
	}
	return uint64(out)
}

// moveBits reports whether symmetries act on bits one by one: a mode of more than two
// levels keeps its levels.
func moveBits(space *Space, movers []*Mover) bool {
	for _, mv := range movers {
		for m, levels := range mv.Levels {
			for level, to := range levels {
				if space.modes[m].Levels > 2 && level != to {
					return false
				}
			}
		}
	}
	return true
}

// inverses returns, for each of the listed elements, the place of its inverse
// in the list.
func inverses(elements []group.Element, list []int) []int {
	place := map[string]int{}
	for at, g := range list {
		place[elements[g].Action.Key()] = at
	}
	out := make([]int, len(list))
	for at, g := range list {
		out[at] = place[elements[g].Action.Inverse().Key()]
	}
	return out
}

// word returns the word of a configuration.
func (s *symmetry) word(c Configuration) uint64 {
	if s.leave == nil {
		return uint64(c)
	}
	return s.enter.image(0, uint64(c))
}

// configuration returns the configuration of a word.
func (s *symmetry) configuration(w uint64) Configuration {
	if s.leave == nil {
		return Configuration(w)
	}
	return Configuration(s.leave.image(0, w))
}

// smallest returns the smallest word of the orbit of a configuration, and an
// element that carries the configuration to it. ok is false where c is no
// configuration of the space.
func (s *symmetry) smallest(c uint64) (r uint64, p path, ok bool) {
	if c&s.outside != 0 {
		return 0, p, false
	}
	class, low := uint32(noClass), ^uint64(0)
	for j := range s.cosets {
		w := s.enter.image(j, c)
		e := s.patterns.entries[w>>s.cut]
		k := classOf(e)
		if k > class || k == noClass {
			continue
		}
		if k < class {
			class, low = k, ^uint64(0)
		}
		here := path{j, int(viaOf(e)), 0}
		v := s.lower(here.h, w)
		if v < low {
			low, p = v, here
		}
		if s.patterns.stab[k] != 0 {
			low, p = s.smallerByStabiliser(k, v, low, here, p)
		}
	}
	if class == noClass {
		return 0, p, false
	}
	return uint64(s.patterns.least[class])<<s.cut | low, p, true
}

// smallerByStabiliser tries the elements that keep the pattern of the class on
// the lower bits v, reached by the path here; it returns the smallest lower
// bits known, and the path there.
func (s *symmetry) smallerByStabiliser(class uint32, v, low uint64, here, best path) (uint64, path) {
	s.eachKeeping(class, func(t int) bool {
		if x := s.lower(t, v); x < low {
			low, best = x, path{here.j, here.h, t}
		}
		return true
	})
	return low, best
}

// eachKeeping calls visit with the elements of H, but the identity, that keep
// the smallest pattern of the class, until it returns false; it reports whether
// it went through.
func (s *symmetry) eachKeeping(class uint32, visit func(t int) bool) bool {
	if stab := s.patterns.stab[class]; stab != everyElement {
		for _, t := range s.patterns.keeping[stab] {
			if !visit(int(t)) {
				return false
			}
		}
		return true
	}
	least := uint64(s.patterns.least[class])
	for t := 1; t < s.kept; t++ {
		if s.keep.image(t, least<<s.cut)>>s.cut == least && !visit(t) {
			return false
		}
	}
	return true
}

// phase returns χ(g)*·ε in phase units, where g = t·h·g_j makes ε|image⟩ of the
// configuration c.
func (s *symmetry) phase(c uint64, p path) uint32 {
	sum := uint64(s.ofCoset[p.j]) + uint64(s.ofKept[p.h]) + uint64(s.ofKept[p.t])
	if !s.plain {
		half := s.units.half()
		sum += uint64(s.enter.phase(p.j, c, half))
		w := s.enter.image(p.j, c)
		sum += uint64(s.keep.phase(p.h, w, half))
		w = s.keep.image(p.h, w)
		sum += uint64(s.keep.phase(p.t, w, half))
	}
	if s.units.denominator == 1 {
		return 0
	}
	return uint32(sum % uint64(s.units.denominator))
}

// stabiliser reports whether the word r, whose pattern is the smallest of the
// class, is the smallest of its orbit, and, if it is, the number of elements that
// keep it; 0 where their phases cancel. bases are those of the pattern.
func (s *symmetry) stabiliser(r uint64, class uint32, bases []uint64) (size int, smallest bool) {
	low, cancel := r&s.low, false
	size = 1
	count := func(v uint64, p path) bool {
		if v == low {
			size++
			cancel = cancel || s.phase(uint64(s.configuration(r)), p) != 0
		}
		return v >= low
	}
	stab := s.patterns.stab[class]
	if stab != 0 && !s.eachKeeping(class, func(t int) bool { return count(s.lower(t, low), path{0, 0, t}) }) {
		return 0, false
	}
	for j := 1; j < s.cosets; j++ {
		w := bases[j] | s.exchange.part(j, s.lows, r)
		e := s.patterns.entries[w>>s.cut]
		k := classOf(e)
		if k > class {
			continue
		}
		if k < class {
			return 0, false
		}
		h := int(viaOf(e))
		v := s.lower(h, w)
		if !count(v, path{j, h, 0}) || stab != 0 && !s.eachKeeping(class, func(t int) bool { return count(s.lower(t, v), path{j, h, t}) }) {
			return 0, false
		}
	}
	if cancel {
		return 0, true
	}
	return size, true
}

// bases fills dst with the images of an upper pattern under the cosets.
func (s *symmetry) bases(pattern uint64, dst []uint64) []uint64 {
	w := pattern << s.cut
	dst = dst[:0]
	for j := range s.cosets {
		dst = append(dst, s.exchange.rest(j, s.lows, w))
	}
	return dst
}

func (s *symmetry) memory() int64 {
	total := int64(len(s.short))*4 + s.enter.memory() + s.exchange.memory() + s.keep.memory() + s.patterns.memory()
	if s.leave != nil {
		total += s.leave.memory()
	}
	return total + int64(len(s.units.roots))*16
}

// characters returns χ(g)* of the elements in phase units. The elements are made
// to multiply as operators do: where fermions are exchanged with holes, the
// product of two symmetries can be minus the symmetry that their composition
// names; the sign is then put into its character. A group in which the identity
// would come out as minus one has no such signs.
func characters(space *Space, generators []group.Eigenvalue, elements []group.Element, movers []*Mover, u *units) ([]uint32, error) {
	chi := make([]uint32, len(elements))
	for g := range elements {
		chi[g] = u.of(elements[g].Turn.Neg())
	}
	if !anyFlipped(movers) {
		return chi, nil
	}
	return resolveSigns(space, generators, elements, movers, chi, u)
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
