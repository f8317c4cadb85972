package archive

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"reflect"
	"runtime"
	"slices"
	"strings"
	"sync"
	"testing"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/operator"
)

// Everything that is written comes back with the same bits, over bases of every
// kind of site, with and without symmetries, real and complex.
func TestRoundTrip(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	half := func(s *basis.Space) basis.ChargeValue { return s.ParticleNumber().Is(s.Sites() / 2) }
	cases := map[string]struct {
		b       *basis.Basis
		h       func(*basis.Space) operator.Operator
		complex bool
	}{
		"spins 1/2, k=0":      {ring(t, 10, basis.SpinHalf(), 0, func(s *basis.Space) basis.ChargeValue { return s.TwiceSz().Is(0) }), heisenberg, false},
		"spins 1/2, k=2π/10":  {ring(t, 10, basis.SpinHalf(), 1, func(s *basis.Space) basis.ChargeValue { return s.TwiceSz().Is(0) }), heisenberg, true},
		"spins 1, k=π":        {ring(t, 6, basis.Spin(2), 3, nil), heisenberg, false},
		"spins 3/2, k=2π/3":   {ring(t, 3, basis.Spin(3), 1, nil), heisenberg, true},
		"fermions, k=2π/9":    {ring(t, 9, basis.Fermion(), 1, half), hopping, true},
		"fermions, k=-2π/9":   {ring(t, 9, basis.Fermion(), -1, half), hopping, true},
		"bosons up to 2, k=0": {ring(t, 5, basis.Boson(2), 0, nil), hopping, false},
		"hard core, k=π/2":    {ring(t, 8, basis.HardCoreBoson(), 2, half), hopping, true},
		"product states":      {product(t, 9), heisenberg, false},
		"product, complex":    {product(t, 8), heisenberg, true},
		"one state":           {ring(t, 4, basis.SpinHalf(), 0, func(s *basis.Space) basis.ChargeValue { return s.TwiceSz().Is(4) }), heisenberg, false},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			h := c.h(c.b.Space())
			if err := h.Err(); err != nil {
				t.Fatal(err)
			}
			result := invented(c.b, 3, c.complex, r)
			f := opened(t, write(t, Sector{Basis: c.b, Operator: h, Result: result, Notes: map[string]string{"name": name}}))
			compare(t, f, c.b, h, result)
			s, _ := f.Sector(0)
			if s.Note("name") != name || s.Note("none") != "" || !slices.Equal(s.NoteKeys(), []string{"name"}) {
				t.Errorf("notes %v", s.NoteKeys())
			}
		})
	}
}

func compare(t *testing.T, f *File, b *basis.Basis, h operator.Operator, result *lanczos.Result) {
	t.Helper()
	ctx := context.Background()
	if err := f.Verify(ctx); err != nil {
		t.Fatal(err)
	}
	s, err := f.Sector(0)
	if err != nil {
		t.Fatal(err)
	}
	again, err := s.Basis(ctx, nil)
	if err != nil {
		t.Fatal(err)
	}
	if again.Fingerprint() != b.Fingerprint() || again.Len() != b.Len() || s.Dimension() != b.Len() || s.Fingerprint() != b.Fingerprint() {
		t.Error("the basis is another one")
	}
	op, err := s.Operator()
	if err != nil || !op.Equal(h) {
		t.Errorf("the operator is another one: %v", err)
	}
	want := *result
	want.Vectors = nil
	if got := s.Solver(); !reflect.DeepEqual(got, &want) {
		t.Errorf("solver %+v, was %+v", got, want)
	}
	for j := range result.Levels {
		v, err := s.Vector(j)
		if err != nil {
			t.Fatal(err)
		}
		if !sameBits(v, result.Vectors[j]) {
			t.Errorf("vector %d has other bits", j)
		}
		if s.Level(j) != result.Levels[j] {
			t.Errorf("level %d is %+v, was %+v", j, s.Level(j), result.Levels[j])
		}
		if math.Abs(s.Norm(j)-norm(v)) > 1e-14 || s.Complex(j) != (v.Complex != nil) {
			t.Errorf("vector %d: norm %v, complex %v", j, s.Norm(j), s.Complex(j))
		}
		if err := s.CheckWitnesses(again, j); err != nil {
			t.Error(err)
		}
	}
}

// Values at the edge of float64 keep their bits, negative zero included.
func TestEdgeValues(t *testing.T) {
	b := product(t, 4)
	values := []float64{0, math.Copysign(0, -1), math.SmallestNonzeroFloat64, -math.SmallestNonzeroFloat64, 0x1p-1022, 1e-300, -1e150, 1e150, 1, -1, math.Nextafter(1, 2), math.Pi, -math.E, 0x1p-1074, 1e-16, 3}
	z := make([]complex128, len(values))
	for i, x := range values {
		z[i] = complex(x, values[len(values)-1-i])
	}
	result := &lanczos.Result{Levels: make([]lanczos.Level, 2), Vectors: []lanczos.Vector{{Real: values}, {Complex: z}}}
	f := opened(t, write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: result}))
	s, _ := f.Sector(0)
	for j := range 2 {
		v, err := s.Vector(j)
		if err != nil || !sameBits(v, result.Vectors[j]) {
			t.Errorf("vector %d: %v", j, err)
		}
	}
}

// Vectors of several chunks, of both codings, whole and in parts.
func TestManyChunks(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	b := product(t, 18) // 2 chunks real, 4 complex
	result := invented(b, 3, false, r)
	for i := range result.Vectors[1].Real { // repeated words
		result.Vectors[1].Real[i] = result.Vectors[0].Real[i*i%97]
	}
	result.Vectors[2] = randomVector(b.Len(), true, r)
	path := write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: result})
	f := opened(t, path)
	var codings []uint32
	for _, k := range f.chunks {
		codings = append(codings, k.coding)
	}
	if !slices.Equal(codings, []uint32{codingPlanes, codingPlanes, codingWords, codingWords, codingPlanes, codingPlanes, codingPlanes, codingPlanes}) {
		t.Errorf("codings %v", codings)
	}
	info, err := os.Stat(path)
	if err != nil {
		t.Fatal(err)
	}
	if limit := int64(b.Len() * 8 * 3 * 95 / 100); info.Size() > limit {
		t.Errorf("%d bytes, expected at most %d", info.Size(), limit)
	}
	s, _ := f.Sector(0)
	for j, v := range result.Vectors {
		got, err := s.Vector(j)
		if err != nil || !sameBits(got, v) {
			t.Fatalf("vector %d: %v", j, err)
		}
		for _, span := range [][2]int{{0, 1}, {b.Len() - 1, 1}, {65535, 2}, {65536, 1}, {131071, 2}, {100, 200000}, {0, b.Len()}} {
			part, err := s.Part(j, span[0], span[1])
			if err != nil || !sameBits(part, slice(v, span[0], span[0]+span[1])) {
				t.Errorf("vector %d, %d amplitudes from %d on: %v", j, span[1], span[0], err)
			}
		}
	}
	for _, span := range [][2]int{{-1, 1}, {0, 0}, {0, b.Len() + 1}, {b.Len(), 1}, {1, math.MaxInt}, {math.MaxInt, 1}} {
		if _, err := s.Part(0, span[0], span[1]); err == nil {
			t.Errorf("%d amplitudes from %d on were read", span[1], span[0])
		}
	}
}

// The bytes do not depend on the number of goroutines, and equal contents make
// equal files.
func TestSameBytes(t *testing.T) {
	b := product(t, 18)
	h := heisenberg(b.Space())
	result := invented(b, 2, true, rand.New(rand.NewPCG(7, 8)))
	var files [][]byte
	for _, processors := range []int{1, 2, 5} {
		before := runtime.GOMAXPROCS(processors)
		data, err := os.ReadFile(write(t, Sector{Basis: b, Operator: h, Result: result, Notes: map[string]string{"b": "2", "a": "1"}}))
		runtime.GOMAXPROCS(before)
		if err != nil {
			t.Fatal(err)
		}
		files = append(files, data)
	}
	if string(files[0]) != string(files[1]) || string(files[0]) != string(files[2]) {
		t.Error("the bytes depend on the number of goroutines")
	}
}

// Sectors share their operator in the file.
func TestSharedOperator(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	var sectors []Sector
	for m := range 8 {
		b := ring(t, 8, basis.SpinHalf(), m, nil)
		sectors = append(sectors, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: invented(b, 1, true, r)})
	}
	other := ring(t, 8, basis.SpinHalf(), 0, nil)
	sectors = append(sectors, Sector{Basis: other, Operator: heisenberg(other.Space()).Scale(2), Result: invented(other, 1, false, r)})
	f := opened(t, write(t, sectors...))
	if len(f.body.Operators) != 2 {
		t.Errorf("%d operators are stored, 2 are different", len(f.body.Operators))
	}
	for i, sector := range sectors {
		s, err := f.Sector(i)
		if err != nil {
			t.Fatal(err)
		}
		h, err := s.Operator()
		if err != nil || !h.Equal(sector.Operator) {
			t.Errorf("sector %d: operator %v", i, err)
		}
	}
}

func TestDescriptions(t *testing.T) {
	b := ring(t, 6, basis.SpinHalf(), 1, nil)
	result := invented(b, 1, true, rand.New(rand.NewPCG(11, 12)))
	f := opened(t, write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: result}))
	if f.Program() != Program || f.GoVersion() != runtime.Version() || f.Created() != "2026-03-01T12:00:00Z" {
		t.Errorf("%s, %s, %s", f.Program(), f.GoVersion(), f.Created())
	}
	if f.Note("purpose") != "a test" || !slices.Equal(f.NoteKeys(), []string{"purpose"}) {
		t.Errorf("notes %v", f.NoteKeys())
	}
	s, _ := f.Sector(0)
	text := strings.Join(s.Conventions(), "\n")
	for _, word := range []string{"exp(-i k.a)", "conj(chi(g))", "modes ascending", "smallest configuration of its orbit", "<c|r~>"} {
		if !strings.Contains(text, word) {
			t.Errorf("the conventions do not say %q", word)
		}
	}
	for _, i := range []int{-1, 1} {
		if _, err := f.Sector(i); err == nil {
			t.Errorf("there is a sector %d", i)
		}
		if _, err := s.Vector(i); err == nil {
			t.Errorf("there is a vector %d", i)
		}
	}
}

// The rule of the phase is stated only where it holds.
func TestPhaseRule(t *testing.T) {
	b := product(t, 2)
	cases := []struct {
		v    lanczos.Vector
		want string
	}{
		{lanczos.Vector{Real: []float64{0.1, 0.5, -0.7, 0.7}}, phaseFree},
		{lanczos.Vector{Real: []float64{0.1, 0.5, 0.7, -0.7}}, phaseFixed},
		{lanczos.Vector{Real: []float64{0.1, 0.5, 0.7 * (1 - 1e-7), -0.7}}, phaseFixed},
		{lanczos.Vector{Real: []float64{0.1, 0.5, 0.7 * (1 - 1e-5), -0.7}}, phaseFree},
		{lanczos.Vector{Real: []float64{0, 0, 0, 0}}, phaseFree},
		{lanczos.Vector{Complex: []complex128{0.1i, 0.5i, 0.7, -0.7}}, phaseFixed},
		{lanczos.Vector{Complex: []complex128{0.1i, 0.7i, 0.7, -0.7}}, phaseFree},
	}
	result := &lanczos.Result{}
	for _, c := range cases {
		result.Levels = append(result.Levels, lanczos.Level{})
		result.Vectors = append(result.Vectors, c.v)
	}
	f := opened(t, write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: result}))
	s, _ := f.Sector(0)
	for j, c := range cases {
		if got := s.PhaseRule(j); got != c.want {
			t.Errorf("vector %d: %q, expected %q", j, got, c.want)
		}
	}
}

// What Lowest returns obeys the rule.
func TestPhaseOfSolver(t *testing.T) {
	const n = 64
	op := lanczos.RealFunc(n, func(dst, src []float64) {
		for i := range dst {
			dst[i] = float64(i*i%11)*src[i] - src[(i+1)%n] - src[(i+n-1)%n]
		}
	})
	result, err := lanczos.Lowest(context.Background(), op, 3, nil)
	if err != nil {
		t.Fatal(err)
	}
	b := product(t, 6)
	f := opened(t, write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: result}))
	s, _ := f.Sector(0)
	for j := range s.Len() {
		if s.PhaseRule(j) != phaseFixed {
			t.Errorf("vector %d: %s", j, s.PhaseRule(j))
		}
	}
	if got := s.Solver(); got.Complete != result.Complete || got.Seed != result.Seed || got.Products != result.Products || got.Check != result.Check {
		t.Errorf("%+v", got)
	}
}

// Many goroutines read one file.
func TestConcurrentReading(t *testing.T) {
	b := product(t, 17)
	result := invented(b, 4, false, rand.New(rand.NewPCG(13, 14)))
	f := opened(t, write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: result}))
	var wait sync.WaitGroup
	errs := make(chan error, 64)
	for g := range 8 {
		wait.Go(func() {
			for k := range 4 {
				j := (g + k) % 4
				s, err := f.Sector(0)
				if err != nil {
					errs <- err
					return
				}
				v, err := s.Vector(j)
				if err == nil && !sameBits(v, result.Vectors[j]) {
					err = fmt.Errorf("vector %d has other bits", j)
				}
				if err == nil && g == 0 {
					err = f.Verify(context.Background())
				}
				if err != nil {
					errs <- err
				}
			}
		})
	}
	wait.Wait()
	close(errs)
	for err := range errs {
		t.Error(err)
	}
}

func TestBudget(t *testing.T) {
	b := product(t, 10)
	f := opened(t, write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: invented(b, 1, false, rand.New(rand.NewPCG(15, 16)))}))
	s, _ := f.Sector(0)
	f.SetBudget(8*1024 - 1)
	if _, err := s.Vector(0); err == nil || !strings.Contains(err.Error(), "SetBudget") {
		t.Errorf("a vector above the budget was read: %v", err)
	}
	if _, err := s.Part(0, 5, 100); err != nil {
		t.Error(err)
	}
	f.SetBudget(8 * 1024)
	if _, err := s.Vector(0); err != nil {
		t.Error(err)
	}
}

func TestVerifyStops(t *testing.T) {
	b := product(t, 10)
	f := opened(t, write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: invented(b, 1, false, rand.New(rand.NewPCG(17, 18)))}))
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if err := f.Verify(ctx); err == nil {
		t.Error("a stopped Verify says nothing")
	}
}

// A file without sectors is legal.
func TestNoSectors(t *testing.T) {
	path := filepath.Join(t.TempDir(), "none.ket")
	w, err := Create(path)
	if err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	f := opened(t, path)
	if f.Sectors() != 0 || f.Verify(context.Background()) != nil {
		t.Error("an empty archive is not one")
	}
}
