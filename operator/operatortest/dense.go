package operatortest

import (
	"math"

	"ketloom/basis"
	"ketloom/operator"
)

// monomial is a matrix with at most one entry a column: column j has the value
// value[j] in row row[j].
type monomial struct {
	row   []int
	value []complex128
}

// kron returns a⊗b, in which the index of b runs fastest.
func kron(a, b monomial) monomial {
	n := len(b.row)
	out := monomial{make([]int, len(a.row)*n), make([]complex128, len(a.row)*n)}
	for i := range a.row {
		for j := range b.row {
			out.row[i*n+j] = a.row[i]*n + b.row[j]
			out.value[i*n+j] = a.value[i] * b.value[j]
		}
	}
	return out
}

// times returns the product ab.
func times(a, b monomial) monomial {
	out := monomial{make([]int, len(b.row)), make([]complex128, len(b.row))}
	for j := range b.row {
		out.row[j] = a.row[b.row[j]]
		out.value[j] = a.value[b.row[j]] * b.value[j]
	}
	return out
}

func unit(n int) monomial {
	out := monomial{make([]int, n), make([]complex128, n)}
	for j := range n {
		out.row[j], out.value[j] = j, 1
	}
	return out
}

// parity is diag(1, -1), the string of Jordan and Wigner on one mode.
func parity() monomial { return monomial{[]int{0, 1}, []complex128{1, -1}} }

// elementary returns the matrix of a factor on the levels of its own mode.
func elementary(space *basis.Space, f operator.Factor) monomial {
	mode := space.Mode(f.Mode)
	spin := space.Site(mode.Site).Kind == basis.KindSpin
	s := float64(mode.Levels-1) / 2
	out := unit(mode.Levels)
	for level := range mode.Levels {
		m := float64(level) - s
		out.value[level] = 0
		switch f.Symbol {
		case operator.Number:
			out.value[level] = complex(float64(level), 0)
		case operator.SpinZ:
			out.value[level] = complex(m, 0)
		case operator.Raise:
			if level+1 < mode.Levels {
				out.row[level] = level + 1
				out.value[level] = complex(math.Sqrt(float64(level+1)), 0)
				if spin {
					out.value[level] = complex(math.Sqrt(s*(s+1)-m*(m+1)), 0)
				}
			}
		case operator.Lower:
			if level > 0 {
				out.row[level] = level - 1
				out.value[level] = complex(math.Sqrt(float64(level)), 0)
				if spin {
					out.value[level] = complex(math.Sqrt(s*(s+1)-m*(m-1)), 0)
				}
			}
		case operator.Transfer:
			if level == f.From {
				out.row[level], out.value[level] = f.To, 1
			}
		}
	}
	return out
}

// factor returns the matrix of a factor on the whole space: a Kronecker product
// over the modes, mode 0 fastest, with strings on the fermion modes below a
// fermionic operator.
func factor(space *basis.Space, f operator.Factor) monomial {
	odd := space.Mode(f.Mode).Fermionic && f.Symbol != operator.Number
	out := unit(1)
	for m := space.Modes() - 1; m >= 0; m-- {
		mode := space.Mode(m)
		local := unit(mode.Levels)
		switch {
		case m == f.Mode:
			local = elementary(space, f)
		case m < f.Mode && odd && mode.Fermionic:
			local = parity()
		}
		out = kron(out, local)
	}
	return out
}

// Dense returns the matrix of op over all product states: element [i][j] leads
// from state j to state i, and states are in ascending order of their
// configurations (see [States]).
func Dense(op operator.Operator) [][]complex128 {
	space := op.Space()
	dim := len(States(space))
	out := make([][]complex128, dim)
	for i := range out {
		out[i] = make([]complex128, dim)
	}
	for i := range op.Len() {
		t := op.At(i)
		product := unit(dim)
		for _, f := range t.Factors {
			product = times(product, factor(space, f))
		}
		for j, row := range product.row {
			out[row][j] += t.Coefficient * product.value[j]
		}
	}
	return out
}

// States lists every product state of the space, ascending.
func States(space *basis.Space) []basis.Configuration {
	all := []basis.Configuration{0}
	for m := range space.Modes() {
		mode := space.Mode(m)
		longer := make([]basis.Configuration, 0, len(all)*mode.Levels)
		for level := range mode.Levels {
			for _, c := range all {
				longer = append(longer, c|basis.Configuration(level)<<mode.Shift)
			}
		}
		all = longer
	}
	return all
}
