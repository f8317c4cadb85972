package basis

// Batch is a list of configurations that are located together, so that the
// waits for memory overlap, and the working memory of that. Its zero value is
// ready; one goroutine may use it at a time.
type Batch struct {
	// Configurations are to be located.
	Configurations []Configuration
	// States has the state of each, -1 where it is in none.
	States []int
	// Phases has the phase of each, a place in [Basis.Phases].
	Phases []uint32

	found []folded
}

// folded is a configuration on its way to its representative.
type folded struct {
	word  uint64 // under g_j; then the lower bits of the representative
	entry uint32 // of the smallest pattern reached
	path  [3]uint16
	stab  uint16
	again bool // to be located on its own
}

// LocateAll is [Basis.Locate] for all configurations of the batch. It sets States
// and Phases, whose memory it uses again.
//
// Cost: nothing is allocated once the batch has grown.
func (b *Basis) LocateAll(batch *Batch) {
	batch.prepare(len(batch.Configurations))
	if b.sym == nil || b.sym.cosets > 1<<16 {
		for i, c := range batch.Configurations {
			batch.States[i], batch.Phases[i] = b.locateOne(c)
		}
		return
	}
	b.sym.fold(batch.Configurations, batch.found)
	b.lookUp(batch)
}

// prepare makes room for n results.
func (b *Batch) prepare(n int) {
	b.States = grown(b.States, n)
	b.Phases = grown(b.Phases, n)
	b.found = grown(b.found, n)
}

func grown[T any](list []T, n int) []T {
	if cap(list) < n {
		return make([]T, n, n+n/2)
	}
	return list[:n]
}

func (b *Basis) locateOne(c Configuration) (int, uint32) {
	i, phase, ok := b.Locate(c)
	if !ok {
		return -1, 0
	}
	return i, phase
}

// fold finds the representatives of those configurations whose smallest pattern
// is reached from one coset only; the others are to be located again.
func (s *symmetry) fold(list []Configuration, found []folded) {
	entries := s.patterns.entries
	for i, c := range list {
		w := s.enter.image(0, uint64(c)&^s.outside)
		found[i] = folded{word: w, entry: entries[w>>s.cut]}
	}
	for j := 1; j < s.cosets; j++ {
		for i, c := range list {
			w := s.enter.image(j, uint64(c)&^s.outside)
			found[i].reach(w, entries[w>>s.cut], j)
		}
	}
	s.settle(found)
	for i, c := range list {
		found[i].again = found[i].again || uint64(c)&s.outside != 0
	}
}

// reach takes the word under coset j if its pattern is smaller.
func (f *folded) reach(w uint64, entry uint32, j int) {
	if k := classOf(f.entry); classOf(entry) < k {
		f.word, f.entry, f.path[0], f.again = w, entry, uint16(j), false
	} else if classOf(entry) == k {
		f.again = true
	}
}

// settle finds the lower bits once the smallest patterns are known.
func (s *symmetry) settle(found []folded) {
	for i := range found {
		f := &found[i]
		f.path[1] = viaOf(f.entry)
		if classOf(f.entry) == noClass {
			f.again = true
			continue
		}
		f.stab = s.patterns.stab[classOf(f.entry)]
		f.again = f.again || f.stab == everyElement
	}
	for i := range found {
		f := &found[i]
		f.word = s.lower(int(f.path[1]), f.word)
		if f.stab != 0 && !f.again {
			f.smaller(s)
		}
	}
}

// smaller tries the elements that keep the pattern.
func (f *folded) smaller(s *symmetry) {
	low := f.word
	for _, t := range s.patterns.keeping[f.stab] {
		if v := s.lower(int(t), low); v < f.word {
			f.word, f.path[2] = v, t
		}
	}
}

// lookUp turns representatives into states.
func (b *Basis) lookUp(batch *Batch) {
	s, n := b.sym, b.numbers
	for i := range batch.found {
		f := &batch.found[i]
		number, ok := uint64(0), false
		if !f.again {
			number, ok = n.number(classOf(f.entry), f.word)
		}
		batch.States[i] = int(number)
		if !ok {
			batch.States[i] = -1
		}
	}
	if b.index.blocks == nil {
		for i, c := range batch.Configurations {
			batch.States[i], batch.Phases[i] = b.locateOne(c)
		}
		return
	}
	for i, number := range batch.States {
		if number < 0 {
			continue
		}
		at, ok := b.index.place(uint64(number))
		if !ok {
			at = -1
		}
		batch.States[i] = at
	}
	for i := range batch.found {
		f := &batch.found[i]
		switch {
		case f.again:
			batch.States[i], batch.Phases[i] = b.locateOne(batch.Configurations[i])
		case s.units.denominator > 1:
			batch.Phases[i] = s.phase(uint64(batch.Configurations[i]), path{int(f.path[0]), int(f.path[1]), int(f.path[2])})
		default:
			batch.Phases[i] = 0
		}
	}
}
