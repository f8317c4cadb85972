// Resume: a search is stopped in the middle, its checkpoint is kept in a file, and a second
// search goes on from there and ends with the same bits as one that never stopped.
package main

import (
	"context"
	"fmt"
	"log"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

func main() {
	ring, err := lattice.Ring(16)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(16, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	h, err := model.Heisenberg(space, ring, []float64{1})
	if err != nil {
		log.Fatal(err)
	}
	b, err := basis.New(context.Background(), space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}}, nil)
	if err != nil {
		log.Fatal(err)
	}
	m, err := matrix.New(context.Background(), h, b, nil)
	if err != nil {
		log.Fatal(err)
	}
	whole, err := lanczos.Lowest(context.Background(), m, 2, nil)
	if err != nil {
		log.Fatal(err)
	}
	ctx, stop := context.WithCancel(context.Background())
	_, err = lanczos.Lowest(ctx, m, 2, &lanczos.Options{
		CheckpointEvery: 1, // at every chance
		Checkpoint: func(c *lanczos.Checkpoint) error {
			stop() // as Ctrl-C would
			return c.Save("state")
		},
	})
	fmt.Println("stopped:", err != nil)
	state, err := lanczos.LoadCheckpoint("state")
	if err != nil {
		log.Fatal(err)
	}
	rest, err := lanczos.Lowest(context.Background(), m, 2, &lanczos.Options{Resume: state})
	if err != nil {
		log.Fatal(err)
	}
	for i, l := range rest.Levels {
		fmt.Printf("level %d: %.10f, the same bits: %v\n", i, l.Energy, l.Energy == whole.Levels[i].Energy)
	}
}
