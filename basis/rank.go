package basis

// ranker numbers the configurations of a charge sector by two look-ups: one
// for the upper and one for the lower half of the bits (Lin, Phys. Rev. B 42,
// 6561, 1990). The upper half fixes how much the lower half must supply; the
// rank is the number of configurations below the upper half's first, plus the
// rank of the lower half among those that supply as much.
type ranker struct {
	ladder *ladder
	cut    int // bits of the lower half; 0: no tables, walk the ladder
	upper  []half
	lower  []half
}

// half is a table entry: a partial rank and the rung that it belongs to, -1
// where no configuration of the sector has these bits.
type half struct {
	rank uint64
	rung int32
}

// mostTableBits is the largest half for which a table is made; it costs 16
// bytes an entry.
const mostTableBits = 20

func newRanker(l *ladder) *ranker {
	r := &ranker{ladder: l}
	modes := l.space.modes
	middle := len(modes)
	for middle > 0 && modes[middle-1].Shift >= (l.space.bits+1)/2 {
		middle--
	}
	if middle == len(modes) {
		middle = 0
	}
	cut := modes[middle].Shift
	if cut > mostTableBits || l.space.bits-cut > mostTableBits || uint64(1)<<max(cut, l.space.bits-cut) > 16*l.total+1024 {
		return r
	}
	if cut == 0 {
		return r
	}
	r.cut = cut
	r.upper = blankHalves(l.space.bits - cut)
	r.lower = blankHalves(cut)
	r.fillUpper(len(modes), 0, 0, 0, middle)
	for rung := range l.floors[middle] {
		r.fillLower(middle, int32(rung), 0, 0, int32(rung))
	}
	return r
}

func blankHalves(bits int) []half {
	list := make([]half, 1<<bits)
	for i := range list {
		list[i].rung = -1
	}
	return list
}

func (r *ranker) fillUpper(floor int, rung int32, c Configuration, rank uint64, middle int) {
	if floor == middle {
		r.upper[c>>r.cut] = half{rank, rung}
		return
	}
	node := &r.ladder.floors[floor][rung]
	for level, next := range node.next {
		if next >= 0 {
			bits := Configuration(level) << r.ladder.space.modes[floor-1].Shift
			r.fillUpper(floor-1, next, c|bits, rank+node.before[level], middle)
		}
	}
}

func (r *ranker) fillLower(floor int, rung int32, c Configuration, rank uint64, top int32) {
	if floor == 0 {
		r.lower[c] = half{rank, top}
		return
	}
	node := &r.ladder.floors[floor][rung]
	for level, next := range node.next {
		if next >= 0 {
			bits := Configuration(level) << r.ladder.space.modes[floor-1].Shift
			r.fillLower(floor-1, next, c|bits, rank+node.before[level], top)
		}
	}
}

// rank returns the number of sector configurations below c; ok is false where
// c is not one of them.
func (r *ranker) rank(c Configuration) (uint64, bool) {
	if r.cut == 0 {
		return r.ladder.rank(c)
	}
	top := c >> r.cut
	if top >= Configuration(len(r.upper)) {
		return 0, false
	}
	up, low := r.upper[top], r.lower[c&(1<<r.cut-1)]
	return up.rank + low.rank, up.rung == low.rung && up.rung >= 0
}

func (r *ranker) memory() int64 { return int64(len(r.upper)+len(r.lower)) * 16 }
