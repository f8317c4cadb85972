package label

import (
	"context"
	"fmt"
	"math"
	"strings"

	"ketloom/basis"
	"ketloom/lanczos/dense"
	"ketloom/operator"
	"ketloom/operator/matrix"
)

// Spins are the total spins within a set of states.
type Spins struct {
	// Twice holds 2S of each member, ascending.
	Twice []int
	// Square holds the eigenvalues S(S+1) of S² in the set, ascending.
	Square []float64
	// Spread is the largest of ‖S²v - S(S+1)v‖ over the members, 0 for whole and
	// exact multiplets.
	Spread float64
}

// Text writes the spins, such as "S=0", "S=1/2" or "S=0,1".
func (s Spins) Text() string {
	var parts []string
	for i, twice := range s.Twice {
		if i > 0 && s.Twice[i-1] == twice {
			continue
		}
		if twice%2 == 0 {
			parts = append(parts, fmt.Sprint(twice/2))
		} else {
			parts = append(parts, fmt.Sprintf("%d/2", twice))
		}
	}
	return "S=" + strings.Join(parts, ",")
}

// TotalSpinSquared returns S² = Σ_ij S_i·S_j of the spin and electron sites of a space.
func TotalSpinSquared(space *basis.Space) operator.Operator {
	o := operator.On(space)
	raise, z := o.Zero(), o.Zero()
	for i := range space.Sites() {
		if kind := space.Site(i).Kind; kind == basis.KindSpin || kind == basis.KindElectron {
			raise, z = raise.Plus(o.Raise(i)), z.Plus(o.Sz(i))
		}
	}
	// S² = S⁻S⁺ + Sz(Sz + 1)
	return raise.Adjoint().Times(raise).Plus(z.Times(z)).Plus(z)
}

// Spin returns the total spins of the members of a set of orthonormal states over a
// basis, from the matrix of S² among them. Give all states of a degenerate set. opts
// steer the product with S²; its form defaults to the one on the fly.
//
// Errors: vectors of another length; a sector that S² does not keep; an eigenvalue
// that is no S(S+1) with 2S within 1e-3 of an integer, which happens when a multiplet is not
// whole or the vectors are no eigenvectors.
func Spin(ctx context.Context, b *basis.Basis, vectors [][]complex128, opts *matrix.Options) (Spins, error) {
	if err := check(b, vectors); err != nil {
		return Spins{}, err
	}
	o := matrix.Options{Form: matrix.OnTheFly}
	if opts != nil {
		o = *opts
	}
	m, err := matrix.New(ctx, TotalSpinSquared(b.Space()), b, &o)
	if err != nil {
		return Spins{}, fmt.Errorf("label: total spin: %w", err)
	}
	d := len(vectors)
	square := make([]complex128, d*d)
	images := make([][]complex128, d)
	for n, v := range vectors {
		images[n] = make([]complex128, b.Len())
		m.ApplyComplex(images[n], v)
		for k, u := range vectors {
			square[k*d+n] = overlap(u, images[n])
		}
	}
	s := Spins{Spread: spread(vectors, images, square)}
	hermitian(square, d)
	if s.Square, _, err = dense.EigenComplex(square, d, false); err != nil {
		return Spins{}, err
	}
	for _, x := range s.Square {
		twice := math.Sqrt(1+4*max(x, 0)) - 1
		if math.Abs(twice-math.Round(twice)) > 1e-3 {
			return s, fmt.Errorf("label: S² has the eigenvalue %.6f in this set, which is no S(S+1); give all states of the multiplet, converged", x)
		}
		s.Twice = append(s.Twice, int(math.Round(twice)))
	}
	return s, nil
}

// spread is the largest norm of what S² leads out of the set. It uses the images up.
func spread(vectors, images [][]complex128, square []complex128) float64 {
	d, most := len(vectors), 0.0
	for n, image := range images {
		for k, u := range vectors {
			z := square[k*d+n]
			for i := range image {
				image[i] -= z * u[i]
			}
		}
		most = max(most, math.Sqrt(real(overlap(image, image))))
	}
	return most
}

// hermitian averages a matrix with its adjoint, from which rounding parts it.
func hermitian(a []complex128, d int) {
	for i := range d {
		for j := range i + 1 {
			z := (a[i*d+j] + complex(real(a[j*d+i]), -imag(a[j*d+i]))) / 2
			a[i*d+j], a[j*d+i] = z, complex(real(z), -imag(z))
		}
	}
}
