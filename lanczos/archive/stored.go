package archive

import (
	"context"
	"encoding/json"
	"fmt"
	"maps"
	"slices"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/operator"
)

// Stored is a sector of an open archive. Its methods may be called from many
// goroutines until the file is closed.
type Stored struct {
	file *File
	form sectorForm
}

// Len returns the number of eigenpairs.
func (s *Stored) Len() int { return len(s.form.Vectors) }

// Dimension returns the number of states of the basis, which is the number of
// amplitudes of a vector.
func (s *Stored) Dimension() int { return int(s.form.Dimension) }

// Fingerprint returns the fingerprint of the basis; see [basis.Basis.Fingerprint].
func (s *Stored) Fingerprint() string { return s.form.Fingerprint }

// Conventions returns, in words, what amplitudes, configurations, momenta and
// signs mean.
func (s *Stored) Conventions() []string { return slices.Clone(s.form.Conventions) }

// Note returns a note of the sector, empty if there is none of the key.
func (s *Stored) Note(key string) string { return s.form.Notes[key] }

// NoteKeys returns the keys of the notes of the sector, sorted.
func (s *Stored) NoteKeys() []string { return slices.Sorted(maps.Keys(s.form.Notes)) }

// Solver returns the result of the solver as it was written, without vectors:
// levels, completeness, seed, tolerance, products.
func (s *Stored) Solver() *lanczos.Result {
	r, err := s.form.solver()
	if err != nil { // it was readable when the file was opened
		panic("archive: a result that was readable is not")
	}
	return r
}

// vector returns the description of vector j.
func (s *Stored) vector(j int) (vectorForm, error) {
	if j < 0 || j >= s.Len() {
		return vectorForm{}, fmt.Errorf("archive: vector %d; the sector has %d, counted from 0", j, s.Len())
	}
	return s.form.Vectors[j], nil
}

// Level returns energy, residual and bound of eigenpair j, 0 <= j < Len().
func (s *Stored) Level(j int) lanczos.Level { return s.form.Vectors[j].level() }

// Norm returns the Euclidean norm of vector j, 0 <= j < Len(), as it was when it
// was written.
func (s *Stored) Norm(j int) float64 { return s.form.Vectors[j].Norm }

// PhaseRule says in words how the phase of vector j, 0 <= j < Len(), is fixed.
func (s *Stored) PhaseRule(j int) string { return s.form.Vectors[j].Phase }

// Complex reports whether vector j, 0 <= j < Len(), is complex.
func (s *Stored) Complex(j int) bool { return s.form.Vectors[j].Complex }

// Digest returns the SHA-256 of the values of vector j, 0 <= j < Len(), as
// little-endian float64, real and imaginary parts in turn, in hexadecimal digits.
func (s *Stored) Digest(j int) string { return s.form.Vectors[j].Digest }

// Basis makes the basis of the sector anew. One that does not have the stored
// dimension, fingerprint, order of the group and numbering of states is refused.
// Cost: that of [basis.New], whose limits opts sets.
func (s *Stored) Basis(ctx context.Context, opts *basis.Options) (*basis.Basis, error) {
	b, err := basis.Decode(ctx, s.form.Basis, opts)
	if err != nil {
		return nil, fmt.Errorf("archive: making the basis: %w", err)
	}
	if int64(b.Len()) != s.form.Dimension || b.Fingerprint() != s.form.Fingerprint || b.GroupOrder() != s.form.GroupOrder {
		return nil, fmt.Errorf("archive: %w: the basis comes out as another one (%d states, the file says %d)", ErrDamaged, b.Len(), s.form.Dimension)
	}
	if statesDigest(b) != s.form.States {
		return nil, fmt.Errorf("archive: %w: the states of the basis come out in another order", ErrDamaged)
	}
	return b, nil
}

// Operator returns the operator of the sector, on a space of its own.
func (s *Stored) Operator() (operator.Operator, error) {
	var d struct {
		Sites json.RawMessage `json:"sites"`
	}
	if err := json.Unmarshal(s.form.Basis, &d); err != nil {
		return operator.Operator{}, fmt.Errorf("archive: %w: %w", ErrDamaged, err)
	}
	space, err := basis.DecodeSpace(d.Sites)
	if err != nil {
		return operator.Operator{}, fmt.Errorf("archive: making the space: %w", err)
	}
	for _, op := range s.file.body.Operators {
		if op.Digest == s.form.Operator {
			h, err := operator.Decode(space, op.Terms)
			if err != nil {
				return h, fmt.Errorf("archive: making the operator: %w", err)
			}
			return h, nil
		}
	}
	return operator.Operator{}, fmt.Errorf("archive: %w: the sector has no operator", ErrDamaged)
}

// Vector reads eigenvector j whole and checks its SHA-256; other vectors are not
// touched. Cost: its size, and a few chunks beside.
func (s *Stored) Vector(j int) (lanczos.Vector, error) {
	v, err := s.vector(j)
	if err != nil {
		return lanczos.Vector{}, err
	}
	out, err := s.file.readVector(v)
	if err != nil {
		return lanczos.Vector{}, fmt.Errorf("archive: vector %d: %w", j, err)
	}
	return out, nil
}

// Part reads the amplitudes first … first+count-1 of vector j from the chunks
// that hold them and no others. Checksums of chunks are checked, the SHA-256 of
// the vector cannot be. Cost: the chunks, 1 MiB each.
func (s *Stored) Part(j, first, count int) (lanczos.Vector, error) {
	v, err := s.vector(j)
	if err != nil {
		return lanczos.Vector{}, err
	}
	if first < 0 || count < 1 || int64(first) > s.form.Dimension-int64(count) {
		return lanczos.Vector{}, fmt.Errorf("archive: %d amplitudes from %d on; the vector has %d, counted from 0", count, first, s.form.Dimension)
	}
	out, err := s.file.readPart(v, first, count)
	if err != nil {
		return lanczos.Vector{}, fmt.Errorf("archive: vector %d: %w", j, err)
	}
	return out, nil
}
