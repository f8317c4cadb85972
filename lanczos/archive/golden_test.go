package archive

import (
	"flag"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"path/filepath"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/operator"
	"ketloom/operator/matrix"
)

var writeGolden = flag.Bool("write-golden", false, "write testdata/v1.ket anew; after the first release that file must never change")

var goldenPath = filepath.Join("testdata", "v1.ket")

// goldenDigests are the SHA-256 of the vectors of testdata/v1.ket as they were
// written; a reader that gives others is wrong.
var goldenDigests = []string{
	"d3c24158c4c3fb7e9ba9d6e28e50a55a383fa19f56f003cf9f277d1d17e28253",
	"a62f16ee3d1505364f0fc5f25855da56910d4bd1cfe99af16725c2b2b2744843",
	"ed7c5ff0ab67ec565d207f7f99a3e18208f3030c36ab2999a08acd0ba3d148d7",
	"bd7c314c133a3fdb379b7de681fdca1b3cab955fdcdae3418e0d89dbea65478f",
	"cdf795ed1bd589b6e74d4be5ceb55201901db3dbb95c1ac64d078c9cdf176f71",
}

// A file of format version 1 stays readable: basis, operator and amplitudes still
// mean what they meant, so that residuals computed anew are those of eigenvectors.
func TestGolden(t *testing.T) {
	if *writeGolden {
		makeGolden(t)
	}
	f := opened(t, goldenPath)
	if err := f.Verify(t.Context()); err != nil {
		t.Fatal(err)
	}
	if f.Program() != "Ketloom 0.1.0" || f.Created() != "2026-03-01T12:00:00Z" || f.Note("purpose") != "a file of format version 1 — ψ" {
		t.Errorf("%s, %s, %s", f.Program(), f.Created(), f.Note("purpose"))
	}
	if f.Sectors() != 3 {
		t.Fatalf("%d sectors", f.Sectors())
	}
	var digests []string
	for i := range f.Sectors() {
		s, err := f.Sector(i)
		if err != nil {
			t.Fatal(err)
		}
		for j := range s.Len() {
			digests = append(digests, s.Digest(j))
		}
		checkGoldenSector(t, s, i < 2)
	}
	if !slices.Equal(digests, goldenDigests) {
		t.Errorf("digests %q", digests)
	}
	// E = -3.651093408937 for the Heisenberg ring of eight spins: from memory.
	first, _ := f.Sector(0)
	if e := first.Level(0).Energy; math.Abs(e+3.651093408937) > 1e-9 {
		t.Errorf("the ground state of the ring has the energy %.12f", e)
	}
	codings := map[uint32]bool{}
	for _, k := range f.chunks {
		codings[k.coding] = true
	}
	if !codings[codingWords] || !codings[codingPlanes] {
		t.Errorf("the file does not hold both codings: %v", codings)
	}
}

func checkGoldenSector(t *testing.T, s *Stored, eigen bool) {
	t.Helper()
	b, err := s.Basis(t.Context(), nil)
	if err != nil {
		t.Fatal(err)
	}
	h, err := s.Operator()
	if err != nil {
		t.Fatal(err)
	}
	for j := range s.Len() {
		if err := s.CheckWitnesses(b, j); err != nil {
			t.Error(err)
		}
		v, err := s.Vector(j)
		if err != nil {
			t.Fatal(err)
		}
		if r := residual(t, h, b, v, s.Level(j).Energy); (r < 1e-10) != eigen {
			t.Errorf("residual %v of vector %d", r, j)
		}
	}
}

func residual(t *testing.T, h operator.Operator, b *basis.Basis, v lanczos.Vector, energy float64) float64 {
	t.Helper()
	m, err := matrix.New(t.Context(), h, b, nil)
	if err != nil {
		t.Fatal(err)
	}
	psi := v.AsComplex()
	image := make([]complex128, len(psi))
	m.ApplyComplex(image, psi)
	off := 0.0
	for i := range psi {
		off += math.Pow(cmplx.Abs(image[i]-complex(energy, 0)*psi[i]), 2)
	}
	return math.Sqrt(off)
}

func makeGolden(t *testing.T) {
	t.Helper()
	w, err := Create(goldenPath)
	if err != nil {
		t.Fatal(err)
	}
	defer w.Discard()
	if err := w.SetCreated(epoch); err != nil {
		t.Fatal(err)
	}
	w.Note("purpose", "a file of format version 1 — ψ")
	spins := ring(t, 8, basis.SpinHalf(), 0, func(s *basis.Space) basis.ChargeValue { return s.TwiceSz().Is(0) })
	fermions := ring(t, 9, basis.Fermion(), 1, func(s *basis.Space) basis.ChargeValue { return s.ParticleNumber().Is(4) })
	free := product(t, 10)
	random := invented(free, 2, false, rand.New(rand.NewPCG(91, 92)))
	for i := range random.Vectors[1].Real {
		random.Vectors[1].Real[i] = float64(i%5) / 64
	}
	for _, s := range []Sector{
		{Basis: spins, Operator: heisenberg(spins.Space()), Result: lowest(t, heisenberg(spins.Space()), spins, 2), Notes: map[string]string{"momentum": "0"}},
		{Basis: fermions, Operator: hopping(fermions.Space()), Result: lowest(t, hopping(fermions.Space()), fermions, 1), Notes: map[string]string{"momentum": "2π/9"}},
		{Basis: free, Operator: heisenberg(free.Space()), Result: random},
	} {
		if err := w.Add(s); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
}

func lowest(t *testing.T, h operator.Operator, b *basis.Basis, k int) *lanczos.Result {
	t.Helper()
	m, err := matrix.New(t.Context(), h, b, nil)
	if err != nil {
		t.Fatal(err)
	}
	result, err := lanczos.Lowest(t.Context(), m, k, nil)
	if err != nil {
		t.Fatal(err)
	}
	return result
}
