package entangle

import (
	"slices"

	"ketloom/basis"
)

// labels are the charges of the part that name the blocks.
type labels struct {
	names   []string
	moduli  []int
	weights [][][]int // [charge][mode][level], nothing on the lowest levels
	offsets []int     // what the lowest levels of the part's sites carry
	modes   []basis.Mode
}

// newLabels makes labels of charges. The lowest levels of the sites count, as
// they do in the charge itself; without sites they do not, for parts that are
// particles.
func newLabels(space *basis.Space, charges []basis.Charge, sites []int) labels {
	l := labels{}
	for m := range space.Modes() {
		l.modes = append(l.modes, space.Mode(m))
	}
	for _, q := range charges {
		weights, _ := q.ModeWeights(space)
		offset := 0
		for _, site := range sites {
			offset += q.Weights[site][0]
		}
		l.names = append(l.names, q.Name)
		l.moduli = append(l.moduli, q.Modulus)
		l.weights = append(l.weights, weights)
		l.offsets = append(l.offsets, offset)
	}
	return l
}

// of returns the charges of a configuration of the part, whose other modes are
// on their lowest level.
func (l labels) of(part uint64) []int {
	q := slices.Clone(l.offsets)
	for m, mode := range l.modes {
		level := mode.Level(basis.Configuration(part))
		if level == 0 {
			continue
		}
		for i := range q {
			q[i] += l.weights[i][m][level]
		}
	}
	for i, m := range l.moduli {
		if m > 0 {
			q[i] = (q[i]%m + m) % m
		}
	}
	return q
}

// without returns the labels but for one.
func (l labels) without(i int) labels {
	l.names = slices.Delete(slices.Clone(l.names), i, i+1)
	l.moduli = slices.Delete(slices.Clone(l.moduli), i, i+1)
	l.weights = slices.Delete(slices.Clone(l.weights), i, i+1)
	l.offsets = slices.Delete(slices.Clone(l.offsets), i, i+1)
	return l
}

// fixedCharges returns the charges that the sectors of all states fix.
func fixedCharges(states []State) []basis.Charge {
	var fixed []basis.Charge
	for _, v := range states[0].basis.Sector().Charges {
		everywhere := true
		for _, s := range states[1:] {
			everywhere = everywhere && slices.ContainsFunc(s.basis.Sector().Charges, func(w basis.ChargeValue) bool {
				return sameCharge(v.Charge, w.Charge)
			})
		}
		if everywhere {
			fixed = append(fixed, v.Charge)
		}
	}
	return fixed
}

// sameCharge compares what charges count, not their names.
func sameCharge(a, b basis.Charge) bool {
	return a.Modulus == b.Modulus && slices.EqualFunc(a.Weights, b.Weights, slices.Equal)
}

// unfixed returns particle number and 2Sz where they are not constant in the
// space and not among the charges: the states may conserve them all the same.
func unfixed(space *basis.Space, charges []basis.Charge) []basis.Charge {
	var list []basis.Charge
	for _, q := range []basis.Charge{space.ParticleNumber(), space.TwiceSz()} {
		constant := !slices.ContainsFunc(q.Weights, func(w []int) bool { return w[0] != w[len(w)-1] || w[0] != w[1] })
		known := slices.ContainsFunc(charges, func(p basis.Charge) bool { return sameCharge(p, q) })
		if !constant && !known {
			list = append(list, q)
		}
	}
	return list
}
