package lanczos

import "math"

// blockSize is the number of components in the blocks by which all sums are added,
// in ascending order of the blocks: the bits do not depend on the workers.
const blockSize = 2048

// space works on vectors of one dimension, block by block.
type space[T scalar] struct {
	f      field[T]
	crew   *crew
	n      int
	blocks int

	// What the blocks of the current task do, and on what.
	stage   stage
	w       []T   // vector that is read or changed
	near    [][]T // subtracted from w first …
	nearC   []T   // … with these coefficients
	set     [][]T // vectors to project on, subtract or rotate
	setC    []T   // coefficients of set, or the rotation, row after row
	into    [][]T // where rotated vectors go
	factor  T
	stream  uint64
	parts   []T       // projections of each block
	squares []float64 // squares, or largest magnitudes, of each block
	scratch [][]T     // of each worker
}

type stage int

const (
	stageProject  stage = iota // w -= near·nearC; parts = set†w; squares = w†w
	stageSubtract              // w -= set·setC; squares = w†w
	stageLargest               // squares = largest magnitude of w
	stageSquare                // squares = |factor·w|²
	stageScale                 // w *= factor
	stageFill                  // w = normal deviates
	stageRotate                // into[c] = sum over r of set[r]·setC[r,c]
	stageResidual              // squares = |w - factor·set[0]|²
)

func newSpace[T scalar](f field[T], n, workers int) *space[T] {
	blocks := (n + blockSize - 1) / blockSize
	s := &space[T]{f: f, n: n, blocks: blocks, crew: newCrew(min(workers, max(1, blocks/2)))}
	s.squares = make([]float64, blocks)
	s.scratch = make([][]T, s.crew.workers)
	for i := range s.scratch {
		s.scratch[i] = make([]T, blockSize)
	}
	return s
}

func (s *space[T]) run(what stage) {
	s.stage = what
	s.crew.do(s.blocks, s)
}

func (s *space[T]) block(b, worker int) {
	from, to := b*blockSize, min((b+1)*blockSize, s.n)
	switch s.stage {
	case stageProject:
		w := s.w[from:to]
		for i, v := range s.near {
			s.f.add(-s.nearC[i], v[from:to], w)
		}
		parts := s.parts[b*len(s.set):]
		for i, v := range s.set {
			parts[i] = s.f.dot(v[from:to], w)
		}
		s.squares[b] = s.f.square(w)
	case stageSubtract:
		w := s.w[from:to]
		for i, v := range s.set {
			s.f.add(-s.setC[i], v[from:to], w)
		}
		s.squares[b] = s.f.square(w)
	case stageLargest:
		s.squares[b] = s.f.largest(s.w[from:to])
	case stageSquare:
		x := s.scratch[worker][:to-from]
		copy(x, s.w[from:to])
		s.f.scale(s.factor, x)
		s.squares[b] = s.f.square(x)
	case stageScale:
		s.f.scale(s.factor, s.w[from:to])
	case stageFill:
		s.f.fill(s.w[from:to], s.stream, from)
	case stageRotate:
		s.rotateBlock(from, to, worker)
	case stageResidual:
		x := s.scratch[worker][:to-from]
		copy(x, s.w[from:to])
		s.f.add(-s.factor, s.set[0][from:to], x)
		s.squares[b] = s.f.square(x)
	}
}

// rotateStep is the number of components that are rotated at once: those of all
// vectors then fit in the nearest cache.
const rotateStep = 512

// rotateBlock forms all new vectors in scratch before it writes, since into may be
// the beginning of set.
func (s *space[T]) rotateBlock(from, to, worker int) {
	count := len(s.into)
	for ; from < to; from += rotateStep {
		end := min(from+rotateStep, to)
		size := end - from
		scratch := s.scratch[worker][:count*size]
		clear(scratch)
		for c := range count {
			x := scratch[c*size : (c+1)*size]
			for r, v := range s.set {
				s.f.add(s.setC[r*count+c], v[from:end], x)
			}
		}
		for c, v := range s.into {
			copy(v[from:end], scratch[c*size:(c+1)*size])
		}
	}
}

// project subtracts near·nearC from w, writes set†w to dst and returns ‖w‖.
func (s *space[T]) project(w []T, near [][]T, nearC []T, set [][]T, dst []T) float64 {
	s.w, s.near, s.nearC, s.set = w, near, nearC, set
	if need := s.blocks * len(set); len(s.parts) < need {
		s.parts = make([]T, need)
	}
	s.run(stageProject)
	dst = dst[:len(set)]
	clear(dst)
	for b := range s.blocks {
		for i, x := range s.parts[b*len(set) : (b+1)*len(set)] {
			dst[i] += x
		}
	}
	return s.root()
}

// subtract subtracts set·setC from w and returns ‖w‖.
func (s *space[T]) subtract(w []T, set [][]T, setC []T) float64 {
	s.w, s.set, s.setC = w, set, setC
	s.run(stageSubtract)
	return s.root()
}

// root returns the norm of w, whose block sums are in squares. Where squares
// overflow or vanish the vector is scaled first.
func (s *space[T]) root() float64 {
	sum := s.total()
	if sum > 1e-280 && sum < 1e280 {
		return math.Sqrt(sum)
	}
	s.run(stageLargest)
	top := 0.0
	for _, x := range s.squares {
		top = max(top, x)
	}
	if top == 0 || top-top != 0 {
		return top
	}
	_, exponent := math.Frexp(top)
	exponent = max(exponent, -1000) // so that the factor is finite
	s.factor = s.f.number(math.Ldexp(1, -exponent))
	s.run(stageSquare)
	return math.Ldexp(math.Sqrt(s.total()), exponent)
}

func (s *space[T]) total() float64 {
	sum := 0.0
	for _, x := range s.squares {
		sum += x
	}
	return sum
}

// norm returns ‖w‖; NaN or an infinity in w gives NaN or an infinity.
func (s *space[T]) norm(w []T) float64 {
	return s.project(w, nil, nil, nil, nil)
}

func (s *space[T]) scaleBy(w []T, factor T) {
	s.w, s.factor = w, factor
	s.run(stageScale)
}

func (s *space[T]) fillRandom(w []T, stream uint64) {
	s.w, s.stream = w, stream
	s.run(stageFill)
}

// rotate sets into[c] to the sum over r of set[r]·u[r*len(into)+c]; into may be
// the first vectors of set.
func (s *space[T]) rotate(into, set [][]T, u []T) {
	if len(into) == 0 {
		return
	}
	s.set, s.into, s.setC = set, into, u
	if need := len(into) * rotateStep; len(s.scratch[0]) < need {
		for i := range s.scratch {
			s.scratch[i] = make([]T, need)
		}
	}
	s.run(stageRotate)
}

// residual returns ‖hv - energy·v‖.
func (s *space[T]) residual(hv, v []T, energy float64) float64 {
	s.w, s.set, s.factor = hv, append(s.set[:0:0], v), s.f.number(energy)
	s.run(stageResidual)
	sum := s.total()
	if sum > 1e-280 && sum < 1e280 || sum == 0 {
		return math.Sqrt(sum)
	}
	return s.extremeResidual(hv, v, energy)
}

// extremeResidual is residual for numbers whose squares leave the range of float64.
func (s *space[T]) extremeResidual(hv, v []T, energy float64) float64 {
	x := append([]T(nil), hv...)
	return s.subtract(x, [][]T{v}, []T{s.f.number(energy)})
}

// orthogonalise removes from w its components along set, as often as needed for
// orthogonality to rounding ("twice is enough": L. Giraud, J. Langou, M.
// Rozložník and J. van den Eshof, Numer. Math. 101, 87 (2005)), and returns ‖w‖.
func (s *space[T]) orthogonalise(w []T, set [][]T, work []T) float64 {
	before := math.Inf(1)
	for range 4 {
		s.project(w, nil, nil, set, work)
		norm := s.subtract(w, set, work)
		if norm > 0.5*before || norm == 0 || norm-norm != 0 {
			return norm
		}
		before = norm
	}
	return before
}
