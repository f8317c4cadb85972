package basis

import (
	"fmt"
	"math/bits"
)

// Kind is the nature of a site.
type Kind string

// The kinds of sites.
const (
	KindSpin     Kind = "spin"     // levels s = 0 … 2S with S_z = s - S
	KindBoson    Kind = "boson"    // levels s = 0 … largest number of bosons
	KindFermion  Kind = "fermion"  // one spinless mode: empty 0, occupied 1
	KindElectron Kind = "electron" // two modes: empty 0, up 1, down 2, both 3
)

// MostLevels is the largest number of levels that a site may have.
const MostLevels = 256

// Site is one site of a lattice: its kind and its number of levels. Make one
// with [SpinHalf], [Spin], [HardCoreBoson], [Boson], [Fermion] or [Electron].
type Site struct {
	Kind   Kind `json:"kind"`
	Levels int  `json:"levels"`
}

// SpinHalf returns a spin 1/2: level 0 is down, level 1 is up.
func SpinHalf() Site { return Site{KindSpin, 2} }

// Spin returns a spin S = twoS/2 with 2S+1 levels, S_z ascending.
func Spin(twoS int) Site { return Site{KindSpin, twoS + 1} }

// HardCoreBoson returns a site that holds no or one boson.
func HardCoreBoson() Site { return Site{KindBoson, 2} }

// Boson returns a site that holds up to most bosons.
func Boson(most int) Site { return Site{KindBoson, most + 1} }

// Fermion returns one spinless fermion mode.
func Fermion() Site { return Site{KindFermion, 2} }

// Electron returns a site with an up and a down mode.
func Electron() Site { return Site{KindElectron, 4} }

// check reports why s is not a site.
func (s Site) check() error {
	switch s.Kind {
	case KindSpin, KindBoson:
		if s.Levels < 2 || s.Levels > MostLevels {
			return fmt.Errorf("a %s site with %d levels: 2 … %d levels are possible", s.Kind, s.Levels, MostLevels)
		}
	case KindFermion:
		if s.Levels != 2 {
			return fmt.Errorf("a fermion site with %d levels: it has 2", s.Levels)
		}
	case KindElectron:
		if s.Levels != 4 {
			return fmt.Errorf("an electron site with %d levels: it has 4", s.Levels)
		}
	default:
		return fmt.Errorf("a site of kind %q: the kinds are spin, boson, fermion, electron", s.Kind)
	}
	return nil
}

// String names the site, such as "spin 1/2" or "boson (at most 3)".
func (s Site) String() string {
	switch {
	case s.Kind == KindSpin && s.Levels%2 == 0:
		return fmt.Sprintf("spin %d/2", s.Levels-1)
	case s.Kind == KindSpin:
		return fmt.Sprintf("spin %d", (s.Levels-1)/2)
	case s.Kind == KindBoson && s.Levels == 2:
		return "hard-core boson"
	case s.Kind == KindBoson:
		return fmt.Sprintf("boson (at most %d)", s.Levels-1)
	}
	return string(s.Kind)
}

// width is the number of bits that n levels need.
func width(n int) int { return bits.Len(uint(n - 1)) }
