package archive

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"os/exec"
	"path/filepath"
	"testing"

	"ketloom/basis"
	"ketloom/lanczos"
)

// mixed is an archive of two sectors with both codings and several chunks.
func mixed(t testing.TB) (path string, vectors []lanczos.Vector) {
	t.Helper()
	r := rand.New(rand.NewPCG(71, 72))
	a := product(t, 11)
	first := invented(a, 2, false, r)
	for i := range first.Vectors[1].Real {
		first.Vectors[1].Real[i] = float64(i % 7)
	}
	b := ring(t, 9, basis.Fermion(), 2, nil)
	second := invented(b, 1, true, r)
	return write(t, Sector{Basis: a, Operator: heisenberg(a.Space()), Result: first}, Sector{Basis: b, Operator: hopping(b.Space()), Result: second}),
		append(first.Vectors, second.Vectors...)
}

func tool(t *testing.T, name string) string {
	t.Helper()
	path, err := exec.LookPath(name)
	if err != nil {
		t.Skipf("%s is not installed: nothing was compared with it", name)
	}
	return path
}

// The public zstd tool accepts a whole file and prints the contents of its
// chunks.
func TestZstdTool(t *testing.T) {
	zstd := tool(t, "zstd")
	path, vectors := mixed(t)
	if out, err := exec.Command(zstd, "-t", "--no-progress", path).CombinedOutput(); err != nil {
		t.Errorf("zstd -t: %v\n%s", err, out)
	}
	cmd := exec.Command(zstd, "-dcq")
	cmd.Stdin = bytes.NewReader(mustRead(t, path))
	got, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	var want []byte
	f := opened(t, path)
	for i, v := range vectors {
		words, _ := wordsOf(v)
		if f.chunks[i].coding == codingPlanes {
			planes := make([]byte, len(words))
			toPlanes(planes, words)
			words = planes
		}
		want = append(want, words...)
	}
	if !bytes.Equal(got, want) {
		t.Errorf("zstd -dc prints %d bytes, %d were compressed, and they differ", len(got), len(want))
	}
}

func wordsOf(v lanczos.Vector) ([]byte, bool) {
	if v.Complex != nil {
		words := make([]byte, 16*len(v.Complex))
		_, _, ok := putComplexWords(words, v.Complex)
		return words, ok
	}
	words := make([]byte, 8*len(v.Real))
	_, _, ok := putWords(words, v.Real)
	return words, ok
}

// A reader in another language, written from the package comment, finds the same
// bits.
func TestPythonReader(t *testing.T) {
	python := tool(t, "python3")
	tool(t, "zstd")
	path, vectors := mixed(t)
	out, err := exec.Command(python, filepath.Join("testdata", "read.py"), path).CombinedOutput()
	if err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	var want bytes.Buffer
	f := opened(t, path)
	fmt.Fprintln(&want, "created 2026-03-01T12:00:00Z")
	number := 0
	for i := range f.Sectors() {
		s, _ := f.Sector(i)
		fmt.Fprintln(&want, "sector", i, "dimension", s.Dimension(), "seed", s.Solver().Seed)
		for j := range s.Len() {
			fmt.Fprintln(&want, "vector", number)
			v := vectors[number]
			for k := range v.Len() {
				fmt.Fprintf(&want, "%016x\n", math.Float64bits(real(v.At(k))))
				if v.Complex != nil {
					fmt.Fprintf(&want, "%016x\n", math.Float64bits(imag(v.At(k))))
				}
			}
			_ = j
			number++
		}
	}
	fmt.Fprintln(&want, "end", number)
	if got := withoutEnergies(out); !bytes.Equal(got, want.Bytes()) {
		t.Errorf("the other reader prints %d bytes, expected %d", len(got), want.Len())
	}
}

// withoutEnergies cuts "vector N ENERGY" to "vector N": Python prints floats in
// its own way.
func withoutEnergies(out []byte) []byte {
	var cut bytes.Buffer
	for line := range bytes.Lines(out) {
		if fields := bytes.Fields(line); len(fields) == 3 && string(fields[0]) == "vector" {
			fmt.Fprintf(&cut, "vector %s\n", fields[1])
			continue
		}
		cut.Write(line)
	}
	return cut.Bytes()
}
