package basis

import (
	"fmt"
	"sort"
)

// Constraint forbids configurations: the levels of the given sites may add up
// to at most Most. Most = 1 on two neighbouring sites is a blockade, and on one
// electron site it forbids double occupancy. On electron sites the number of
// electrons counts.
type Constraint struct {
	Sites []int `json:"sites"`
	Most  int   `json:"most"`
}

// AtMost returns the constraint that the levels (particles) of the sites add
// up to at most the given number.
func AtMost(most int, sites []int) Constraint { return Constraint{Sites: sites, Most: most} }

// NoDoubleOccupancy returns, for each electron site, the constraint that it
// holds at most one electron: the space of the t-J model.
func (s *Space) NoDoubleOccupancy() []Constraint {
	var all []Constraint
	for i, site := range s.sites {
		if site.Kind == KindElectron {
			all = append(all, AtMost(1, []int{i}))
		}
	}
	return all
}

// Allows reports whether the constraint permits c.
func (k Constraint) Allows(s *Space, c Configuration) bool {
	total := 0
	for _, i := range k.Sites {
		total += s.particles(c, i)
	}
	return total <= k.Most
}

// particles is the level of a site, or the number of electrons on it.
func (s *Space) particles(c Configuration, site int) int {
	level := s.Level(c, site)
	if s.second[site] >= 0 {
		return level&1 + level>>1
	}
	return level
}

func (k Constraint) check(s *Space) error {
	seen := map[int]bool{}
	for _, i := range k.Sites {
		if i < 0 || i >= len(s.sites) {
			return fmt.Errorf("basis: a constraint speaks of site %d; the space has the sites 0 … %d", i, len(s.sites)-1)
		}
		if seen[i] {
			return fmt.Errorf("basis: a constraint names site %d twice", i)
		}
		seen[i] = true
	}
	if k.Most < 0 {
		return fmt.Errorf("basis: a constraint allows at most %d particles; no configuration has so few", k.Most)
	}
	return nil
}

// key is equal for constraints that forbid the same by the same words.
func (k Constraint) key() string {
	sites := append([]int(nil), k.Sites...)
	sort.Ints(sites)
	return fmt.Sprint(k.Most, sites)
}
