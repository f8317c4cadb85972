package archive_test

import (
	"bytes"
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/lanczos"
	"ketloom/lanczos/archive"
	"ketloom/operator"
)

var background = context.Background()

// ring returns a momentum sector of a ring and an operator that keeps it.
func ring(t testing.TB, site basis.Site, n, k int) (*basis.Basis, operator.Operator) {
	t.Helper()
	space, err := basis.Uniform(n, site)
	if err != nil {
		t.Fatal(err)
	}
	p := make(group.Permutation, n)
	o := operator.On(space)
	h := o.Zero()
	for i := range n {
		j := (i + 1) % n
		p[i] = j
		if site.Kind == basis.KindSpin {
			h = h.Plus(o.Dot(i, j))
		} else {
			h = h.Minus(o.Create(i).Times(o.Annihilate(j))).Minus(o.Create(j).Times(o.Annihilate(i)))
		}
	}
	b, err := basis.New(background, space, basis.Sector{
		Symmetries: []group.Eigenvalue{{Generator: group.Translate(p), Turn: group.NewTurn(int64(-k), int64(n))}},
	}, nil)
	if err != nil {
		t.Fatal(err)
	}
	return b, h
}

// invented returns a result with random vectors, real or complex.
func invented(r *rand.Rand, dim, count int, complexValued bool) *lanczos.Result {
	result := &lanczos.Result{Dim: dim, Seed: 5, Converged: count, Complete: true, Reason: "invented for a test"}
	for range count {
		v := lanczos.Vector{}
		for range dim {
			if complexValued {
				v.Complex = append(v.Complex, complex(r.NormFloat64(), r.NormFloat64()))
			} else {
				v.Real = append(v.Real, r.NormFloat64())
			}
		}
		result.Vectors = append(result.Vectors, v)
		result.Levels = append(result.Levels, lanczos.Level{Energy: r.NormFloat64(), Residual: 1e-12, Bound: 1e-14})
	}
	return result
}

// write makes an archive of two sectors and returns its path and what is in it.
func write(t testing.TB, folder string) (string, []archive.Sector) {
	t.Helper()
	r := rand.New(rand.NewPCG(1, 1))
	spins, h := ring(t, basis.SpinHalf(), 6, 1)
	fermions, f := ring(t, basis.Fermion(), 5, 0)
	sectors := []archive.Sector{
		{Basis: spins, Operator: h, Result: invented(r, spins.Len(), 2, true), Notes: map[string]string{"phase": "singlet"}},
		{Basis: fermions, Operator: f, Result: invented(r, fermions.Len(), 1, false)},
	}
	path := filepath.Join(folder, "states.ket")
	w, err := archive.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	w.Note("model", "rings")
	for _, s := range sectors {
		if err := w.Add(s); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return path, sectors
}

func same(a, b lanczos.Vector) bool {
	if a.Len() != b.Len() || (a.Real == nil) != (b.Real == nil) {
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

// readAll reads everything that a file holds, and checks nothing but errors.
func readAll(f *archive.File) ([]lanczos.Vector, error) {
	var all []lanczos.Vector
	for i := range f.Sectors() {
		s, err := f.Sector(i)
		if err != nil {
			return nil, err
		}
		if _, err := s.Basis(background, nil); err != nil {
			return nil, err
		}
		if _, err := s.Operator(); err != nil {
			return nil, err
		}
		for j := range s.Len() {
			v, err := s.Vector(j)
			if err != nil {
				return nil, err
			}
			all = append(all, v)
		}
	}
	return all, nil
}

func TestEverythingComesBack(t *testing.T) {
	path, want := write(t, t.TempDir())
	f, err := archive.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := f.Verify(background); err != nil {
		t.Fatal(err)
	}
	if f.Sectors() != len(want) || f.Note("model") != "rings" || f.Note("nothing") != "" || f.Created() == "" {
		t.Errorf("%d sectors, note %q, created %q", f.Sectors(), f.Note("model"), f.Created())
	}
	for i, w := range want {
		s, err := f.Sector(i)
		if err != nil {
			t.Fatal(err)
		}
		b, err := s.Basis(background, nil)
		if err != nil || b.Fingerprint() != w.Basis.Fingerprint() {
			t.Errorf("sector %d: basis %v (%v)", i, b, err)
		}
		h, err := s.Operator()
		if err != nil || !h.Equal(w.Operator) || h.String() != w.Operator.String() {
			t.Errorf("sector %d: operator %v (%v)", i, h, err)
		}
		if s.Note("phase") != w.Notes["phase"] || s.Solver().Reason != w.Result.Reason || s.Solver().Seed != 5 {
			t.Errorf("sector %d: note %q, solver %v", i, s.Note("phase"), s.Solver())
		}
		for j := range s.Len() {
			v, err := s.Vector(j)
			if err != nil || !same(v, w.Result.Vectors[j]) || s.Level(j) != w.Result.Levels[j] {
				t.Errorf("sector %d, vector %d differs (%v)", i, j, err)
			}
		}
		if _, err := s.Vector(s.Len()); err == nil {
			t.Errorf("sector %d: a vector beyond the last", i)
		}
	}
	if _, err := f.Sector(-1); err == nil {
		t.Error("sector -1")
	}
}

// Vectors of several chunks, and chunks that end within and at the end.
func TestLongVectors(t *testing.T) {
	space, _ := basis.Uniform(18, basis.SpinHalf())
	b, err := basis.New(background, space, basis.Sector{}, nil)
	if err != nil {
		t.Fatal(err)
	}
	r := rand.New(rand.NewPCG(2, 2))
	path := filepath.Join(t.TempDir(), "long.ket")
	w, err := archive.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	result := invented(r, b.Len(), 1, true) // 4 chunks, the last one full
	zeros := invented(r, b.Len(), 1, false)
	clear(zeros.Vectors[0].Real[1:])
	for _, res := range []*lanczos.Result{result, zeros} {
		if err := w.Add(archive.Sector{Basis: b, Operator: operator.On(space).Sz(0), Result: res}); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	f, err := archive.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := f.Verify(background); err != nil {
		t.Fatal(err)
	}
	var wg sync.WaitGroup
	for n := range 8 {
		wg.Go(func() {
			s, err := f.Sector(n % 2)
			if err != nil {
				t.Error(err)
				return
			}
			v, err := s.Vector(0)
			if err != nil || !same(v, []*lanczos.Result{result, zeros}[n%2].Vectors[0]) {
				t.Errorf("reading from goroutine %d: %v", n, err)
			}
		})
	}
	wg.Wait()
	f.SetBudget(1 << 20)
	s, _ := f.Sector(0)
	if _, err := s.Vector(0); err == nil || !strings.Contains(err.Error(), "budget") {
		t.Errorf("beyond the budget: %v", err)
	}
}

// Every bit of a small file, changed: the file is refused on opening or verifying.
func TestEveryBitCounts(t *testing.T) {
	path, _ := write(t, t.TempDir())
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	for at := range data {
		for bit := range 8 {
			data[at] ^= 1 << bit
			if f, err := archive.Read(bytes.NewReader(data), int64(len(data))); err == nil {
				if f.Verify(background) == nil {
					t.Errorf("bit %d of byte %d changed without notice", bit, at)
				}
				f.Close()
			} else if !errors.Is(err, archive.ErrDamaged) {
				t.Errorf("bit %d of byte %d: %v", bit, at, err)
			}
			data[at] ^= 1 << bit
		}
	}
}

func TestCutAndLengthenedFiles(t *testing.T) {
	path, _ := write(t, t.TempDir())
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	for n := range data {
		if f, err := archive.Read(bytes.NewReader(data[:n]), int64(n)); err == nil {
			f.Close()
			t.Fatalf("the first %d of %d bytes are accepted", n, len(data))
		} else if !errors.Is(err, archive.ErrDamaged) {
			t.Fatalf("the first %d bytes: %v", n, err)
		}
	}
	for _, more := range []string{"\x00", "garbage", string(data), string(data[len(data)-48:])} {
		long := append(append([]byte(nil), data...), more...)
		if f, err := archive.Read(bytes.NewReader(long), int64(len(long))); err == nil {
			f.Close()
			t.Errorf("%d bytes more are accepted", len(more))
		}
	}
}

func TestForeignFiles(t *testing.T) {
	folder := t.TempDir()
	for name, text := range map[string]string{"empty": "", "text": strings.Repeat("not an archive\n", 50), "zeros": strings.Repeat("\x00", 500)} {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		if _, err := archive.Open(path); !errors.Is(err, archive.ErrDamaged) || !strings.Contains(err.Error(), path) {
			t.Errorf("%s: %v", name, err)
		}
	}
	if _, err := archive.Open(folder); err == nil {
		t.Error("a folder was opened")
	}
	if _, err := archive.Open(filepath.Join(folder, "none")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("a file that is not there: %v", err)
	}
}

// What cannot be kept is refused, and no file is left behind.
func TestRefusedSectors(t *testing.T) {
	folder := t.TempDir()
	r := rand.New(rand.NewPCG(3, 3))
	b, h := ring(t, basis.SpinHalf(), 4, 0)
	other, _ := ring(t, basis.Fermion(), 4, 1)
	good := func() archive.Sector {
		return archive.Sector{Basis: b, Operator: h, Result: invented(r, b.Len(), 2, false)}
	}
	for says, change := range map[string]func(*archive.Sector){
		"needs a basis":        func(s *archive.Sector) { s.Basis = nil },
		"different spaces":     func(s *archive.Sector) { s.Basis = other },
		"the operator":         func(s *archive.Sector) { s.Operator = h.Plus(operator.On(b.Space()).Sz(77)) },
		"with 1 vectors":       func(s *archive.Sector) { s.Result.Vectors = s.Result.Vectors[:1] },
		"0 levels":             func(s *archive.Sector) { s.Result = &lanczos.Result{} },
		"the basis has":        func(s *archive.Sector) { s.Result.Vectors[1].Real = s.Result.Vectors[1].Real[:2] },
		"amplitude 1":          func(s *archive.Sector) { s.Result.Vectors[1].Real[1] = math.NaN() },
		"that are not finite:": func(s *archive.Sector) { s.Result.Levels[0].Energy = math.Inf(1) },
	} {
		w, err := archive.Create(filepath.Join(folder, "refused.ket"))
		if err != nil {
			t.Fatal(err)
		}
		s := good()
		change(&s)
		if err := w.Add(s); err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("error %v, want one that says %q", err, says)
		}
		w.Discard()
		w.Discard()
		if err := w.Add(good()); err == nil {
			t.Error("added to a discarded archive")
		}
		if err := w.Close(); err == nil {
			t.Error("closed a discarded archive")
		}
	}
	if left, err := os.ReadDir(folder); err != nil || len(left) != 0 {
		t.Errorf("left behind: %v (%v)", left, err)
	}
	if _, err := archive.Create(filepath.Join(folder, "missing", "a.ket")); err == nil {
		t.Error("created in a folder that is not there")
	}
}

// Until Close the old file stands; a program that leaves can take its traces along.
func TestTheOldFileStaysUntilClose(t *testing.T) {
	folder := t.TempDir()
	path, want := write(t, folder)
	before, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	w, err := archive.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	if err := w.Add(want[1]); err != nil {
		t.Fatal(err)
	}
	if now, err := os.ReadFile(path); err != nil || !bytes.Equal(now, before) {
		t.Errorf("the old file changed before Close (%v)", err)
	}
	if files, _ := os.ReadDir(folder); len(files) != 2 {
		t.Errorf("%d files, want the old one and a temporary one", len(files))
	}
	archive.DiscardOpen()
	if files, _ := os.ReadDir(folder); len(files) != 1 {
		t.Errorf("%d files after DiscardOpen", len(files))
	}
	if err := w.Close(); err == nil {
		t.Error("an archive whose file was taken away was closed without complaint")
	}
	if now, err := os.ReadFile(path); err != nil || !bytes.Equal(now, before) {
		t.Errorf("the old file changed (%v)", err)
	}
	write(t, folder)
	if f, err := archive.Open(path); err != nil {
		t.Error(err)
	} else if f.Close(); f.Sectors() != 2 {
		t.Errorf("%d sectors after writing anew", f.Sectors())
	}
}

// One vector is read without the others: theirs may be damaged.
func TestOneVectorWithoutTheOthers(t *testing.T) {
	path, want := write(t, t.TempDir())
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	refused, intact := 0, 0
	for at := 60; at < len(data)/3; at += 7 {
		changed := append([]byte(nil), data...)
		changed[at] ^= 0xff
		f, err := archive.Read(bytes.NewReader(changed), int64(len(changed)))
		if err != nil {
			continue
		}
		for i, w := range want {
			s, err := f.Sector(i)
			if err != nil {
				t.Fatal(err)
			}
			for j := range s.Len() {
				v, err := s.Vector(j)
				switch {
				case err != nil:
					refused++
				case same(v, w.Result.Vectors[j]):
					intact++
				default:
					t.Errorf("byte %d changed: vector %d of sector %d reads as another one", at, j, i)
				}
			}
		}
		f.Close()
	}
	if refused == 0 || intact == 0 {
		t.Errorf("%d vectors refused, %d read; both must occur", refused, intact)
	}
}
