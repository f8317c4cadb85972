package archive_test

import (
	"context"
	"fmt"
	"log"
	"os"
	"path/filepath"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/lanczos/archive"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

// The ground state of a ring of eight spins is written, and read again with
// nothing but the file.
func Example() {
	folder, err := os.MkdirTemp("", "archive")
	if err != nil {
		log.Fatal(err)
	}
	defer os.RemoveAll(folder)
	path := filepath.Join(folder, "ring.ket")
	if err := writeRing(path); err != nil {
		log.Fatal(err)
	}

	f, err := archive.Open(path)
	if err != nil {
		log.Fatal(err)
	}
	defer f.Close()
	if err := f.Verify(context.Background()); err != nil {
		log.Fatal(err)
	}
	s, err := f.Sector(0)
	if err != nil {
		log.Fatal(err)
	}
	b, err := s.Basis(context.Background(), nil)
	if err != nil {
		log.Fatal(err)
	}
	v, err := s.Vector(0)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Println("model:", f.Note("model"))
	fmt.Printf("energy: %.10f\n", s.Level(0).Energy)
	fmt.Println("amplitudes:", v.Len(), "states:", b.Len())
	fmt.Println("witnesses:", s.CheckWitnesses(b, 0))
	// Output:
	// model: Heisenberg ring of eight spins 1/2
	// energy: -3.6510934089
	// amplitudes: 10 states: 10
	// witnesses: <nil>
}

func writeRing(path string) error {
	ctx := context.Background()
	cluster, err := lattice.Ring(8)
	if err != nil {
		return err
	}
	space, err := basis.Uniform(8, basis.SpinHalf())
	if err != nil {
		return err
	}
	h, err := model.XXZ(space, cluster, []float64{1}, []float64{1}, nil)
	if err != nil {
		return err
	}
	b, err := basis.New(ctx, space, basis.Sector{
		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: cluster.Sector(cluster.Momentum(0, 0)),
	}, nil)
	if err != nil {
		return err
	}
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		return err
	}
	result, err := lanczos.Lowest(ctx, m, 1, nil)
	if err != nil {
		return err
	}
	w, err := archive.Create(path)
	if err != nil {
		return err
	}
	w.Note("model", "Heisenberg ring of eight spins 1/2")
	if err := w.Add(archive.Sector{Basis: b, Operator: h, Result: result}); err != nil {
		w.Discard()
		return err
	}
	return w.Close()
}
