package basis

// layout is an arrangement of the modes of a space in the bits of a word. The
// space itself has them in ascending order; where symmetries fall into
// sublattices, words with the modes of one sublattice on top fold faster.
type layout struct {
	space *Space // the arranged modes, in ascending bit order
	mode  []int  // by place: the mode of the original space
	place []int  // by mode of the original space: its place
}

// arranged returns the layout with the given modes from the lowest bit up.
func arranged(space *Space, order []int) *layout {
	n := len(space.modes)
	l := &layout{mode: order, place: make([]int, n)}
	inner := &Space{sites: space.sites, first: make([]int, len(space.sites)), second: make([]int, len(space.sites))}
	for i := range inner.second {
		inner.second[i] = -1
	}
	for at, m := range order {
		mode := space.modes[m]
		l.place[m] = inner.addMode(mode)
		if mode.Component == 1 {
			inner.second[mode.Site] = at
		} else {
			inner.first[mode.Site] = at
		}
	}
	l.space = inner
	return l
}

// natural is the layout of the space itself.
func natural(space *Space) *layout {
	order := make([]int, len(space.modes))
	for m := range order {
		order[m] = m
	}
	return &layout{space: space, mode: order, place: order}
}

// isNatural reports whether words are configurations.
func (l *layout) isNatural() bool {
	for at, m := range l.mode {
		if at != m {
			return false
		}
	}
	return true
}
