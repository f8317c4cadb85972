package operatortest

import (
	"math/rand/v2"

	"ketloom/basis"
	"ketloom/operator"
)

// RandomSpace returns a space of up to mostSites sites of random kinds, or of
// one random kind, with at most mostStates product states.
func RandomSpace(r *rand.Rand, mostSites int, mostStates float64) *basis.Space {
	kinds := []basis.Site{basis.SpinHalf(), basis.HardCoreBoson(), basis.Fermion(), basis.Electron(), basis.Spin(2), basis.Boson(2), basis.Spin(3)}
	for {
		sites := make([]basis.Site, 1+r.IntN(mostSites))
		same := kinds[r.IntN(len(kinds))]
		mixed := r.IntN(2) == 0
		for i := range sites {
			sites[i] = same
			if mixed {
				sites[i] = kinds[r.IntN(len(kinds))]
			}
		}
		if space, err := basis.NewSpace(sites); err == nil && space.Dimension() <= mostStates {
			return space
		}
	}
}

// Random returns a sum of random products of up to length elementary operators
// with random complex coefficients.
func Random(r *rand.Rand, space *basis.Space, terms, length int) operator.Operator {
	sum := operator.On(space).Zero()
	for range terms {
		product := operator.On(space).One()
		for range r.IntN(length + 1) {
			product = product.Times(Elementary(r, space))
		}
		sum = sum.Plus(product.Scale(complex(r.NormFloat64(), r.NormFloat64())))
	}
	return sum
}

// Elementary returns a random elementary operator on a random site.
func Elementary(r *rand.Rand, space *basis.Space) operator.Operator {
	o := operator.On(space)
	site := r.IntN(space.Sites())
	kind, levels := space.Site(site).Kind, space.Site(site).Levels
	pick := r.IntN(5)
	switch kind {
	case basis.KindSpin:
		if pick == 4 {
			return o.Transfer(site, r.IntN(levels), r.IntN(levels))
		}
		return []operator.Operator{o.Raise(site), o.Lower(site), o.Sz(site), o.Sx(site)}[pick]
	case basis.KindElectron:
		spin := r.IntN(2)
		return []operator.Operator{o.CreateSpin(site, spin), o.AnnihilateSpin(site, spin), o.NumberSpin(site, spin), o.Number(site), o.Raise(site)}[pick]
	}
	return []operator.Operator{o.Create(site), o.Annihilate(site), o.Number(site), o.Create(site), o.Annihilate(site)}[pick]
}
