package basis

import (
	"math"
	"math/bits"
	"slices"

	"ketloom/basis/pages"
)

// A pattern is what a word has on its upper places. An element of the group
// that keeps these places keeps the lower ones too; call their group H, and
// take one element g_j from each of its cosets, so that every symmetry is h·g_j.
// The smallest word of an orbit begins with the smallest pattern, which a table
// over all patterns finds for H, and the one or two h that reach it: the orbit
// of hundreds of words is folded by a look-up for each coset. Where the places
// are a sublattice there are few cosets (A. Wietek and A. M. Läuchli, Phys. Rev.
// E 98, 033309 (2018)).
type patterns struct {
	entries []uint32   // by pattern: class << 16 | via
	least   []uint32   // by class: the smallest pattern
	stab    []uint16   // by class: number of the stabiliser of the smallest pattern
	keeping [][]uint16 // by number: elements of H that keep a smallest pattern, without the identity; those of number 0 are none
}

// The entry of a pattern holds the number of its orbit under H, ascending with
// the smallest pattern of the orbit, and the element of H that carries it there.
func classOf(entry uint32) uint32 { return entry >> 16 }
func viaOf(entry uint32) uint16   { return uint16(entry) }

// noClass is the class of what no configuration has; it is above all others.
const noClass = 1<<16 - 1

// everyElement stands for a stabiliser that is not listed.
const everyElement = math.MaxUint16

// mostPatternBits bounds the upper places; the table takes 4 bytes a pattern.
// mostTopBits bounds those that are folded by any group.
const (
	mostPatternBits = 20
	mostTopBits     = 15
)

// newPatterns folds all patterns of the upper places of the layout, from bit
// cut on, by the elements of H, which are given with their inverses; it returns
// nil where there are more than 65,535 classes.
func newPatterns(l *layout, cut int, h *images, order int, inverse []int) *patterns {
	p := &patterns{entries: make([]uint32, 1<<(l.space.bits-cut)), keeping: [][]uint16{nil}}
	for w := range p.entries {
		p.entries[w] = noClass << 16
	}
	pages.Advise(p.entries)
	upper := upperModes(l, cut)
	number := map[string]uint16{"": 0}
	for w := range p.entries {
		if classOf(p.entries[w]) != noClass || !possible(upper, uint64(w)<<cut) {
			continue
		}
		if len(p.least) == noClass {
			return nil
		}
		keeping := p.fold(uint32(w), cut, h, order, inverse)
		var key []byte
		for _, e := range keeping {
			key = append(key, byte(e), byte(e>>8))
		}
		at, known := number[string(key)]
		if !known && len(p.keeping) < everyElement {
			at = uint16(len(p.keeping))
			number[string(key)] = at
			p.keeping = append(p.keeping, keeping)
		} else if !known {
			at = everyElement
		}
		p.stab = append(p.stab, at)
	}
	return p
}

// fold makes a class of the orbit of its smallest pattern and returns the elements
// that keep the pattern.
func (p *patterns) fold(w uint32, cut int, h *images, order int, inverse []int) (keeping []uint16) {
	class := uint32(len(p.least)) << 16
	p.least = append(p.least, w)
	for e := range order {
		to := h.image(e, uint64(w)<<cut) >> cut
		if classOf(p.entries[to]) == noClass {
			p.entries[to] = class | uint32(inverse[e])
		}
		if to == uint64(w) && e > 0 {
			keeping = append(keeping, uint16(e))
		}
	}
	return keeping
}

func upperModes(l *layout, cut int) []Mode {
	var list []Mode
	for _, m := range l.space.modes {
		if m.Shift >= cut {
			list = append(list, m)
		}
	}
	return list
}

// possible reports whether every mode has a level that it knows.
func possible(modes []Mode, w uint64) bool {
	for _, m := range modes {
		if m.Level(Configuration(w)) >= m.Levels {
			return false
		}
	}
	return true
}

func (p *patterns) memory() int64 {
	bytes := int64(len(p.entries))*4 + int64(len(p.least))*6
	for _, s := range p.keeping {
		bytes += int64(len(s))*2 + 24
	}
	return bytes
}

// rearrangeFrom is the number of configurations of the charges above which
// words are rearranged by sublattice. Below it representatives are compared
// as they are.
var rearrangeFrom uint64 = 1 << 16

// upperPlaces chooses the upper places of words: a layout and the number of
// bits below them. The choice depends on the space, the group and the number
// of configurations only. spare asks for places that any group can fold.
func upperPlaces(space *Space, movers []*Mover, total uint64, spare bool) (*layout, int) {
	plain := natural(space)
	top := topModes(space, min((space.bits+1)/2, mostTopBits, 4+bits.Len64(total)))
	cut := space.bits - widthOf(space, top)
	if spare || total <= rearrangeFrom {
		return plain, cut
	}
	best, least := top, 0.5*score(space, movers, top)
	for _, set := range sublattices(space, movers) {
		w := widthOf(space, set)
		if w > mostPatternBits || 4*w < space.bits || 4*w > 3*space.bits {
			continue
		}
		if s := score(space, movers, set); s < least {
			best, least = set, s
		}
	}
	var order []int
	for m := range space.modes {
		if best&(1<<m) == 0 {
			order = append(order, m)
		}
	}
	for m := range space.modes {
		if best&(1<<m) != 0 {
			order = append(order, m)
		}
	}
	return arranged(space, order), space.bits - widthOf(space, best)
}

// topModes returns the highest modes within a number of bits, at least one
// where that leaves any below, as a set.
func topModes(space *Space, width int) uint64 {
	var set uint64
	for m := len(space.modes) - 1; m > 0; m-- {
		next := set | 1<<m
		if set != 0 && widthOf(space, next) > width {
			break
		}
		set = next
	}
	return set
}

func widthOf(space *Space, set uint64) int {
	width := 0
	for m := range space.modes {
		if set&(1<<m) != 0 {
			width += space.modes[m].Width
		}
	}
	return width
}

// preimage returns the modes that a symmetry sends into a set.
func preimage(mv *Mover, set uint64) uint64 {
	var out uint64
	for m, to := range mv.To {
		out |= set >> to & 1 << m
	}
	return out
}

// score estimates the work of folding with a set of upper modes: the number of
// its images, times the part of the patterns that are smallest in their orbit.
func score(space *Space, movers []*Mover, set uint64) float64 {
	cosets := map[uint64]bool{}
	kept := 0
	for _, mv := range movers {
		from := preimage(mv, set)
		cosets[from] = true
		if from == set {
			kept++
		}
	}
	part := max(1/float64(kept), 2/math.Exp2(float64(widthOf(space, set))))
	return float64(len(cosets)) * part
}

// sublattices returns sets of modes that the symmetries exchange as wholes:
// the finest such partitions in which two given modes share a block, and the
// orbits.
func sublattices(space *Space, movers []*Mover) []uint64 {
	var list []uint64
	add := func(set uint64) {
		if !slices.Contains(list, set) {
			list = append(list, set)
		}
	}
	done := uint64(0)
	for m := range space.modes {
		if done>>m&1 == 1 {
			continue
		}
		orbit := uint64(0)
		for _, mv := range movers {
			orbit |= 1 << mv.To[m]
		}
		done |= orbit
		add(orbit)
		for other := range space.modes {
			if other != m && orbit>>other&1 == 1 {
				add(blockOf(movers, len(space.modes), m, other))
			}
		}
	}
	return list
}

// blockOf returns the block of mode a in the finest partition that the
// symmetries keep and in which a and b share a block.
func blockOf(movers []*Mover, modes, a, b int) uint64 {
	parent := make([]int, modes)
	for m := range parent {
		parent[m] = m
	}
	root := func(m int) int {
		for parent[m] != m {
			parent[m] = parent[parent[m]]
			m = parent[m]
		}
		return m
	}
	queue := [][2]int{{a, b}}
	for len(queue) > 0 {
		x, y := root(queue[0][0]), root(queue[0][1])
		pair := queue[0]
		queue = queue[1:]
		if x == y {
			continue
		}
		parent[x] = y
		for _, mv := range movers {
			queue = append(queue, [2]int{mv.To[pair[0]], mv.To[pair[1]]})
		}
	}
	var block uint64
	for m := range parent {
		if root(m) == root(a) {
			block |= 1 << m
		}
	}
	return block
}
