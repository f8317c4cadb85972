package archive

import (
	"bytes"
	"encoding/binary"
	"math"
	"math/bits"
	"math/rand/v2"
	"testing"

	"github.com/klauspost/compress/zstd"
)

// Planes by definition: byte p·n+i is byte p of value i, rotated left by one bit.
func TestPlanes(t *testing.T) {
	r := rand.New(rand.NewPCG(31, 32))
	for n := range 70 {
		words := make([]byte, 8*n)
		for i := range words {
			words[i] = byte(r.Uint32())
		}
		got, back := make([]byte, 8*n), make([]byte, 8*n)
		toPlanes(got, words)
		fromPlanes(back, got)
		if !bytes.Equal(back, words) {
			t.Fatalf("%d values do not come back", n)
		}
		for i := range n {
			x := bits.RotateLeft64(binary.LittleEndian.Uint64(words[8*i:]), 1)
			for p := range 8 {
				if got[p*n+i] != byte(x>>(8*p)) {
					t.Fatalf("%d values: byte %d of value %d", n, p, i)
				}
			}
		}
	}
}

func TestWords(t *testing.T) {
	for _, bad := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), math.Float64frombits(0xFFF8000000000001)} {
		for at := range 5 {
			values := []float64{1, -2, 3, math.MaxFloat64, -math.MaxFloat64}
			words := make([]byte, 8*len(values))
			if _, _, ok := putWords(words, values); !ok || !finiteWords(words) || !getWords(make([]float64, 5), words) {
				t.Fatal("finite values are refused")
			}
			values[at] = bad
			if _, _, ok := putWords(words, values); ok || finiteWords(words) || getWords(make([]float64, 5), words) {
				t.Errorf("%v at %d passes", bad, at)
			}
			z := []complex128{complex(values[0], values[1]), complex(values[2], values[3])}
			if _, _, ok := putComplexWords(words, z); ok != (at == 4) || getComplexWords(z, words[:32]) != (at == 4) {
				t.Errorf("complex: %v at %d", bad, at)
			}
		}
	}
	if squares, largest, _ := putWords(make([]byte, 48), []float64{3, -4, 0, -2, 1, -5}); squares != 55 || largest != 5 {
		t.Errorf("squares %v, largest %v", squares, largest)
	}
	if squares, largest, _ := putComplexWords(make([]byte, 32), []complex128{3 - 4i, 1i}); squares != 26 || largest != 5 {
		t.Errorf("squares %v, largest %v", squares, largest)
	}
}

// Frames of other kinds, with more behind them, or cut off are refused.
func TestCheckFrame(t *testing.T) {
	r := rand.New(rand.NewPCG(33, 34))
	for _, n := range []int{1, 31, 32, 100, 8191, 8192, 50000, chunkValues} {
		for _, random := range []bool{true, false} {
			words := make([]byte, 8*n)
			for i := range words {
				if random {
					words[i] = byte(r.Uint32())
				}
			}
			checkFramesOf(t, words)
		}
	}
}

func checkFramesOf(t *testing.T, words []byte) {
	t.Helper()
	encoder, err := newEncoder()
	if err != nil {
		t.Fatal(err)
	}
	frame := encoder.EncodeAll(words, nil)
	if err := checkFrame(frame, len(words)); err != nil {
		t.Fatalf("%d bytes: %v", len(words), err)
	}
	bad := map[string][]byte{
		"a skippable frame behind": append(bytes.Clone(frame), sealed([]byte("hidden"))...),
		"a second frame":           append(bytes.Clone(frame), frame...),
		"a byte more":              append(bytes.Clone(frame), 0),
		"a byte less":              frame[:len(frame)-1],
		"nothing":                  nil,
		"four bytes":               frame[:4],
		"a skippable frame":        sealed(words[:8]),
	}
	for name, options := range map[string][]zstd.EOption{
		"no checksum":       {zstd.WithEncoderCRC(false), zstd.WithSingleSegment(true)},
		"no single segment": {zstd.WithEncoderCRC(true), zstd.WithWindowSize(1 << 10)},
	} {
		e, err := zstd.NewWriter(nil, options...)
		if err != nil {
			t.Fatal(err)
		}
		var out bytes.Buffer
		e.Reset(&out)
		if name == "no checksum" {
			bad[name] = e.EncodeAll(words, nil)
			continue
		}
		for _, part := range [][]byte{words[:len(words)/2], words[len(words)/2:]} {
			if _, err := e.Write(part); err != nil {
				t.Fatal(err)
			}
			if err := e.Flush(); err != nil {
				t.Fatal(err)
			}
		}
		if err := e.Close(); err != nil {
			t.Fatal(err)
		}
		bad[name] = out.Bytes()
	}
	for name, data := range bad {
		if err := checkFrame(data, len(words)); err == nil {
			t.Errorf("%d bytes: a frame with %s passes", len(words), name)
		}
	}
	if err := checkFrame(frame, len(words)+8); err == nil {
		t.Errorf("%d bytes: another content size passes", len(words))
	}
}
