package lanczos

import (
	"context"
	"errors"
	"fmt"
	"math"

	"ketloom/lanczos/dense"
)

// whole builds the matrix from products with unit vectors and diagonalises it.
func whole[T scalar](ctx context.Context, op Operator, s settings, f field[T]) (*Result, error) {
	n := s.dim
	clock := newClock(s.Progress)
	a, column, unit := make([]T, n*n), make([]T, n), make([]T, n)
	stopped := func(done int) (*Result, error) {
		r := &Result{Dim: n, Tolerance: s.Tolerance, Products: done, Seed: s.Seed, Dense: true, Reason: ctx.Err().Error()}
		return r, r.conclude(s.k, false, ctx.Err())
	}
	for j := range n {
		if ctx.Err() != nil {
			return stopped(j)
		}
		unit[j] = f.number(1)
		f.apply(op, column, unit)
		unit[j] = 0
		for i, z := range column {
			a[i*n+j] = z
		}
		clock.tick("products", j+1, n+s.k)
	}
	values, vectors, err := f.eigen(a, n)
	switch {
	case errors.Is(err, dense.ErrNotHermitian):
		return nil, fmt.Errorf("lanczos: matrix of the products: %w: %w", err, ErrNotHermitian)
	case errors.Is(err, dense.ErrNotFinite):
		return nil, fmt.Errorf("lanczos: matrix of the products: %w: %w", err, ErrNotFinite)
	case err != nil:
		return nil, err
	}
	r := &Result{
		Dim: n, Norm: math.Max(math.Abs(values[0]), math.Abs(values[n-1])), Tolerance: s.Tolerance,
		Products: n + s.k, Seed: s.Seed, Dense: true, Reason: "whole matrix diagonalised",
		Check: Check{Done: true, Below: values[s.k-1]},
	}
	if s.k < n {
		r.Check.Next, r.Check.HasNext = values[s.k], true
		r.CutMultiplet = values[s.k] <= values[s.k-1]+s.Tolerance*r.Norm
	}
	space := newSpace(f, n, 1)
	defer space.crew.close()
	for j := range s.k {
		if ctx.Err() != nil {
			return stopped(n + j)
		}
		v := append([]T(nil), vectors[j*n:(j+1)*n]...)
		f.apply(op, column, v)
		r.Levels = append(r.Levels, Level{Energy: values[j], Residual: space.residual(column, v, values[j])})
		if !s.EnergiesOnly {
			r.Vectors = append(r.Vectors, f.vector(v))
		}
	}
	bound(r)
	return r, r.conclude(s.k, false, nil)
}
