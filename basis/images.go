package basis

import (
	"math/bits"

	"ketloom/basis/group"
)

// images gives the image of a word under each of some symmetries in a few
// look-ups, one a chunk of neighbouring modes, and the phase that goes with it.
type images struct {
	chunks []chunk
	stride int // entries an element

	bits    []uint64 // image of the bits of a chunk
	inverts []uint64 // fermions: xor of the masks of modes that they overtake
	phases  []uint32 // phase of the bits of a chunk, in units of the sector
}

// chunk is a run of neighbouring modes that one look-up covers.
type chunk struct {
	shift  uint
	mask   uint64
	offset int
	places []int
}

// widestChunk is the widest chunk of more than one mode, in bits;
// imageMemory is the size above which narrower ones are used.
const (
	widestChunk = 9
	imageMemory = 64 << 20
)

// cutWords divides the places of a layout into chunks for the given number of
// elements; none reaches across the cut, a number of bits.
func cutWords(l *layout, cut, elements int) (chunks []chunk, stride int) {
	for width := widestChunk; ; width -= 2 {
		chunks, stride = cutAt(l, cut, width)
		if elements*stride*8 <= imageMemory || width <= 3 {
			return chunks, stride
		}
	}
}

func cutAt(l *layout, cut, width int) (chunks []chunk, stride int) {
	modes := l.space.modes
	for m := 0; m < len(modes); {
		c := chunk{shift: uint(modes[m].Shift), offset: stride}
		size := 0
		for ; m < len(modes) && (size == 0 || size+modes[m].Width <= width); m++ {
			if size > 0 && modes[m].Shift == cut {
				break
			}
			size += modes[m].Width
			c.places = append(c.places, m)
		}
		c.mask = 1<<size - 1
		stride += 1 << size
		chunks = append(chunks, c)
	}
	return chunks, stride
}

// newImages makes the tables that carry words of one layout to words of
// another. Without units no phases are kept.
func newImages(from, to *layout, cut int, movers []*Mover, units *units) *images {
	t := &images{}
	t.chunks, t.stride = cutWords(from, cut, len(movers))
	entries := len(movers) * t.stride
	t.bits = make([]uint64, entries)
	if units != nil {
		if from.space.fermions != 0 {
			t.inverts = make([]uint64, entries)
		}
		if units.denominator > 1 {
			t.phases = make([]uint32, entries)
		}
	}
	for e, mv := range movers {
		t.fill(from, to, e, mv, units)
	}
	t.dropPlain()
	return t
}

// dropPlain forgets phases and signs that are all one.
func (t *images) dropPlain() {
	none := true
	for _, p := range t.phases {
		none = none && p == 0
	}
	if none {
		t.phases = nil
	}
	none = true
	for _, x := range t.inverts {
		none = none && x == 0
	}
	if none {
		t.inverts = nil
	}
}

// fill computes the tables of element e.
func (t *images) fill(from, to *layout, e int, mv *Mover, units *units) {
	overtakes, vacuum := reordering(from, mv)
	base := e * t.stride
	for _, c := range t.chunks {
		for value := uint64(0); value <= c.mask; value++ {
			at := base + c.offset + int(value)
			phase := group.Turn{}
			for _, p := range c.places {
				mode := from.space.modes[p]
				level := mode.Level(Configuration(value << c.shift))
				m := from.mode[p]
				shift := to.space.modes[to.place[mv.To[m]]].Shift
				if level >= mode.Levels { // stays one that the mode does not have
					t.bits[at] |= uint64(level) << shift
					continue
				}
				t.bits[at] |= uint64(mv.Levels[m][level]) << shift
				phase = phase.Add(mv.Phases[m][level])
				if mode.Fermionic && level == 1 {
					if t.inverts != nil {
						t.inverts[at] ^= overtakes[p]
					}
					if vacuum[p] {
						phase = phase.Add(group.NewTurn(1, 2))
					}
				}
			}
			if t.phases != nil {
				t.phases[at] = units.of(phase)
			}
		}
	}
}

// reordering returns what the sign of the reordering needs, by places: for each
// fermionic mode the higher modes whose images lie lower, as bits of the
// layout, and whether the number of exchanged (filled) modes below its image is
// odd. Higher and lower are meant in the order of the space.
func reordering(l *layout, mv *Mover) (overtakes []uint64, vacuum []bool) {
	modes := l.space.modes
	overtakes, vacuum = make([]uint64, len(modes)), make([]bool, len(modes))
	filled := make([]bool, len(modes)) // by mode
	for m, flipped := range mv.Flipped {
		if flipped {
			filled[mv.To[m]] = true
		}
	}
	for p, mode := range modes {
		if !mode.Fermionic {
			continue
		}
		m := l.mode[p]
		for q, other := range modes {
			if higher := l.mode[q]; other.Fermionic && higher > m && mv.To[higher] < mv.To[m] {
				overtakes[p] |= 1 << other.Shift
			}
		}
		for k := range mv.To[m] {
			vacuum[p] = vacuum[p] != filled[k]
		}
	}
	return overtakes, vacuum
}

// image returns the word that element e makes of w.
func (t *images) image(e int, w uint64) uint64 {
	table := t.bits[e*t.stride : (e+1)*t.stride]
	var out uint64
	for i := range t.chunks {
		k := &t.chunks[i]
		out |= table[k.offset+int(w>>k.shift&k.mask)]
	}
	return out
}

// part returns what element e makes of the bits of w in the first chunks.
func (t *images) part(e, chunks int, w uint64) uint64 {
	table := t.bits[e*t.stride : (e+1)*t.stride]
	var out uint64
	for i := range t.chunks[:chunks] {
		k := &t.chunks[i]
		out |= table[k.offset+int(w>>k.shift&k.mask)]
	}
	return out
}

// rest returns what element e makes of the bits of w in the other chunks.
func (t *images) rest(e, chunks int, w uint64) uint64 {
	table := t.bits[e*t.stride : (e+1)*t.stride]
	var out uint64
	for i := range t.chunks[chunks:] {
		k := &t.chunks[chunks+i]
		out |= table[k.offset+int(w>>k.shift&k.mask)]
	}
	return out
}

// phase returns ε in phase units, where element e makes ε|image⟩ of |w⟩; half
// is the number of units of half a turn. It may exceed one turn.
func (t *images) phase(e int, w uint64, half uint32) uint32 {
	var sum uint32
	base := e * t.stride
	if t.phases != nil {
		for i := range t.chunks {
			k := &t.chunks[i]
			sum += t.phases[base+k.offset+int(w>>k.shift&k.mask)]
		}
	}
	if t.inverts != nil {
		var x uint64
		for i := range t.chunks {
			k := &t.chunks[i]
			x ^= t.inverts[base+k.offset+int(w>>k.shift&k.mask)]
		}
		sum += uint32(bits.OnesCount64(x&w)&1) * half
	}
	return sum
}

// plain reports whether all phases are one.
func (t *images) plain() bool { return t.phases == nil && t.inverts == nil }

func (t *images) memory() int64 {
	return int64(len(t.bits)+len(t.inverts))*8 + int64(len(t.phases))*4
}
