package archive

import (
	"encoding/binary"
	"fmt"
	"math"
	"math/bits"
	"runtime"

	"github.com/klauspost/compress/zstd"
)

// Codings of a chunk: what the zstd frame holds for n values.
const (
	// codingWords: the values one after the other, little-endian. Repeated
	// values, as of vectors stored without their symmetries, become short.
	codingWords = 0
	// codingPlanes: each value as an integer rotated left by one bit, so that the
	// sign is the lowest bit; then all lowest bytes, all second bytes, … all
	// highest bytes. The exponents stand together and become short.
	codingPlanes = 1
)

// plainRatio is how many times shorter the words must become for the planes not
// to be tried: where words repeat, planes lose.
const plainRatio = 1.6

// newEncoder returns the encoder of chunks: one frame each, with content size
// and checksum. The fastest level leaves random mantissas alone at once.
func newEncoder() (*zstd.Encoder, error) {
	return zstd.NewWriter(nil, zstd.WithEncoderLevel(zstd.SpeedFastest), zstd.WithEncoderConcurrency(runtime.GOMAXPROCS(0)),
		zstd.WithEncoderCRC(true), zstd.WithSingleSegment(true), zstd.WithAllLitEntropyCompression(false))
}

// pack compresses the words of a chunk in the coding that makes them shorter.
// scratch is as long as words.
func pack(encoder *zstd.Encoder, words, scratch, packed []byte) ([]byte, uint32) {
	packed = encoder.EncodeAll(words, packed[:0])
	if float64(len(packed))*plainRatio < float64(len(words)) {
		return packed, codingWords
	}
	toPlanes(scratch, words)
	length := len(packed)
	packed = encoder.EncodeAll(scratch, packed)
	if len(packed)-length < length {
		return packed[:copy(packed, packed[length:])], codingPlanes
	}
	return packed[:length], codingWords
}

// unpack decompresses a chunk of len(words)/8 values. The frame is checked to be
// one frame of that content before it is decoded; scratch is as long as words.
func unpack(decoder *zstd.Decoder, packed []byte, coding uint32, words, scratch []byte) error {
	if err := checkFrame(packed, len(words)); err != nil {
		return err
	}
	into := words
	if coding == codingPlanes {
		into = scratch
	}
	out, err := decoder.DecodeAll(packed, into[:0])
	if err != nil {
		return fmt.Errorf("%w: %w", ErrDamaged, err)
	}
	if len(out) != len(words) {
		return fmt.Errorf("%w: %d bytes come out of a zstd frame of %d", ErrDamaged, len(out), len(words))
	}
	if coding == codingPlanes {
		fromPlanes(words, scratch)
	}
	return nil
}

// toPlanes writes the words of src as planes.
func toPlanes(dst, src []byte) {
	n := len(src) / 8
	i := 0
	for ; i+8 <= n; i += 8 {
		w := src[8*i : 8*i+64]
		x0, x1, x2, x3, x4, x5, x6, x7 := transposed(
			bits.RotateLeft64(binary.LittleEndian.Uint64(w[0:]), 1), bits.RotateLeft64(binary.LittleEndian.Uint64(w[8:]), 1),
			bits.RotateLeft64(binary.LittleEndian.Uint64(w[16:]), 1), bits.RotateLeft64(binary.LittleEndian.Uint64(w[24:]), 1),
			bits.RotateLeft64(binary.LittleEndian.Uint64(w[32:]), 1), bits.RotateLeft64(binary.LittleEndian.Uint64(w[40:]), 1),
			bits.RotateLeft64(binary.LittleEndian.Uint64(w[48:]), 1), bits.RotateLeft64(binary.LittleEndian.Uint64(w[56:]), 1))
		binary.LittleEndian.PutUint64(dst[i:], x0)
		binary.LittleEndian.PutUint64(dst[n+i:], x1)
		binary.LittleEndian.PutUint64(dst[2*n+i:], x2)
		binary.LittleEndian.PutUint64(dst[3*n+i:], x3)
		binary.LittleEndian.PutUint64(dst[4*n+i:], x4)
		binary.LittleEndian.PutUint64(dst[5*n+i:], x5)
		binary.LittleEndian.PutUint64(dst[6*n+i:], x6)
		binary.LittleEndian.PutUint64(dst[7*n+i:], x7)
	}
	for ; i < n; i++ {
		x := bits.RotateLeft64(binary.LittleEndian.Uint64(src[8*i:]), 1)
		for p := range 8 {
			dst[p*n+i] = byte(x >> (8 * p))
		}
	}
}

// fromPlanes is the inverse of toPlanes.
func fromPlanes(dst, src []byte) {
	n := len(src) / 8
	i := 0
	for ; i+8 <= n; i += 8 {
		x0, x1, x2, x3, x4, x5, x6, x7 := transposed(
			binary.LittleEndian.Uint64(src[i:]), binary.LittleEndian.Uint64(src[n+i:]),
			binary.LittleEndian.Uint64(src[2*n+i:]), binary.LittleEndian.Uint64(src[3*n+i:]),
			binary.LittleEndian.Uint64(src[4*n+i:]), binary.LittleEndian.Uint64(src[5*n+i:]),
			binary.LittleEndian.Uint64(src[6*n+i:]), binary.LittleEndian.Uint64(src[7*n+i:]))
		w := dst[8*i : 8*i+64]
		binary.LittleEndian.PutUint64(w[0:], bits.RotateLeft64(x0, -1))
		binary.LittleEndian.PutUint64(w[8:], bits.RotateLeft64(x1, -1))
		binary.LittleEndian.PutUint64(w[16:], bits.RotateLeft64(x2, -1))
		binary.LittleEndian.PutUint64(w[24:], bits.RotateLeft64(x3, -1))
		binary.LittleEndian.PutUint64(w[32:], bits.RotateLeft64(x4, -1))
		binary.LittleEndian.PutUint64(w[40:], bits.RotateLeft64(x5, -1))
		binary.LittleEndian.PutUint64(w[48:], bits.RotateLeft64(x6, -1))
		binary.LittleEndian.PutUint64(w[56:], bits.RotateLeft64(x7, -1))
	}
	for ; i < n; i++ {
		x := uint64(0)
		for p := range 8 {
			x |= uint64(src[p*n+i]) << (8 * p)
		}
		binary.LittleEndian.PutUint64(dst[8*i:], bits.RotateLeft64(x, -1))
	}
}

// transposed exchanges byte k of word j with byte j of word k, for eight words:
// blocks of four, two and one bytes in turn.
func transposed(a, b, c, d, e, f, g, h uint64) (uint64, uint64, uint64, uint64, uint64, uint64, uint64, uint64) {
	a, e = swapped(a, e, 32, 0x00000000FFFFFFFF)
	b, f = swapped(b, f, 32, 0x00000000FFFFFFFF)
	c, g = swapped(c, g, 32, 0x00000000FFFFFFFF)
	d, h = swapped(d, h, 32, 0x00000000FFFFFFFF)
	a, c = swapped(a, c, 16, 0x0000FFFF0000FFFF)
	b, d = swapped(b, d, 16, 0x0000FFFF0000FFFF)
	e, g = swapped(e, g, 16, 0x0000FFFF0000FFFF)
	f, h = swapped(f, h, 16, 0x0000FFFF0000FFFF)
	a, b = swapped(a, b, 8, 0x00FF00FF00FF00FF)
	c, d = swapped(c, d, 8, 0x00FF00FF00FF00FF)
	e, f = swapped(e, f, 8, 0x00FF00FF00FF00FF)
	g, h = swapped(g, h, 8, 0x00FF00FF00FF00FF)
	return a, b, c, d, e, f, g, h
}

// swapped exchanges the bits of low above the shift with those of high below it.
func swapped(low, high uint64, shift uint, mask uint64) (uint64, uint64) {
	t := (low>>shift ^ high) & mask
	return low ^ t<<shift, high ^ t
}

// putWords writes values as little-endian words. It returns the sum of their
// squares, added in four interleaved sums, and the largest modulus; false where
// one is not finite.
func putWords(dst []byte, values []float64) (squares, largest float64, finite bool) {
	var s0, s1, s2, s3 float64
	highest := uint64(0)
	for ; len(values) >= 4 && len(dst) >= 32; values, dst = values[4:], dst[32:] {
		x0, x1, x2, x3 := values[0], values[1], values[2], values[3]
		s0, s1, s2, s3 = s0+x0*x0, s1+x1*x1, s2+x2*x2, s3+x3*x3
		u0, u1, u2, u3 := math.Float64bits(x0), math.Float64bits(x1), math.Float64bits(x2), math.Float64bits(x3)
		highest = max(highest, u0&unsigned, u1&unsigned, u2&unsigned, u3&unsigned)
		binary.LittleEndian.PutUint64(dst, u0)
		binary.LittleEndian.PutUint64(dst[8:], u1)
		binary.LittleEndian.PutUint64(dst[16:], u2)
		binary.LittleEndian.PutUint64(dst[24:], u3)
	}
	for i, x := range values {
		u := math.Float64bits(x)
		s0 += x * x
		highest = max(highest, u&unsigned)
		binary.LittleEndian.PutUint64(dst[8*i:], u)
	}
	return s0 + s1 + s2 + s3, math.Float64frombits(highest), highest < infinity
}

// putComplexWords is putWords for real and imaginary parts in turn.
func putComplexWords(dst []byte, values []complex128) (squares, largest float64, finite bool) {
	var s0, s1, top float64
	highest := uint64(0)
	for _, z := range values {
		x, y := real(z), imag(z)
		s0, s1 = s0+x*x, s1+y*y
		if size := x*x + y*y; size > top {
			top = size
		}
		re, im := math.Float64bits(x), math.Float64bits(y)
		highest = max(highest, re&unsigned, im&unsigned)
		binary.LittleEndian.PutUint64(dst, re)
		binary.LittleEndian.PutUint64(dst[8:], im)
		dst = dst[16:]
	}
	return s0 + s1, math.Sqrt(top), highest < infinity
}

const (
	// unsigned masks the sign of a float64.
	unsigned = 1<<63 - 1
	// infinity is the smallest pattern without its sign that is not a finite number.
	infinity = 0x7FF0000000000000
)

// getWords is the inverse of putWords.
func getWords(dst []float64, words []byte) (finite bool) {
	highest := uint64(0)
	for ; len(dst) >= 4 && len(words) >= 32; dst, words = dst[4:], words[32:] {
		u0, u1 := binary.LittleEndian.Uint64(words), binary.LittleEndian.Uint64(words[8:])
		u2, u3 := binary.LittleEndian.Uint64(words[16:]), binary.LittleEndian.Uint64(words[24:])
		highest = max(highest, u0&unsigned, u1&unsigned, u2&unsigned, u3&unsigned)
		dst[0], dst[1] = math.Float64frombits(u0), math.Float64frombits(u1)
		dst[2], dst[3] = math.Float64frombits(u2), math.Float64frombits(u3)
	}
	for i := range dst {
		u := binary.LittleEndian.Uint64(words[8*i:])
		highest = max(highest, u&unsigned)
		dst[i] = math.Float64frombits(u)
	}
	return highest < infinity
}

// getComplexWords is the inverse of putComplexWords.
func getComplexWords(dst []complex128, words []byte) (finite bool) {
	highest := uint64(0)
	for i := range dst {
		w := words[:16]
		words = words[16:]
		re, im := binary.LittleEndian.Uint64(w), binary.LittleEndian.Uint64(w[8:])
		highest = max(highest, re&unsigned, im&unsigned)
		dst[i] = complex(math.Float64frombits(re), math.Float64frombits(im))
	}
	return highest < infinity
}

// finiteWords reports whether all values are finite.
func finiteWords(words []byte) bool {
	highest := uint64(0)
	for ; len(words) >= 8; words = words[8:] {
		highest = max(highest, binary.LittleEndian.Uint64(words)&unsigned)
	}
	return highest < infinity
}
