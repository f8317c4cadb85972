package basis

import "fmt"

// Charge is an additive quantity of a configuration,
//
//	Q(c) = Σ_i Weights[i][level of site i]   (modulo Modulus, if that is not 0).
//
// Particle number, 2S_z and the crystal momentum carried by orbitals are
// charges. On an electron site the weight of both electrons must be the sum of
// those of one, relative to the empty site.
type Charge struct {
	Name    string  `json:"name"`
	Modulus int     `json:"modulus,omitempty"` // 0 for an integer charge
	Weights [][]int `json:"weights"`
}

// ChargeValue is a charge with the value that a sector fixes.
type ChargeValue struct {
	Charge Charge `json:"charge"`
	Value  int    `json:"value"`
}

// LargestWeight bounds the weights, values and moduli of charges.
const LargestWeight = 1 << 20

// Is returns the charge with a value, to be fixed by a [Sector].
func (q Charge) Is(value int) ChargeValue { return ChargeValue{q, value} }

// Of returns the value of the charge in c, between 0 and Modulus-1 where it is
// defined modulo a number.
func (q Charge) Of(s *Space, c Configuration) int {
	total := 0
	for i := range s.sites {
		total += q.Weights[i][s.Level(c, i)]
	}
	return q.reduce(total)
}

// reduce brings a value between 0 and Modulus-1, where there is a modulus.
func (q Charge) reduce(v int) int {
	if q.Modulus == 0 {
		return v
	}
	return ((v % q.Modulus) + q.Modulus) % q.Modulus
}

// ParticleNumber returns the number of bosons, fermions and electrons; spin
// sites count nothing.
func (s *Space) ParticleNumber() Charge {
	return s.charge("N", func(site Site, level int) int {
		switch site.Kind {
		case KindSpin:
			return 0
		case KindElectron:
			return level&1 + level>>1
		}
		return level
	})
}

// TwiceSz returns 2S_z: of spin sites, and N_up - N_down of electron sites.
// Bosons and spinless fermions count nothing.
func (s *Space) TwiceSz() Charge {
	return s.charge("2Sz", func(site Site, level int) int {
		switch site.Kind {
		case KindSpin:
			return 2*level - site.Levels + 1
		case KindElectron:
			return level&1 - level>>1
		}
		return 0
	})
}

func (s *Space) charge(name string, weight func(site Site, level int) int) Charge {
	q := Charge{Name: name, Weights: make([][]int, len(s.sites))}
	for i, site := range s.sites {
		q.Weights[i] = make([]int, site.Levels)
		for level := range q.Weights[i] {
			q.Weights[i][level] = weight(site, level)
		}
	}
	return q
}

// Weighted returns the charge Σ_i weights[i]·(particles on site i), modulo a
// number if modulus is not 0. On spin sites the steps above the lowest level
// are counted. The crystal momentum that orbitals carry is such a charge, with
// the momentum of each orbital as its weight and L as modulus.
//
// A list of the wrong length gives a charge that every use refuses.
func (s *Space) Weighted(name string, modulus int, weights []int) Charge {
	q := Charge{Name: name, Modulus: modulus}
	if len(weights) != len(s.sites) {
		return q
	}
	for i, site := range s.sites {
		w := make([]int, site.Levels)
		for level := range w {
			particles := level
			if site.Kind == KindElectron {
				particles = level&1 + level>>1
			}
			w[level] = particles * weights[i]
		}
		q.Weights = append(q.Weights, w)
	}
	return q
}

// Check reports why q is not a charge of the space: weights for other sites or
// levels, an impossible modulus, weights that are too large, or weights on an
// electron site that do not add up.
func (q Charge) Check(s *Space) error {
	if len(q.Weights) != len(s.sites) {
		return fmt.Errorf("basis: the charge %q has weights for %d sites, the space has %d; give one list of weights a site", q.Name, len(q.Weights), len(s.sites))
	}
	if q.Modulus < 0 || q.Modulus > LargestWeight {
		return fmt.Errorf("basis: the charge %q is taken modulo %d; use 0 (an integer charge) or 1 … %d", q.Name, q.Modulus, LargestWeight)
	}
	for i, site := range s.sites {
		w := q.Weights[i]
		if len(w) != site.Levels {
			return fmt.Errorf("basis: the charge %q has %d weights on site %d, which is a %v with %d levels", q.Name, len(w), i, site, site.Levels)
		}
		for _, v := range w {
			if v > LargestWeight || v < -LargestWeight {
				return fmt.Errorf("basis: the charge %q has the weight %d on site %d; the largest is %d", q.Name, v, i, LargestWeight)
			}
		}
		if site.Kind == KindElectron && q.reduce(w[3]+w[0]-w[1]-w[2]) != 0 {
			return fmt.Errorf("basis: the charge %q is not additive on the electron site %d: the weight of ⇅ must be that of ↑ plus that of ↓", q.Name, i)
		}
	}
	return nil
}

// ModeWeights returns the charge by modes, Q(c) = constant + Σ_m
// weights[m][level of mode m], with nothing on the lowest levels. The charge
// must pass [Charge.Check].
func (q Charge) ModeWeights(s *Space) (weights [][]int, constant int) {
	weights = make([][]int, len(s.modes))
	for m, mode := range s.modes {
		w := q.Weights[mode.Site]
		weights[m] = make([]int, mode.Levels)
		step := 1 + mode.Component // level of the site that a step of the mode makes
		for level := range weights[m] {
			weights[m][level] = w[level*step] - w[0]
		}
	}
	for i := range s.sites {
		constant += q.Weights[i][0]
	}
	return weights, constant
}
