package basis

// extender lists the representatives of a symmetry sector: it extends each
// pattern that is the smallest of its orbit by all lower bits that supply the
// rest of the charges.
type extender struct {
	basis   *Basis
	bans    *bans
	classes []uint32   // those that have candidates, ascending
	lower   [][]uint32 // by rung: the lower bits, ascending; nil where they are walked
}

func newExtender(b *Basis, bans *bans) *extender {
	e := &extender{basis: b, bans: bans}
	n := b.numbers
	for class, up := range n.heads {
		if up.rung >= 0 {
			e.classes = append(e.classes, uint32(class))
		}
	}
	if n.tails != nil && bans == nil {
		e.lower = make([][]uint32, len(n.ladder.floors[n.floor]))
		for w, down := range n.tails {
			if down != noTail {
				rung := down >> tailRank
				e.lower[rung] = append(e.lower[rung], uint32(w))
			}
		}
	}
	return e
}

// parts cuts the classes into ranges with about equally many candidates.
func (e *extender) parts(wanted int) [][]uint32 {
	var parts [][]uint32
	n := e.basis.numbers
	share := n.total/uint64(wanted) + 1
	for from := 0; from < len(e.classes); {
		to := from + 1
		for to < len(e.classes) && n.heads[e.classes[to]].first-n.heads[e.classes[from]].first < share {
			to++
		}
		parts = append(parts, e.classes[from:to])
		from = to
	}
	return parts
}

// extend lists the representatives whose patterns are the smallest of the classes.
func (e *extender) extend(classes []uint32, seen *sighting) portion {
	var p portion
	s, n := e.basis.sym, e.basis.numbers
	var bases []uint64
	for _, class := range classes {
		pattern := uint64(s.patterns.least[class])
		bases = s.bases(pattern, bases)
		top := pattern << s.cut
		visit := func(w uint64) bool {
			if size, smallest := s.stabiliser(w, class, bases); smallest && size > 0 {
				p.list = append(p.list, w)
				p.stab = append(p.stab, uint16(size-1))
			}
			return seen.more()
		}
		rung := n.heads[class].rung
		switch {
		case e.lower != nil:
			for _, low := range e.lower[rung] {
				if !visit(top | uint64(low)) {
					return p
				}
			}
		case !e.bans.allow(Configuration(top)):
		case !n.ladder.walk(start{Configuration(top), n.floor, rung}, e.bans, func(c Configuration) bool { return visit(uint64(c)) }):
			return p
		}
	}
	return p
}
