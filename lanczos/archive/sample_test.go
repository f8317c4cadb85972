package archive

import (
	"bytes"
	"context"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"os"
	"path/filepath"
	"testing"
	"time"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/lanczos"
	"ketloom/operator"
)

var epoch = time.Date(2026, 3, 1, 12, 0, 0, 0, time.UTC)

// ring returns n equal sites around a ring, in the sector of momentum 2π·m/n and
// the given charge.
func ring(t testing.TB, n int, site basis.Site, m int, charge func(*basis.Space) basis.ChargeValue) *basis.Basis {
	t.Helper()
	space, err := basis.Uniform(n, site)
	if err != nil {
		t.Fatal(err)
	}
	shift := make(group.Permutation, n)
	for i := range shift {
		shift[i] = (i + 1) % n
	}
	sector := basis.Sector{Symmetries: []group.Eigenvalue{{Generator: group.Translate(shift), Turn: group.NewTurn(int64(-m), int64(n))}}}
	if charge != nil {
		sector.Charges = []basis.ChargeValue{charge(space)}
	}
	return made(t, space, sector)
}

func made(t testing.TB, space *basis.Space, sector basis.Sector) *basis.Basis {
	t.Helper()
	b, err := basis.New(context.Background(), space, sector, nil)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// product returns a basis of product states of spins 1/2 with a dimension of 2^n.
func product(t testing.TB, n int) *basis.Basis {
	t.Helper()
	space, err := basis.Uniform(n, basis.SpinHalf())
	if err != nil {
		t.Fatal(err)
	}
	return made(t, space, basis.Sector{})
}

// heisenberg returns Σ S_i·S_{i+1} around the ring.
func heisenberg(space *basis.Space) operator.Operator {
	o := operator.On(space)
	h := o.Zero()
	for i := range space.Sites() {
		h = h.Plus(o.Dot(i, (i+1)%space.Sites()))
	}
	return h
}

// hopping returns -Σ (c†_i c_{i+1} + h.c.) + 2 Σ n_i n_{i+1} around the ring.
func hopping(space *basis.Space) operator.Operator {
	o := operator.On(space)
	h := o.Zero()
	for i := range space.Sites() {
		k := (i + 1) % space.Sites()
		bond := o.Create(i).Times(o.Annihilate(k))
		h = h.Minus(bond).Minus(bond.Adjoint()).Plus(o.Number(i).Times(o.Number(k)).Scale(2))
	}
	return h
}

// invented returns a result of k random normalised vectors. Their levels are
// numbers without meaning.
func invented(b *basis.Basis, k int, complexValued bool, r *rand.Rand) *lanczos.Result {
	res := &lanczos.Result{Dim: b.Len(), Converged: k, Seed: math.MaxUint64 - 5, Tolerance: 1e-12, Reason: "invented"}
	for range k {
		res.Levels = append(res.Levels, lanczos.Level{Energy: r.NormFloat64(), Residual: 1e-13 * r.Float64(), Bound: 1e-12 * r.Float64()})
		res.Vectors = append(res.Vectors, randomVector(b.Len(), complexValued, r))
	}
	return res
}

func randomVector(n int, complexValued bool, r *rand.Rand) lanczos.Vector {
	if complexValued {
		v := make([]complex128, n)
		for i := range v {
			v[i] = complex(r.NormFloat64(), r.NormFloat64()) / complex(math.Sqrt(2*float64(n)), 0)
		}
		return lanczos.Vector{Complex: v}
	}
	v := make([]float64, n)
	for i := range v {
		v[i] = r.NormFloat64() / math.Sqrt(float64(n))
	}
	return lanczos.Vector{Real: v}
}

// write makes an archive of sectors in a temporary folder.
func write(t testing.TB, sectors ...Sector) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "a.ket")
	w, err := Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer w.Discard()
	if err := w.SetCreated(epoch); err != nil {
		t.Fatal(err)
	}
	w.Note("purpose", "a test")
	for _, s := range sectors {
		if err := w.Add(s); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return path
}

func opened(t testing.TB, path string) *File {
	t.Helper()
	f, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { f.Close() })
	return f
}

// small returns the bytes of an archive with a real and a complex sector.
func small(t testing.TB) []byte {
	t.Helper()
	r := rand.New(rand.NewPCG(1, 2))
	a := ring(t, 6, basis.SpinHalf(), 0, nil)
	b := ring(t, 5, basis.Fermion(), 1, nil)
	path := write(t,
		Sector{Basis: a, Operator: heisenberg(a.Space()), Result: invented(a, 2, false, r), Notes: map[string]string{"k": "0"}},
		Sector{Basis: b, Operator: hopping(b.Space()), Result: invented(b, 1, true, r)})
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// readAll opens, verifies and reads everything that the bytes hold.
func readAll(data []byte) error {
	f, err := Read(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		return err
	}
	defer f.Close()
	f.SetBudget(1 << 24)
	if err := f.Verify(context.Background()); err != nil {
		return err
	}
	for i := range f.Sectors() {
		s, err := f.Sector(i)
		if err != nil {
			return err
		}
		for j := range s.Len() {
			if _, err := s.Vector(j); err != nil {
				return err
			}
		}
	}
	return nil
}

// sameBits reports whether two vectors have the same bits.
func sameBits(a, b lanczos.Vector) bool {
	if (a.Complex != nil) != (b.Complex != nil) || a.Len() != b.Len() {
		return false
	}
	for i := range a.Len() {
		x, y := a.At(i), b.At(i)
		if math.Float64bits(real(x)) != math.Float64bits(real(y)) || math.Float64bits(imag(x)) != math.Float64bits(imag(y)) {
			return false
		}
	}
	return true
}

func norm(v lanczos.Vector) float64 {
	s := 0.0
	for i := range v.Len() {
		s += math.Pow(cmplx.Abs(v.At(i)), 2)
	}
	return math.Sqrt(s)
}
