// Archives: an eigenvector is written, the file is opened again without anything
// else, and energy and residual are computed anew from what it holds.
package main

import (
	"context"
	"fmt"
	"log"
	"math"
	"os"
	"path/filepath"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/lanczos/archive"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

func main() {
	ctx := context.Background()
	folder, err := os.MkdirTemp(".", "archives-")
	if err != nil {
		log.Fatal(err)
	}
	path := filepath.Join(folder, "ring.ket")
	err = write(ctx, path)
	if err == nil {
		err = reopen(ctx, path)
	}
	os.RemoveAll(folder)
	if err != nil {
		log.Fatal(err)
	}
}

func write(ctx context.Context, path string) error {
	ring, err := lattice.Ring(12)
	if err != nil {
		return err
	}
	space, err := basis.Uniform(12, basis.SpinHalf())
	if err != nil {
		return err
	}
	h, err := model.XXZ(space, ring, []float64{1}, []float64{2}, nil)
	if err != nil {
		return err
	}
	b, err := basis.New(ctx, space, basis.Sector{
		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: ring.Sector(ring.Momentum(1, 0)),
	}, nil)
	if err != nil {
		return err
	}
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		return err
	}
	result, err := lanczos.Lowest(ctx, m, 2, nil)
	if err != nil {
		return err
	}
	w, err := archive.Create(path)
	if err != nil {
		return err
	}
	w.Note("purpose", "a recipe")
	if err := w.Add(archive.Sector{Basis: b, Operator: h, Result: result}); err != nil {
		w.Discard()
		return err
	}
	return w.Close()
}

func reopen(ctx context.Context, path string) error {
	f, err := archive.Open(path)
	if err != nil {
		return err
	}
	defer f.Close()
	if err := f.Verify(ctx); err != nil {
		return err
	}
	fmt.Println("note:", f.Note("purpose"))
	s, err := f.Sector(0)
	if err != nil {
		return err
	}
	b, err := s.Basis(ctx, nil)
	if err != nil {
		return err
	}
	h, err := s.Operator()
	if err != nil {
		return err
	}
	fmt.Println("basis:", b)
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		return err
	}
	for j := 0; j < s.Len(); j++ {
		v, err := s.Vector(j)
		if err != nil {
			return err
		}
		psi := v.AsComplex()
		image := make([]complex128, len(psi))
		m.ApplyComplex(image, psi)
		e := s.Level(j).Energy
		off := 0.0
		for i := range psi {
			d := image[i] - complex(e, 0)*psi[i]
			off += real(d)*real(d) + imag(d)*imag(d)
		}
		fmt.Printf("level %d: energy %.10f, residual below 1e-8: %v\n", j, e, math.Sqrt(off) < 1e-8)
	}
	return nil
}
