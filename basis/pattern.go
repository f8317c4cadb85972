package basis

import (
	"math"
	"math/bits"
	"slices"
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
	class   []uint32   // by pattern: number of its orbit, ascending with the smallest pattern; noPattern where no configuration has it
	via     []uint16   // by pattern: the element of H that carries it to the smallest of its orbit
	least   []uint32   // by orbit: its smallest pattern
	stab    []uint16   // by orbit: number of the stabiliser of the smallest pattern
	keeping [][]uint16 // by number: elements of H that keep a smallest pattern, without the identity; those of number 0 are none
}

const noPattern = math.MaxUint32

// everyElement stands for a stabiliser that is not listed.
const everyElement = math.MaxUint16

// mostPatternBits bounds the upper places; the tables take 6 bytes a pattern.
const mostPatternBits = 20

// newPatterns folds all patterns of the upper places of the layout, from bit
// cut on, by the elements of H, which are given with their inverses.
func newPatterns(l *layout, cut int, h *images, order int, inverse []int) *patterns {
	width := l.space.bits - cut
	p := &patterns{class: make([]uint32, 1<<width), via: make([]uint16, 1<<width)}
	for w := range p.class {
		p.class[w] = noPattern
	}
	upper := upperModes(l, cut)
	p.keeping = [][]uint16{nil}
	number := map[string]uint16{"": 0}
	for w := range p.class {
		if p.class[w] != noPattern || !possible(upper, uint64(w)<<cut) {
			continue
		}
		class := uint32(len(p.least))
		var keeping []uint16
		var key []byte
		for e := range order {
			to := h.image(e, uint64(w)<<cut) >> cut
			if p.class[to] == noPattern {
				p.class[to], p.via[to] = class, uint16(inverse[e])
			}
			if to == uint64(w) && e > 0 {
				keeping = append(keeping, uint16(e))
				key = append(key, byte(e), byte(e>>8))
			}
		}
		at, known := number[string(key)]
		if !known && len(p.keeping) < everyElement {
			at = uint16(len(p.keeping))
			number[string(key)] = at
			p.keeping = append(p.keeping, keeping)
		} else if !known {
			at = everyElement
		}
		p.least, p.stab = append(p.least, uint32(w)), append(p.stab, at)
	}
	return p
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
	bytes := int64(len(p.class))*6 + int64(len(p.least))*6
	for _, s := range p.keeping {
		bytes += int64(len(s))*2 + 24
	}
	return bytes
}

// rearrangeFrom is the number of configurations of the charges above which
// words are rearranged by sublattice. Below it representatives are compared
// as they are.
var rearrangeFrom uint64 = 1 << 22

// upperPlaces chooses the upper places of words: a layout and the number of
// bits below them. The choice depends on the space, the group and the number
// of configurations only.
func upperPlaces(space *Space, movers []*Mover, total uint64) (*layout, int) {
	plain := natural(space)
	top := topModes(space, min((space.bits+1)/2, mostPatternBits, 4+bits.Len64(total)))
	cut := space.bits - widthOf(space, top)
	if total <= rearrangeFrom {
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
