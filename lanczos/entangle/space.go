package entangle

import (
	"context"
	"fmt"
	"math"
	"math/bits"

	"ketloom/basis"
)

// SpaceCut returns the spectrum of the reduced density operator of a set of
// sites (or orbitals), in any order and not necessarily contiguous, of one state
// or of the equal mixture of several,
//
//	ρ_A = (1/n) Σ_states Tr_B |ψ⟩⟨ψ|.
//
// Blocks are labelled by the charges of the part, of those charges that the
// sectors of all states fix. States of symmetry sectors are unfolded orbit by
// orbit. The modes of the part are brought in front of those of the rest with
// the sign of fermions, each in ascending order.
//
// Errors: no state, states of different spaces, a site that does not exist or is
// named twice, blocks beyond Options.Memory, the error of the context. Without
// any site, or with all, the part is pure or trivial and the result follows.
//
// Cost: a pass over all product states of the states, then for each block of n×m
// amplitudes a singular value decomposition, nm·min(n,m) steps and 16nm bytes.
func SpaceCut(ctx context.Context, states []State, sites []int, opts *Options) (*Spectrum, error) {
	space, charges, err := common(states)
	if err != nil {
		return nil, err
	}
	part, err := bitsOf(space, sites)
	if err != nil {
		return nil, err
	}
	entries := make([]entry, 0)
	scale := complex(1/math.Sqrt(float64(len(states))), 0)
	for n, s := range states {
		err := s.each(func(c basis.Configuration, amplitude complex128) error {
			if len(entries)%checkEvery == 0 && ctx.Err() != nil {
				return ctx.Err()
			}
			if amplitude == 0 {
				return nil
			}
			a, b := uint64(c)&part, uint64(c)&^part
			if overtaken(uint64(space.FermionBits()), a, b) {
				amplitude = -amplitude
			}
			entries = append(entries, entry{a, b, int32(n), amplitude * scale})
			return nil
		})
		if err != nil {
			return nil, err
		}
	}
	return spectrum(ctx, entries, names(charges), charged(space, charges, sites), opts.withDefaults())
}

// checkEvery is the number of amplitudes between two looks at the context.
const checkEvery = 1 << 16

func names(charges []basis.Charge) []string {
	list := make([]string, len(charges))
	for i, q := range charges {
		list[i] = q.Name
	}
	return list
}

// bitsOf returns the bits of the modes of the sites.
func bitsOf(space *basis.Space, sites []int) (uint64, error) {
	var mask uint64
	seen := map[int]bool{}
	for _, site := range sites {
		if site < 0 || site >= space.Sites() {
			return 0, fmt.Errorf("entangle: the part names site %d; the space has the sites 0 … %d", site, space.Sites()-1)
		}
		if seen[site] {
			return 0, fmt.Errorf("entangle: the part names site %d twice", site)
		}
		seen[site] = true
		for component := range 2 {
			if m := space.ModeOf(site, component); m >= 0 {
				mode := space.Mode(m)
				mask |= (1<<mode.Width - 1) << mode.Shift
			}
		}
	}
	return mask, nil
}

// overtaken reports whether the number of pairs of occupied fermion modes is
// odd in which one of the part stands behind one of the rest: the sign of
// bringing the part's creators to the front.
func overtaken(fermions, part, rest uint64) bool {
	rest &= fermions
	odd := false
	for a := part & fermions; a != 0; a &= a - 1 {
		below := a&-a - 1
		odd = odd != (bits.OnesCount64(rest&below)&1 == 1)
	}
	return odd
}
