package basis

import (
	"fmt"
	"math/bits"

	"ketloom/basis/group"
)

// Mover is a symmetry resolved into modes: mode m goes to mode To[m], its
// level s becomes Levels[m][s] and is multiplied by exp(2πi·Phases[m][s]).
// On product states, with the creators in ascending order,
//
//	U c†_m U† = phase · c†_{To[m]},   or phase · c_{To[m]} where empty and
//	occupied are exchanged,
//
// with the phase of the occupied minus that of the empty level, and U|0⟩ = the
// phases of all empty levels times the state in which the images of exchanged
// modes are filled, ascending. Operators are transformed by these rules, and
// configurations by what follows from them.
type Mover struct {
	To      []int
	Levels  [][]int
	Phases  [][]group.Turn
	Flipped []bool // fermionic modes in which empty and occupied are exchanged
}

// Resolve translates an action on sites into one on modes. Errors: not one
// image a site, a site sent to one of another kind, relabellings or phases for
// the wrong number of levels, and on electron sites a relabelling or phase that
// does not act on the two modes separately.
func (s *Space) Resolve(a group.Action) (*Mover, error) {
	if err := a.Check(); err != nil {
		return nil, err
	}
	if len(a.Sites) != len(s.sites) {
		return nil, fmt.Errorf("basis: a symmetry of %d sites on a space of %d; give every site an image", len(a.Sites), len(s.sites))
	}
	n := len(s.modes)
	mv := &Mover{To: make([]int, n), Levels: make([][]int, n), Phases: make([][]group.Turn, n), Flipped: make([]bool, n)}
	for i, to := range a.Sites {
		if s.sites[i] != s.sites[to] {
			return nil, fmt.Errorf("basis: a symmetry sends site %d, a %v, to site %d, a %v; it may only join equal sites", i, s.sites[i], to, s.sites[to])
		}
		if err := s.checkLevels(a, i); err != nil {
			return nil, err
		}
		if s.second[i] >= 0 {
			if err := s.resolveElectron(mv, a, i); err != nil {
				return nil, err
			}
			continue
		}
		mv.set(s.first[i], s.first[to], s.sites[i].Levels, func(level int) (int, group.Turn) {
			return a.Level(i, level), a.Phase(i, level)
		})
	}
	for m, mode := range s.modes {
		mv.Flipped[m] = mode.Fermionic && mv.Levels[m][0] == 1
	}
	return mv, nil
}

func (s *Space) checkLevels(a group.Action, i int) error {
	levels := s.sites[i].Levels
	if a.Levels != nil && a.Levels[i] != nil && len(a.Levels[i]) != levels {
		return fmt.Errorf("basis: a symmetry relabels %d levels of site %d, which is a %v with %d", len(a.Levels[i]), i, s.sites[i], levels)
	}
	if a.Phases != nil && a.Phases[i] != nil && len(a.Phases[i]) != levels {
		return fmt.Errorf("basis: a symmetry has %d phases for site %d, which is a %v with %d levels", len(a.Phases[i]), i, s.sites[i], levels)
	}
	return nil
}

func (mv *Mover) set(from, to, levels int, image func(level int) (int, group.Turn)) {
	mv.To[from] = to
	mv.Levels[from], mv.Phases[from] = make([]int, levels), make([]group.Turn, levels)
	for level := range levels {
		mv.Levels[from][level], mv.Phases[from][level] = image(level)
	}
}

// resolveElectron splits the action on an electron site into its two modes:
// the pair (up, down) may be exchanged, and each may be flipped.
func (s *Space) resolveElectron(mv *Mover, a group.Action, i int) error {
	var image [4]int
	var phase [4]group.Turn
	for level := range 4 {
		image[level], phase[level] = a.Level(i, level), a.Phase(i, level)
	}
	up, down := image[0]^image[1], image[0]^image[2]
	if bits.OnesCount(uint(up)) != 1 || up^down != 3 || image[3] != image[0]^up^down {
		return fmt.Errorf("basis: a symmetry relabels the electron site %d as %v; only exchanges of the spins and of empty with occupied are possible", i, image)
	}
	if !phase[0].Add(phase[3]).Equal(phase[1].Add(phase[2])) {
		return fmt.Errorf("basis: a symmetry has phases on the electron site %d that are not those of single electrons", i)
	}
	to := a.Sites[i]
	for component, moved := range []int{up, down} {
		target := moved >> 1 // component that the moved bit belongs to
		start := image[0] >> target & 1
		step := 1 + component
		mv.set(s.first[i]*(1-component)+s.second[i]*component, s.ModeOf(to, target), 2, func(level int) (int, group.Turn) {
			t := phase[level*step]
			if component == 1 { // the phase of the empty site is counted once, with up
				t = t.Add(phase[0].Neg())
			}
			return start ^ level, t
		})
	}
	return nil
}
