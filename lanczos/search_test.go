package lanczos

import (
	"context"
	"encoding/json"
	"errors"
	"math"
	"runtime"
	"slices"
	"strings"
	"testing"
)

// chain returns hopping on an open chain in a smooth potential: slow to converge.
func chain(n int) Operator {
	return RealFunc(n, func(dst, src []float64) {
		for i := range dst {
			x := 3 * float64(i) / float64(n)
			dst[i] = x * math.Sin(7*x) * src[i]
			if i > 0 {
				dst[i] -= src[i-1]
			}
			if i+1 < n {
				dst[i] -= src[i+1]
			}
		}
	})
}

// scrambled returns a full matrix with a few low levels, quick to converge.
func scrambled(n int, isComplex bool) Operator {
	levels := bulk(n, -4, -3.5, -3.5, -3, -2.2, -2, -1.5)
	return prescribed(levels, 10, isComplex)
}

func TestWorkersDoNotChangeBits(t *testing.T) {
	const n = 5*blockSize + 17
	for _, isComplex := range []bool{false, true} {
		var first *Result
		for _, workers := range []int{1, 2, 3} {
			result, err := Lowest(context.Background(), scrambled(n, isComplex), 4, &Options{Workers: workers, Krylov: 14})
			if err != nil {
				t.Fatal(err)
			}
			if first == nil {
				first = result
				continue
			}
			if !slices.Equal(first.Levels, result.Levels) || first.Products != result.Products || first.Check != result.Check {
				t.Errorf("%d workers: %v\none: %v", workers, result, first)
			}
			for j := range first.Vectors {
				if !slices.Equal(first.Vectors[j].Real, result.Vectors[j].Real) || !slices.Equal(first.Vectors[j].Complex, result.Vectors[j].Complex) {
					t.Errorf("%d workers: vector %d has other bits", workers, j)
				}
			}
		}
	}
}

func TestSeedsAgree(t *testing.T) {
	op := scrambled(800, true)
	exact := bulk(800, -4, -3.5, -3.5, -3, -2.2, -2, -1.5)
	for seed := range uint64(20) {
		result, err := Lowest(context.Background(), op, 3, &Options{Seed: seed})
		verifyResult(t, "seed", op, result, err, exact, 3)
		if seed != 0 && result.Seed != seed || seed == 0 && result.Seed != DefaultSeed {
			t.Errorf("seed %d given, %d reported", seed, result.Seed)
		}
	}
}

func TestLimitOfProductsKeepsWhatThereIs(t *testing.T) {
	op := chain(3000)
	full, err := Lowest(context.Background(), op, 3, nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, limit := range []int{1, 2, 30, full.Products / 2} {
		result, err := Lowest(context.Background(), op, 3, &Options{Products: limit})
		var stop *StopError
		if !errors.Is(err, ErrNotConverged) || !errors.As(err, &stop) || errors.Is(err, ErrUnchecked) {
			t.Fatalf("limit %d: error %v", limit, err)
		}
		if result == nil || len(result.Levels) != min(3, limit) || len(result.Vectors) != len(result.Levels) || result.Complete || result.Products > limit+3 {
			t.Fatalf("limit %d: result %v", limit, result)
		}
		if stop.Converged != result.Converged || stop.Products != result.Products || stop.Wanted != 3 {
			t.Errorf("limit %d: %+v", limit, stop)
		}
		verifyVectors(t, "limit", op, result)
		for j, l := range result.Levels {
			if l.Energy < full.Levels[j].Energy-1e-10 { // Ritz values lie above
				t.Errorf("limit %d: level %d is %v, below %v", limit, j, l.Energy, full.Levels[j].Energy)
			}
		}
		again, err := Lowest(context.Background(), op, 3, &Options{Start: result.Vectors})
		if err != nil {
			t.Fatal(err)
		}
		for j, l := range again.Levels {
			if math.Abs(l.Energy-full.Levels[j].Energy) > l.Bound+full.Levels[j].Bound {
				t.Errorf("continued from limit %d: level %d is %v, expected %v", limit, j, l.Energy, full.Levels[j].Energy)
			}
		}
	}
}

func TestLimitDuringCheck(t *testing.T) {
	op := scrambled(900, false)
	quick, err := Lowest(context.Background(), op, 1, &Options{Unchecked: true})
	if err != nil || quick.Complete || quick.Converged != 1 || quick.Check.Done {
		t.Fatalf("unchecked: %v %v", quick, err)
	}
	result, err := Lowest(context.Background(), op, 1, &Options{Products: quick.Products + 2})
	if !errors.Is(err, ErrUnchecked) || errors.Is(err, ErrNotConverged) || result.Complete || result.Converged != 1 {
		t.Errorf("%v\n%v", result, err)
	}
	if result.Levels[0].Bound < result.Levels[0].Residual {
		t.Errorf("bound %g below the residual %g without a check", result.Levels[0].Bound, result.Levels[0].Residual)
	}
}

func TestCancelWithinOneProduct(t *testing.T) {
	for _, after := range []int{0, 1, 7, 40, 70} {
		ctx, cancel := context.WithCancel(context.Background())
		products := 0
		inner := scrambled(900, false)
		op := RealFunc(900, func(dst, src []float64) {
			products++
			if products == after {
				cancel()
			}
			inner.Apply(dst, src)
		})
		if after == 0 {
			cancel()
		}
		result, err := Lowest(ctx, op, 4, nil)
		if !errors.Is(err, context.Canceled) || !errors.Is(err, ErrNotConverged) && !errors.Is(err, ErrUnchecked) {
			t.Fatalf("after %d: error %v", after, err)
		}
		if products != after || result == nil || result.Products != after || len(result.Levels) > 4 || after >= 4 && len(result.Levels) != 4 || result.Complete {
			t.Errorf("after %d: %d products, result %v", after, products, result)
		}
		cancel()
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	result, err := Lowest(ctx, scrambled(50, false), 2, nil)
	if !errors.Is(err, context.Canceled) || result == nil || !result.Dense {
		t.Errorf("whole matrix: %v %v", result, err)
	}
}

func TestWarmStart(t *testing.T) {
	exact := bulk(1200, -4, -3.5, -3.5, -3, -2.2, -2, -1.5)
	for _, isComplex := range []bool{false, true} {
		op := scrambled(1200, isComplex)
		cold, err := Lowest(context.Background(), op, 4, nil)
		if err != nil {
			t.Fatal(err)
		}
		before := append([]complex128(nil), cold.Vectors[0].AsComplex()...)
		warm, err := Lowest(context.Background(), op, 4, &Options{Start: cold.Vectors})
		verifyResult(t, "warm", op, warm, err, exact, 4)
		if warm.Products-warm.Check.Products != 8 { // four for the start, four at the end
			t.Errorf("converged start: %d products beside %d for the check", warm.Products, warm.Check.Products)
		}
		if !slices.Equal(before, cold.Vectors[0].AsComplex()) {
			t.Error("start vector modified")
		}
		// Excited, repeated and unnormalised vectors mislead a run, not the list.
		tripled := slices.Clone(cold.Vectors[3].AsComplex())
		for i := range tripled {
			tripled[i] *= 3
		}
		start := []Vector{cold.Vectors[3], {Complex: tripled}}
		if !isComplex {
			start = []Vector{cold.Vectors[3], cold.Vectors[3]}
		}
		odd, err := Lowest(context.Background(), op, 2, &Options{Start: start})
		verifyResult(t, "odd start", op, odd, err, exact, 2)
	}
}

func TestBadProducts(t *testing.T) {
	for _, n := range []int{40, 1000} {
		for name, c := range map[string]struct {
			op Operator
			is error
		}{
			"nan": {RealFunc(n, func(dst, src []float64) { copy(dst, src); dst[n/2] = math.NaN() }), ErrNotFinite},
			"inf": {ComplexFunc(n, func(dst, src []complex128) { copy(dst, src); dst[3] = complex(0, math.Inf(1)) }), ErrNotFinite},
			"shift": {RealFunc(n, func(dst, src []float64) {
				for i := range dst {
					dst[i] = float64(i)*src[i] + src[(i+1)%n]
				}
			}), ErrNotHermitian},
			"damped": {ComplexFunc(n, func(dst, src []complex128) {
				for i := range dst {
					dst[i] = complex(float64(i), -1e-3) * src[i]
				}
			}), ErrNotHermitian},
			"one element": {RealFunc(n, func(dst, src []float64) {
				for i := range dst {
					dst[i] = float64(i%7) * src[i]
				}
				dst[1] += 1e-3 * src[5]
			}), ErrNotHermitian},
		} {
			result, err := Lowest(context.Background(), c.op, 2, nil)
			if !errors.Is(err, c.is) || result != nil || !strings.HasPrefix(err.Error(), "lanczos: ") {
				t.Errorf("n=%d %s: %v %v", n, name, result, err)
			}
		}
	}
}

func TestBadArguments(t *testing.T) {
	op, z := scrambled(400, false), make([]float64, 400)
	one := make([]float64, 400)
	one[0] = 1
	for says, c := range map[string]struct {
		op   Operator
		k    int
		opts *Options
	}{
		"nil operator":             {nil, 1, nil},
		"nil product":              {RealFunc(5, nil), 1, nil},
		"with a nil product":       {ComplexFunc(5, nil), 1, nil},
		"dimension 0":              {RealFunc(0, func(dst, src []float64) {}), 1, nil},
		"401 levels":               {op, 401, nil},
		"0 levels":                 {op, 0, nil},
		"-3 levels":                {op, -3, nil},
		"Tolerance 1e-17":          {op, 1, &Options{Tolerance: 1e-17}},
		"Tolerance NaN":            {op, 1, &Options{Tolerance: math.NaN()}},
		"MissChance 0.5":           {op, 1, &Options{MissChance: 0.5}},
		"negative option":          {op, 1, &Options{Workers: -1}},
		"Krylov 5 for 3":           {op, 3, &Options{Krylov: 5}},
		"Memory 1000":              {op, 3, &Options{Memory: 1000}},
		"has 3 components":         {op, 1, &Options{Start: []Vector{{Real: z[:3]}}}},
		"zero or not finite":       {op, 1, &Options{Start: []Vector{{Real: z}}}},
		"one kind":                 {op, 1, &Options{Start: []Vector{{Complex: make([]complex128, 400)}}}},
		"5 start vectors":          {op, 1, &Options{Krylov: 8, Start: []Vector{{Real: one}, {Real: one}, {Real: one}, {Real: one}, {Real: one}}}},
		"0 real and 0 complex com": {op, 1, &Options{Start: []Vector{{}}}},
	} {
		result, err := Lowest(context.Background(), c.op, c.k, c.opts)
		if !errors.Is(err, ErrArgument) || result != nil || !strings.Contains(err.Error(), says) {
			t.Errorf("%q: %v %v", says, result, err)
		}
	}
}

func TestOptionsAndResultForms(t *testing.T) {
	op := scrambled(900, true)
	opts := &Options{EnergiesOnly: true, Memory: 16 * 900 * 16}
	before := *opts
	calls, last := 0, int64(0)
	opts.Progress = func(what string, done, total int64, rate float64) {
		calls++
		if what == "" || done < last || rate < 0 {
			t.Errorf("progress %q %d %d %g", what, done, total, rate)
		}
		last = done
	}
	result, err := Lowest(context.Background(), op, 2, opts)
	if err != nil {
		t.Fatal(err)
	}
	if calls == 0 {
		t.Error("no progress")
	}
	if result.Vectors != nil || result.Krylov != 11 { // 16 vectors less 2k+1
		t.Errorf("%d vectors, Krylov space of %d", len(result.Vectors), result.Krylov)
	}
	if opts.Tolerance != before.Tolerance || opts.Seed != 0 || opts.Krylov != 0 || opts.Products != 0 {
		t.Error("options modified")
	}
	data, err := json.Marshal(result)
	if err != nil {
		t.Fatal(err)
	}
	var back Result
	if err := json.Unmarshal(data, &back); err != nil || !slices.Equal(back.Levels, result.Levels) || back.Check != result.Check {
		t.Errorf("JSON: %v %s", err, data)
	}
	if lines := strings.Split(result.String(), "\n"); len(lines) != 3 || !strings.Contains(lines[0], "2 of 2 levels") || !strings.Contains(lines[1], "the last multiplet is cut") {
		t.Errorf("string: %s", result)
	}
	if (&Result{Dim: 3, Reason: "none"}).String() == "" {
		t.Error("empty result has no string")
	}
}

// The longer of two searches that differ in length only allocates no more: a
// product, a judgement and a condensation need nothing.
func TestProductsDoNotAllocate(t *testing.T) {
	op := chain(3 * blockSize)
	measure := func(products int) (bytes, count uint64) {
		var a, b runtime.MemStats
		runtime.GC()
		runtime.ReadMemStats(&a)
		_, err := Lowest(context.Background(), op, 4, &Options{Products: products, Krylov: 7, Tolerance: SmallestTolerance, Workers: 2})
		runtime.ReadMemStats(&b)
		if !errors.Is(err, ErrNotConverged) {
			t.Fatal(err)
		}
		return b.TotalAlloc - a.TotalAlloc, b.Mallocs - a.Mallocs
	}
	measure(20)
	bytes1, count1 := measure(40)
	bytes2, count2 := measure(440)
	if perProduct := (float64(count2) - float64(count1)) / 400; perProduct > 0.05 {
		t.Errorf("%.2f allocations a product", perProduct)
	}
	if perProduct := (float64(bytes2) - float64(bytes1)) / 400; perProduct > 50 {
		t.Errorf("%.0f bytes allocated a product", perProduct)
	}
}

func TestVectorForms(t *testing.T) {
	a, b := Vector{Real: []float64{1, 2}}, Vector{Complex: []complex128{1i}}
	if a.Len() != 2 || a.At(1) != 2 || !slices.Equal(a.AsComplex(), []complex128{1, 2}) {
		t.Error("real vector")
	}
	if b.Len() != 1 || b.At(0) != 1i || &b.AsComplex()[0] != &b.Complex[0] {
		t.Error("complex vector")
	}
	if (Vector{}).Len() != 0 || (Vector{}).AsComplex() != nil {
		t.Error("empty vector")
	}
}
