package lanczos

import (
	"fmt"
	"math"
	"time"
)

// checkpoint hands the state to the hook, if there is one and it is time, or now.
// Of a run that checks nothing is kept: it begins anew after a resumption.
func (s *search[T]) checkpoint(now bool) error {
	if s.Checkpoint == nil || !now && time.Since(s.saved) < s.CheckpointEvery {
		return nil
	}
	s.saved = time.Now()
	if err := s.Checkpoint(s.snapshot()); err != nil {
		return fmt.Errorf("lanczos: the checkpoint hook failed: %w", err)
	}
	return nil
}

func (s *search[T]) snapshot() *Checkpoint {
	m, at, size := s.matrix, beginning{s.spent, s.check, s.size}, s.matrix.size
	if s.before != nil {
		at, size = *s.before, 0
	}
	_, isComplex := any(s.f).(complexField)
	c := &Checkpoint{state: state{
		Format: checkpointFormat, Dim: s.dim, Levels: s.k, Krylov: s.Krylov, Complex: isComplex, Tolerance: s.Tolerance,
		MissChance: s.MissChance, Seed: s.Seed, Unchecked: s.Unchecked, Products: at.spent.products, Restarts: at.spent.restarts,
		Starts: at.spent.starts, Norm: at.size, Size: size, Kept: min(m.kept, size), Judged: min(s.judged, size),
		Alpha: m.alpha[:size], Beta: m.beta[:size], Arrow: m.arrow[:size], Check: at.check, Cut: s.cut,
	}}
	if size > 0 {
		for _, v := range s.basis[:size+1] {
			c.vectors = append(c.vectors, s.f.vector(v))
		}
	}
	for _, f := range s.found {
		c.vectors = append(c.vectors, s.f.vector(f.vector))
		c.state.Energies = append(c.state.Energies, f.energy)
		c.state.Residuals = append(c.state.Residuals, f.residual)
	}
	return c
}

// resume takes up the state of Options.Resume and goes on with the run that it is in.
func (s *search[T]) resume() error {
	c := s.Resume
	if err := s.fits(c); err != nil {
		return err
	}
	st, m := &c.state, s.matrix
	s.spent.products, s.spent.restarts, s.spent.starts = st.Products, st.Restarts, st.Starts
	s.size, s.check, s.cut, s.judged = st.Norm, st.Check, st.Cut, st.Judged
	vectors := c.vectors
	if st.Size > 0 {
		for i, v := range vectors[:st.Size+1] {
			copy(s.basis[i], s.f.read(v))
		}
		vectors = vectors[st.Size+1:]
	}
	for i, v := range vectors {
		s.found = append(s.found, found[T]{st.Energies[i], st.Residuals[i], append([]T(nil), s.f.read(v)...)})
	}
	s.arrange()
	copy(m.alpha, st.Alpha)
	copy(m.beta, st.Beta)
	copy(m.arrow, st.Arrow)
	m.size, m.kept = st.Size, st.Kept
	if err := s.sameOperator(); err != nil || st.Size == 0 {
		return err
	}
	s.resumed = true
	return s.collect()
}

// fits reports the first setting in which a checkpoint differs from the search.
func (s *search[T]) fits(c *Checkpoint) error {
	_, isComplex := any(s.f).(complexField)
	st := &c.state
	for _, x := range []struct {
		name       string
		have, want any
	}{
		{"dimension", st.Dim, s.dim}, {"complex", st.Complex, isComplex}, {"number of levels", st.Levels, s.k},
		{"Krylov", st.Krylov, s.Krylov}, {"Tolerance", st.Tolerance, s.Tolerance}, {"MissChance", st.MissChance, s.MissChance},
		{"Seed", st.Seed, s.Seed}, {"Unchecked", st.Unchecked, s.Unchecked},
	} {
		if x.have != x.want {
			return argument("Options.Resume is of a search with %s %v, this one has %v; resume with the same settings, or start anew", x.name, x.have, x.want)
		}
	}
	return nil
}

// sameOperator compares the energy of one vector with that of the checkpoint, at the
// cost of a product that is not counted.
func (s *search[T]) sameOperator() error {
	v, want := s.basis[0], s.matrix.alpha[0]
	switch {
	case s.matrix.size > 0:
	case len(s.found) > 0:
		v, want = s.found[0].vector, s.found[0].energy
	default:
		return nil
	}
	work := s.basis[len(s.basis)-1]
	if s.matrix.size == s.Krylov { // the last place is taken
		work = make([]T, s.dim)
	}
	s.f.apply(s.op, work, v)
	overlap := []T{s.f.number(0)}
	s.space.project(work, nil, nil, [][]T{v}, overlap)
	got, _ := s.f.parts(overlap[0])
	if !(math.Abs(got-want) <= 1e-8*s.size) {
		return argument("Options.Resume is of another operator: a vector has the energy %.12g, there it had %.12g; start anew", got, want)
	}
	return nil
}
