package archive

import (
	"bytes"
	"context"
	"fmt"
)

// Verify reads the whole file and accounts for every byte: the frames follow
// each other without gaps, every descriptor says what the index says, every
// checksum and every SHA-256 agrees, every amplitude is finite, every operator
// can be made. It returns nil or the first disagreement. Bases are not
// enumerated; see [Stored.Basis] and [Stored.CheckWitnesses].
//
// Memory: a few chunks, whatever the size of the vectors.
func (f *File) Verify(ctx context.Context) error {
	vectors := 0
	for i := range f.body.Sectors {
		s, err := f.Sector(i)
		if err != nil {
			return err
		}
		if _, err := s.Operator(); err != nil {
			return err
		}
		for j, v := range s.form.Vectors {
			err := f.verifyDescriptors(vectors, v)
			if err == nil {
				err = f.hashed(ctx, v, isFinite)
			}
			if err != nil {
				return fmt.Errorf("archive: sector %d, vector %d: %w", i, j, err)
			}
			vectors++
		}
	}
	return ctx.Err()
}

// verifyDescriptors compares the descriptors of a vector with the index. That
// descriptors and frames fill the file from the head to the index was checked
// when it was opened.
func (f *File) verifyDescriptors(vector int, v vectorForm) error {
	got := make([]byte, descriptorSize)
	for number := range v.Chunks {
		k := f.chunks[v.First+number]
		if err := readFull(f.source, got, k.offset-descriptorSize); err != nil {
			return err
		}
		if !bytes.Equal(got, k.descriptor(vector, number)) {
			return fmt.Errorf("%w: the descriptor of chunk %d differs from the index", ErrDamaged, v.First+number)
		}
	}
	return nil
}

// isFinite refuses values that are not finite.
func isFinite(p *piece) error {
	if !finiteWords(p.words) {
		return fmt.Errorf("%w: an amplitude is not finite", ErrDamaged)
	}
	return nil
}
