package archive

import (
	"encoding/binary"
	"fmt"
	"math/cmplx"
	"slices"

	"ketloom/basis"
	"ketloom/lanczos"
)

// witness is the amplitude of a product state, written out site by site. A
// reader that has its conventions wrong (signs of fermions, sign of a momentum,
// order of sites, choice of representatives) does not find it.
type witness struct {
	Levels []int   `json:"levels"`
	Re     float64 `json:"re"`
	Im     float64 `json:"im"`
}

const (
	mostWitnesses = 8
	// witnessWindow is the number of states among which each witness is the largest.
	witnessWindow = 4096
	// witnessTolerance bounds what the order of rounding can change, relative to the
	// norm of the vector.
	witnessTolerance = 1e-12
	// mostSampled is the number of states whose configurations are kept as a SHA-256.
	mostSampled = 65536
)

// witnessesOf chooses the state of largest modulus in each of up to eight
// windows that are spread over the vector, and of each the largest configuration
// of its orbit.
func witnessesOf(b *basis.Basis, v lanczos.Vector) []witness {
	n := v.Len()
	count := min(mostWitnesses, n)
	list := make([]witness, 0, count)
	for w := range count {
		first, end := w*n/count, (w+1)*n/count
		at, top := first, 0.0
		for i := first; i < min(end, first+witnessWindow); i++ {
			if size := cmplx.Abs(v.At(i)); size > top {
				at, top = i, size
			}
		}
		c := largestMember(b, at)
		z := c.Factor * v.At(at)
		list = append(list, witness{b.Space().Levels(c.Configuration), real(z), imag(z)})
	}
	return list
}

func largestMember(b *basis.Basis, i int) basis.Component {
	return slices.MaxFunc(b.Orbit(i, nil), func(p, q basis.Component) int {
		switch {
		case p.Configuration < q.Configuration:
			return -1
		case p.Configuration > q.Configuration:
			return 1
		}
		return 0
	})
}

// CheckWitnesses compares the amplitudes of up to eight product states, written
// out site by site when the file was made, with what vector j gives for them in
// the basis b (see [Stored.Basis]). It fails where basis or vector do not mean
// what they meant then. Cost: a chunk for each.
func (s *Stored) CheckWitnesses(b *basis.Basis, j int) error {
	v, err := s.vector(j)
	if err != nil {
		return err
	}
	if b == nil || b.Fingerprint() != s.form.Fingerprint {
		return fmt.Errorf("archive: the basis is not that of the sector; take the one that Basis returns")
	}
	if len(v.Witnesses) == 0 {
		return fmt.Errorf("archive: %w: vector %d has no witnesses", ErrDamaged, j)
	}
	for _, w := range v.Witnesses {
		c, err := b.Space().Configuration(w.Levels)
		if err != nil {
			return fmt.Errorf("archive: %w: a witness of vector %d: %w", ErrDamaged, j, err)
		}
		i, factor, ok := b.Component(c)
		if !ok {
			return fmt.Errorf("archive: %w: the witness %s of vector %d is in no state of the basis", ErrDamaged, b.Space().Format(c), j)
		}
		part, err := s.Part(j, i, 1)
		if err != nil {
			return err
		}
		got, want := factor*part.At(0), complex(w.Re, w.Im)
		if cmplx.Abs(got-want) > witnessTolerance*v.Norm {
			return fmt.Errorf("archive: %w: vector %d has the amplitude %v on %s, it had %v when it was written", ErrDamaged, j, got, b.Space().Format(c), want)
		}
	}
	return nil
}

// statesDigest returns the SHA-256 of the configurations of the states
// floor(k·D/n), k = 0 … n-1, as little-endian u64, n = min(D, 65536): a change of
// the numbering does not pass.
func statesDigest(b *basis.Basis) string {
	n := min(b.Len(), mostSampled)
	words := make([]byte, 0, 8*n)
	for k := range n {
		words = binary.LittleEndian.AppendUint64(words, uint64(b.At(int(int64(k)*int64(b.Len())/int64(n)))))
	}
	return digestOf(words)
}
