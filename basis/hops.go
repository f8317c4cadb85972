package basis

// Hops are changes of configurations, each given by the bits that it flips, that are
// located again and again: what symmetries do to the bits is computed once.
type Hops struct {
	basis *Basis
	flips []Configuration
	moved [][]uint64 // by coset, hop: the bits of words that the hop flips; nil where that depends on the word or is beyond the space
}

// Hops prepares the given flips. Cost: one image for each flip and coset.
func (b *Basis) Hops(flips []Configuration) *Hops {
	h := &Hops{basis: b, flips: append([]Configuration(nil), flips...)}
	if b.sym == nil || !b.sym.straight {
		return h
	}
	for _, f := range flips {
		if uint64(f)&b.sym.outside != 0 {
			return h
		}
	}
	h.moved = make([][]uint64, b.sym.cosets)
	for j := range h.moved {
		still := b.sym.enter.image(j, 0)
		for _, f := range flips {
			h.moved[j] = append(h.moved[j], b.sym.enter.image(j, uint64(f))^still)
		}
	}
	return h
}

// LocateAll locates what the hops of the given numbers make of c, as
// [Basis.LocateAll] does: Configurations, States and Phases of the batch are in the
// order of which. Hops may repeat.
func (h *Hops) LocateAll(c Configuration, which []int, batch *Batch) {
	batch.Configurations = batch.Configurations[:0]
	for _, k := range which {
		batch.Configurations = append(batch.Configurations, c^h.flips[k])
	}
	if h.moved == nil || uint64(c)&h.basis.sym.outside != 0 {
		h.basis.LocateAll(batch)
		return
	}
	batch.prepare(len(which))
	h.fold(uint64(c), which, batch.found)
	h.basis.lookUp(batch)
}

// fold is symmetry.fold for hops.
func (h *Hops) fold(c uint64, which []int, found []folded) {
	s := h.basis.sym
	entries := s.patterns.entries
	w := s.enter.image(0, c)
	for i, k := range which {
		hop := w ^ h.moved[0][k]
		found[i] = folded{word: hop, entry: entries[hop>>s.cut]}
	}
	for j := 1; j < s.cosets; j++ {
		w, moved := s.enter.image(j, c), h.moved[j]
		for i, k := range which {
			hop := w ^ moved[k]
			found[i].reach(hop, entries[hop>>s.cut], j)
		}
	}
	s.settle(found)
}
