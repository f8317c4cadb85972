package basis

import (
	"fmt"
	"strings"
)

// Configuration is a product state: one bit field a mode, mode 0 lowest. It
// has a meaning only together with its [Space].
type Configuration uint64

// MostBits is the number of bits in a Configuration.
const MostBits = 64

// Mode is one bit field of a configuration: a whole site, or one spin species
// of an electron site.
type Mode struct {
	Site      int  // the site it belongs to
	Component int  // 0, but 1 for the down mode of an electron site
	Shift     int  // position of its lowest bit
	Width     int  // number of bits
	Levels    int  // number of levels
	Fermionic bool // whether it anticommutes with other fermionic modes
}

// Level returns the level of the mode in c.
func (m Mode) Level(c Configuration) int {
	return int(c >> m.Shift & (1<<m.Width - 1))
}

// Space is an ordered list of sites and the layout of their configurations.
// A Space does not change after it is made and may be shared.
type Space struct {
	sites    []Site
	modes    []Mode
	first    []int // mode of each site (the up mode of an electron site)
	second   []int // down mode of an electron site, else -1
	bits     int
	fermions Configuration
}

// NewSpace returns the space of the given sites, in this order; the kinds may
// be mixed. Errors: no site, an impossible site, more than 64 bits.
func NewSpace(sites []Site) (*Space, error) {
	if len(sites) == 0 {
		return nil, fmt.Errorf("basis: a space without sites; give at least one site")
	}
	s := &Space{
		sites:  append([]Site(nil), sites...),
		first:  make([]int, len(sites)),
		second: make([]int, len(sites)),
	}
	for i, site := range sites {
		if err := site.check(); err != nil {
			return nil, fmt.Errorf("basis: site %d is %w", i, err)
		}
		m := Mode{Site: i, Levels: site.Levels, Width: width(site.Levels), Fermionic: site.Kind == KindFermion}
		if site.Kind == KindElectron {
			m = Mode{Site: i, Levels: 2, Width: 1, Fermionic: true}
		}
		s.first[i], s.second[i] = s.addMode(m), -1
	}
	for i, site := range sites {
		if site.Kind == KindElectron {
			s.second[i] = s.addMode(Mode{Site: i, Component: 1, Levels: 2, Width: 1, Fermionic: true})
		}
	}
	if s.bits > MostBits {
		return nil, fmt.Errorf("basis: %d sites need %d bits; a configuration has %d, so use fewer sites or levels", len(sites), s.bits, MostBits)
	}
	return s, nil
}

func (s *Space) addMode(m Mode) int {
	m.Shift = s.bits
	s.bits += m.Width
	s.modes = append(s.modes, m)
	if m.Fermionic && m.Shift < MostBits {
		s.fermions |= 1 << m.Shift
	}
	return len(s.modes) - 1
}

// Uniform returns the space of n equal sites.
func Uniform(n int, site Site) (*Space, error) {
	if n < 1 || n > MostBits {
		return nil, fmt.Errorf("basis: a space of %d sites; 1 … %d sites are possible", n, MostBits)
	}
	sites := make([]Site, n)
	for i := range sites {
		sites[i] = site
	}
	return NewSpace(sites)
}

// Sites returns the number of sites.
func (s *Space) Sites() int { return len(s.sites) }

// Site returns site i.
func (s *Space) Site(i int) Site { return s.sites[i] }

// Modes returns the number of modes: one a site, two an electron site.
func (s *Space) Modes() int { return len(s.modes) }

// Mode returns mode m, in ascending bit order.
func (s *Space) Mode(m int) Mode { return s.modes[m] }

// ModeOf returns the number of the mode of a site; component 1 is the down
// mode of an electron site, 0 any other mode. It returns -1 if there is none.
func (s *Space) ModeOf(site, component int) int {
	switch {
	case site < 0 || site >= len(s.sites):
		return -1
	case component == 0:
		return s.first[site]
	case component == 1:
		return s.second[site]
	}
	return -1
}

// Bits returns the number of bits that a configuration uses.
func (s *Space) Bits() int { return s.bits }

// FermionBits returns a configuration with every fermionic mode occupied.
func (s *Space) FermionBits() Configuration { return s.fermions }

// Dimension returns the number of product states, the product of the numbers
// of levels. It is exact up to 2^53.
func (s *Space) Dimension() float64 {
	d := 1.0
	for _, site := range s.sites {
		d *= float64(site.Levels)
	}
	return d
}

// Level returns the level of a site in c.
func (s *Space) Level(c Configuration, site int) int {
	level := s.modes[s.first[site]].Level(c)
	if s.second[site] >= 0 {
		level += 2 * s.modes[s.second[site]].Level(c)
	}
	return level
}

// Levels returns the levels of all sites in c, in site order.
func (s *Space) Levels(c Configuration) []int {
	levels := make([]int, len(s.sites))
	for i := range levels {
		levels[i] = s.Level(c, i)
	}
	return levels
}

// Configuration returns the product state with the given level on each site.
// Errors: not one level a site, or a level that the site does not have.
func (s *Space) Configuration(levels []int) (Configuration, error) {
	if len(levels) != len(s.sites) {
		return 0, fmt.Errorf("basis: %d levels for %d sites; give one a site", len(levels), len(s.sites))
	}
	var c Configuration
	for i, level := range levels {
		if level < 0 || level >= s.sites[i].Levels {
			return 0, fmt.Errorf("basis: level %d on site %d, which is a %v with the levels 0 … %d", level, i, s.sites[i], s.sites[i].Levels-1)
		}
		if s.second[i] >= 0 {
			c |= Configuration(level>>1) << s.modes[s.second[i]].Shift
			level &= 1
		}
		c |= Configuration(level) << s.modes[s.first[i]].Shift
	}
	return c, nil
}

// Contains reports whether c is a product state of the space: no bit beyond
// the last mode, and no level that a mode does not have.
func (s *Space) Contains(c Configuration) bool {
	if s.bits < MostBits && c>>s.bits != 0 {
		return false
	}
	for _, m := range s.modes {
		if m.Level(c) >= m.Levels {
			return false
		}
	}
	return true
}

// Format writes c in the trade's notation, site 0 first: arrows for spins 1/2,
// S_z for larger spins, numbers for bosons and fermions, and 0 ↑ ↓ ⇅ for
// electron sites.
func (s *Space) Format(c Configuration) string {
	var b strings.Builder
	b.WriteByte('|')
	for i, site := range s.sites {
		level := s.Level(c, i)
		wide := site.Kind == KindSpin && site.Levels > 2 || site.Levels > 10
		if wide && i > 0 {
			b.WriteByte(' ')
		}
		switch {
		case site.Kind == KindSpin && site.Levels == 2:
			b.WriteString([]string{"↓", "↑"}[level])
		case site.Kind == KindSpin && site.Levels%2 == 1:
			fmt.Fprintf(&b, "%+d", level-(site.Levels-1)/2)
		case site.Kind == KindSpin:
			fmt.Fprintf(&b, "%+d/2", 2*level-site.Levels+1)
		case site.Kind == KindElectron:
			b.WriteString([]string{"0", "↑", "↓", "⇅"}[level])
		default:
			fmt.Fprint(&b, level)
		}
	}
	b.WriteString("⟩")
	return b.String()
}

// Equal reports whether both spaces have the same sites in the same order.
func (s *Space) Equal(t *Space) bool {
	if s == t {
		return true
	}
	if t == nil || s == nil || len(s.sites) != len(t.sites) {
		return false
	}
	for i := range s.sites {
		if s.sites[i] != t.sites[i] {
			return false
		}
	}
	return true
}
