// Package chain is what this program adds to the packages of every script: the
// spin chain of its own study.
package chain

import (
	"context"
	"fmt"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

// Ring is a closed chain of spins 1/2 with exchange to the first two neighbours.
type Ring struct {
	Sites         int
	First, Second float64
}

// Lowest returns the lowest level of the ring with S_z = 0.
//
// Errors: an odd number of sites, or what the calculation says.
func (r Ring) Lowest(ctx context.Context) (lanczos.Level, error) {
	if r.Sites < 4 || r.Sites%2 != 0 {
		return lanczos.Level{}, fmt.Errorf("chain: a ring of %d sites; give an even number from 4", r.Sites)
	}
	ring, err := lattice.Ring(r.Sites)
	if err != nil {
		return lanczos.Level{}, err
	}
	space, err := basis.Uniform(r.Sites, basis.SpinHalf())
	if err != nil {
		return lanczos.Level{}, err
	}
	h, err := model.Heisenberg(space, ring, []float64{r.First, r.Second})
	if err != nil {
		return lanczos.Level{}, err
	}
	b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}}, nil)
	if err != nil {
		return lanczos.Level{}, err
	}
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		return lanczos.Level{}, err
	}
	result, err := lanczos.Lowest(ctx, m, 1, nil)
	if err != nil {
		return lanczos.Level{}, err
	}
	return result.Levels[0], nil
}
