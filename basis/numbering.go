package basis

import "ketloom/basis/pages"

// numbering numbers the candidates of a symmetry sector: the words of the
// charges whose pattern is the smallest of its orbit under the group H, in
// ascending order. The class of the pattern has the number of the first of its
// candidates; the lower bits add their rank among those that supply as much.
type numbering struct {
	cut      int
	low      uint64
	ladder   *ladder
	floor    int    // lower modes
	heads    []head // by class
	patterns *patterns
	tails    []uint32 // by lower bits: rung above, rank below tailRank; nil where there are too many
	total    uint64
}

// head is the first candidate of a class and the rung that the lower modes start
// from; the rung is -1 where there is none.
type head struct {
	first uint64
	rung  int32
}

// A tail holds the rank of lower bits among those of the same rung, and the
// rung; noTail stands for bits of no rung.
const (
	tailRank  = mostTableBits // bits of the rank
	mostTails = 1<<(32-tailRank) - 1
	noTail    = mostTails << tailRank
)

// newNumbering visits all patterns; the ladder is that of the words.
func newNumbering(s *symmetry, l *ladder) *numbering {
	n := &numbering{cut: s.cut, low: s.low, ladder: l, patterns: s.patterns, heads: make([]head, len(s.patterns.least))}
	for n.floor < len(l.space.modes) && l.space.modes[n.floor].Shift < s.cut {
		n.floor++
	}
	for k := range n.heads {
		n.heads[k].rung = -1
	}
	n.fillHeads(len(l.space.modes), 0, 0)
	if s.cut <= mostTableBits && len(l.floors[n.floor]) < mostTails {
		n.tails = make([]uint32, 1<<s.cut)
		pages.Advise(n.tails)
		for w := range n.tails {
			n.tails[w] = noTail
		}
		for rung := range l.floors[n.floor] {
			n.fillTails(n.floor, int32(rung), 0, 0, uint32(rung)<<tailRank)
		}
	}
	return n
}

// fillHeads descends to the lower modes, in ascending order of patterns.
func (n *numbering) fillHeads(floor int, rung int32, w uint64) {
	if floor == n.floor {
		class := classOf(n.patterns.entries[w>>n.cut])
		if uint64(n.patterns.least[class]) == w>>n.cut {
			n.heads[class] = head{n.total, rung}
			n.total = saturatingAdd(n.total, n.ladder.floors[floor][rung].count)
		}
		return
	}
	for level, next := range n.ladder.floors[floor][rung].next {
		if next >= 0 {
			n.fillHeads(floor-1, next, w|uint64(level)<<n.ladder.space.modes[floor-1].Shift)
		}
	}
}

func (n *numbering) fillTails(floor int, rung int32, w, rank uint64, top uint32) {
	if floor == 0 {
		n.tails[w] = top | uint32(rank)
		return
	}
	node := &n.ladder.floors[floor][rung]
	for level, next := range node.next {
		if next >= 0 {
			bits := uint64(level) << n.ladder.space.modes[floor-1].Shift
			n.fillTails(floor-1, next, w|bits, rank+node.before[level], top)
		}
	}
}

// number returns the number of the candidate with the smallest pattern of a
// class and the given lower bits; ok is false where there is none.
func (n *numbering) number(class uint32, low uint64) (number uint64, ok bool) {
	up := &n.heads[class]
	if n.tails == nil {
		if up.rung < 0 {
			return 0, false
		}
		rank, ok := n.ladder.rankFrom(n.floor, up.rung, Configuration(low))
		return up.first + rank, ok
	}
	down := n.tails[low]
	return up.first + uint64(down&(1<<tailRank-1)), int32(down>>tailRank) == up.rung
}

// numberOf returns the number of a word; ok is false where it is no candidate.
func (n *numbering) numberOf(w uint64) (number uint64, ok bool) {
	class := classOf(n.patterns.entries[w>>n.cut])
	if class == noClass || uint64(n.patterns.least[class]) != w>>n.cut {
		return 0, false
	}
	return n.number(class, w&n.low)
}

func (n *numbering) memory() int64 {
	return int64(len(n.heads))*16 + int64(len(n.tails))*4
}
