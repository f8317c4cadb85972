package archive

import (
	"bytes"
	"math/rand/v2"
	"os"
	"path/filepath"
	"testing"
	"time"

	"ketloom/lanczos"
)

// Benchmarks write and read a vector of 2^23 random amplitudes, 64 MiB. The limit
// is a copy of the same bytes in memory; times-limit says how many copies one
// pass costs.
const benchmarkSpins = 23

func benchmarkSector(b *testing.B) Sector {
	b.Helper()
	space := product(b, benchmarkSpins)
	return Sector{Basis: space, Operator: heisenberg(space.Space()), Result: invented(space, 1, false, rand.New(rand.NewPCG(81, 82)))}
}

// copying returns the time of one copy of the values, the best of ten.
func copying(v lanczos.Vector) time.Duration {
	dst := make([]float64, len(v.Real))
	best := time.Hour
	for range 10 {
		begin := time.Now()
		copy(dst, v.Real)
		best = min(best, time.Since(begin))
	}
	return best
}

func report(b *testing.B, s Sector, limit time.Duration) {
	b.Helper()
	b.SetBytes(int64(8 * s.Basis.Len()))
	b.ReportMetric(b.Elapsed().Seconds()/float64(b.N)/limit.Seconds(), "times-limit")
}

// Writing to a folder, the wait for the disk left out.
func BenchmarkWrite(b *testing.B) {
	s := benchmarkSector(b)
	limit := copying(s.Result.Vectors[0])
	folder := b.TempDir()
	for b.Loop() {
		w, err := Create(filepath.Join(folder, "a.ket"))
		if err != nil {
			b.Fatal(err)
		}
		if err := w.Add(s); err != nil {
			b.Fatal(err)
		}
		w.Discard()
	}
	report(b, s, limit)
}

// Reading from memory, every checksum and the SHA-256 checked.
func BenchmarkRead(b *testing.B) {
	s := benchmarkSector(b)
	limit := copying(s.Result.Vectors[0])
	data, err := os.ReadFile(write(b, s))
	if err != nil {
		b.Fatal(err)
	}
	f, err := Read(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		b.Fatal(err)
	}
	defer f.Close()
	stored, err := f.Sector(0)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := stored.Vector(0); err != nil {
			b.Fatal(err)
		}
	}
	report(b, s, limit)
	b.ReportMetric(float64(8*s.Basis.Len())/float64(len(data)), "times-shorter")
}

// A thousand amplitudes out of 2^23.
func BenchmarkPart(b *testing.B) {
	s := benchmarkSector(b)
	limit := copying(s.Result.Vectors[0])
	f := opened(b, write(b, s))
	stored, err := f.Sector(0)
	if err != nil {
		b.Fatal(err)
	}
	at := 0
	for b.Loop() {
		if _, err := stored.Part(0, at, 1000); err != nil {
			b.Fatal(err)
		}
		at = (at + 1234567) % (s.Basis.Len() - 1000)
	}
	b.ReportMetric(b.Elapsed().Seconds()/float64(b.N)/limit.Seconds(), "times-limit")
}
