package archive

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"fmt"

	"ketloom/lanczos"
)

// trustedChunks is the number of chunks that a vector may have for its memory to
// be allocated before any of it is read: 64 MiB.
const trustedChunks = 64

// readVector reads a vector whole.
func (f *File) readVector(v vectorForm) (lanczos.Vector, error) {
	if err := f.affordable(v.Values); err != nil {
		return lanczos.Vector{}, err
	}
	if v.Chunks > trustedChunks { // the first one intact is reason to believe the size
		if err := f.unpackPiece(new(piece), v.First); err != nil {
			return lanczos.Vector{}, err
		}
	}
	out := allocate(v.Complex, v.Values)
	err := f.hashed(context.Background(), v, func(p *piece) error {
		return fill(partOf(out, p.number), p.words)
	})
	return out, err
}

// affordable compares a number of values with the budget.
func (f *File) affordable(values int64) error {
	if values*8 <= f.budget {
		return nil
	}
	return fmt.Errorf("%d MiB are more than the budget of %d MiB; raise it with SetBudget", values>>17, f.budget>>20)
}

// hashed unpacks all chunks of a vector, lets use see each on any goroutine, and
// checks the SHA-256 of the values.
func (f *File) hashed(ctx context.Context, v vectorForm, use func(p *piece) error) error {
	hash := sha256.New()
	err := inOrder(v.Chunks, func(p *piece) error {
		if err := f.unpackPiece(p, v.First+p.number); err != nil {
			return err
		}
		return use(p)
	}, func(p *piece) error {
		hash.Write(p.words)
		return ctx.Err()
	})
	if err != nil {
		return err
	}
	if hex.EncodeToString(hash.Sum(nil)) != v.Digest {
		return fmt.Errorf("%w: the amplitudes are not those that were written", ErrDamaged)
	}
	return nil
}

// readPart reads some amplitudes of a vector.
func (f *File) readPart(v vectorForm, first, count int) (lanczos.Vector, error) {
	width := 1 // values of an amplitude
	if v.Complex {
		width = 2
	}
	if err := f.affordable(int64(count) * int64(width)); err != nil {
		return lanczos.Vector{}, err
	}
	a, b := first*width, (first+count)*width // the values wanted
	var out lanczos.Vector
	p := new(piece)
	for k := a / chunkValues; k <= (b-1)/chunkValues; k++ {
		if err := f.unpackPiece(p, v.First+k); err != nil {
			return out, err
		}
		if out.Len() == 0 {
			out = allocate(v.Complex, int64(b-a))
		}
		from, to := max(a, k*chunkValues), min(b, (k+1)*chunkValues)
		words := p.words[8*(from-k*chunkValues) : 8*(to-k*chunkValues)]
		if err := fill(slice(out, (from-a)/width, (to-a)/width), words); err != nil {
			return out, err
		}
	}
	return out, nil
}

// allocate makes room for a number of values.
func allocate(complexValued bool, values int64) lanczos.Vector {
	if complexValued {
		return lanczos.Vector{Complex: make([]complex128, values/2)}
	}
	return lanczos.Vector{Real: make([]float64, values)}
}

func slice(v lanczos.Vector, from, to int) lanczos.Vector {
	if v.Complex != nil {
		return lanczos.Vector{Complex: v.Complex[from:to]}
	}
	return lanczos.Vector{Real: v.Real[from:to]}
}

// fill decodes words into a part of a vector.
func fill(part lanczos.Vector, words []byte) error {
	ok := false
	if part.Complex != nil {
		ok = getComplexWords(part.Complex, words)
	} else {
		ok = getWords(part.Real, words)
	}
	if !ok {
		return fmt.Errorf("%w: an amplitude is not finite", ErrDamaged)
	}
	return nil
}

// unpackPiece reads, checks and unpacks chunk i of the file.
func (f *File) unpackPiece(p *piece, i int) error {
	k := f.chunks[i]
	p.resize(int(k.values))
	p.packed = sized(p.packed, int(k.length))
	if err := readFull(f.source, p.packed, k.offset); err != nil {
		return fmt.Errorf("chunk %d: %w", i, err)
	}
	if sum(p.packed) != k.crc {
		return fmt.Errorf("%w: the checksum of chunk %d does not agree", ErrDamaged, i)
	}
	if err := unpack(f.decoder, p.packed, k.coding, p.words, p.scratch); err != nil {
		return fmt.Errorf("chunk %d: %w", i, err)
	}
	return nil
}
