package main

import (
	"context"
	"fmt"
	"math"
	"sort"

	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/script/progress"
)

// correlate returns ⟨S_i·S_j⟩ of the ground state of a sector, for i in the cell at the
// origin and all j. The sector has all translations, so that the others follow.
func correlate(ctx context.Context, m *magnet, ground *sector, bar *progress.Display) ([][]float64, error) {
	o := operator.On(m.space)
	psi := ground.result.Vectors[0]
	var all [][]float64
	for orbital := range m.cluster.Orbitals() {
		i := m.cluster.SiteAt([2]int{0, 0}, orbital)
		row := make([]float64, m.cluster.Sites())
		for j := range row {
			value, err := expectation(ctx, o.Dot(i, j), ground, psi)
			if err != nil {
				return nil, err
			}
			row[j] = value
			bar.Report("correlations", int64(len(all)*len(row)+j+1), int64(m.cluster.Orbitals()*len(row)), 0)
		}
		all = append(all, row)
	}
	bar.Close()
	return all, nil
}

// expectation returns ⟨ψ|A|ψ⟩ in a sector: only the part of A counts that the symmetries
// of the sector leave alone.
func expectation(ctx context.Context, a operator.Operator, in *sector, psi lanczos.Vector) (float64, error) {
	part, err := matrix.Between(ctx, a, in.basis, in.basis, &matrix.Options{Form: matrix.OnTheFly})
	if err != nil {
		return 0, err
	}
	v := psi.AsComplex()
	image := make([]complex128, len(v))
	part.ApplyComplex(image, v)
	sum := 0.0
	for n, z := range image {
		sum += real(v[n])*real(z) + imag(v[n])*imag(z)
	}
	return sum, nil
}

// peak is the static structure factor at one momentum.
type peak struct {
	name  string // k/2π along a1 and a2
	k     [2]float64
	value float64
}

// structureFactor returns S(k) = N⁻¹ Σ_ij cos(k·(r_i-r_j)) ⟨S_i·S_j⟩, with r_i the places
// of the sites, at all momenta of the cluster within its period, which is larger than the
// Brillouin zone where a cell has several sites. It returns the vectors of the period too.
func structureFactor(m *magnet, correlations [][]float64) (peaks []peak, period [2][2]float64) {
	c := m.cluster
	b := reciprocal(c.Lattice())
	n := repetition(c.Lattice(), b)
	for _, k := range c.Momenta() {
		for _, shift := range inside(n) {
			at := k.K
			for d := 0; d < 2; d++ {
				at[d] += float64(shift[0])*b[0][d] + float64(shift[1])*b[1][d]
			}
			sum := 0.0
			for orbital, row := range correlations {
				i := c.SiteAt([2]int{0, 0}, orbital)
				for j, value := range row {
					p, q := c.Position(i), c.Position(j)
					sum += math.Cos(at[0]*(p[0]-q[0])+at[1]*(p[1]-q[1])) * value
				}
			}
			name := k.String()
			if shift != [2]int{0, 0} {
				name += fmt.Sprintf(" + (%d, %d)", shift[0], shift[1])
			}
			peaks = append(peaks, peak{name, at, math.Round(1e12*sum/float64(len(correlations)))/1e12 + 0})
		}
	}
	for i := 0; i < 2; i++ {
		for d := 0; d < 2; d++ {
			period[i][d] = float64(n[i][0])*b[0][d] + float64(n[i][1])*b[1][d]
		}
	}
	return peaks, period
}

// reciprocal returns the vectors b with a_i·b_j = 2π δ_ij.
func reciprocal(l lattice.Lattice) [2][2]float64 {
	f := 2 * math.Pi / (l.A1[0]*l.A2[1] - l.A1[1]*l.A2[0])
	return [2][2]float64{{f * l.A2[1], -f * l.A2[0]}, {-f * l.A1[1], f * l.A1[0]}}
}

// repetition returns the shortest two reciprocal vectors, in units of b1 and b2, that
// are a whole number of turns on every site: (1, 0) and (0, 1) for one site a cell.
func repetition(l lattice.Lattice, b [2][2]float64) [2][2]int {
	whole := func(n [2]int) bool {
		for _, r := range l.Sites {
			turns := 0.0
			for d := 0; d < 2; d++ {
				turns += (float64(n[0])*b[0][d] + float64(n[1])*b[1][d]) * (r[d] - l.Sites[0][d]) / (2 * math.Pi)
			}
			if math.Abs(turns-math.Round(turns)) > 1e-9 {
				return false
			}
		}
		return true
	}
	square := func(n [2]int) float64 {
		x, y := float64(n[0])*b[0][0]+float64(n[1])*b[1][0], float64(n[0])*b[0][1]+float64(n[1])*b[1][1]
		return x*x + y*y
	}
	var all [][2]int
	for x := -6; x <= 6; x++ {
		for y := -6; y <= 6; y++ {
			if n := [2]int{x, y}; n != [2]int{0, 0} && whole(n) {
				all = append(all, n)
			}
		}
	}
	sort.SliceStable(all, func(i, j int) bool { return square(all[i]) < square(all[j])-1e-9 })
	for _, n := range all {
		if all[0][0]*n[1] != all[0][1]*n[0] {
			return [2][2]int{all[0], n}
		}
	}
	return [2][2]int{{1, 0}, {0, 1}} // sites at no simple fractions: not periodic
}

// inside returns one vector of each class modulo the given two.
func inside(n [2][2]int) [][2]int {
	det := n[0][0]*n[1][1] - n[0][1]*n[1][0]
	if det < 0 {
		det = -det
	}
	var list [][2]int
	for x := 0; x < det && len(list) < det; x++ {
		for y := 0; y < det && len(list) < det; y++ {
			fresh := true
			for _, v := range list {
				dx, dy := x-v[0], y-v[1]
				p, q := dx*n[1][1]-dy*n[1][0], n[0][0]*dy-n[0][1]*dx
				if p%det == 0 && q%det == 0 {
					fresh = false
				}
			}
			if fresh {
				list = append(list, [2]int{x, y})
			}
		}
	}
	return list
}

// printPeaks lists the largest structure factors.
func printPeaks(peaks []peak) {
	sorted := append([]peak(nil), peaks...)
	sort.SliceStable(sorted, func(a, b int) bool { return sorted[a].value > sorted[b].value+1e-9 })
	fmt.Println("\nlargest static structure factors of the ground state")
	total := 0.0
	for _, p := range peaks {
		total += p.value
	}
	for i, p := range sorted {
		if i == 4 {
			break
		}
		fmt.Printf("  k/2π = %-20s  S(k) = %.6f\n", p.name, p.value)
	}
	// The mean over the period is that of the squares of the spins themselves.
	fmt.Printf("  mean over all momenta: %.6f, S(S+1) of a spin: 0.75\n", total/float64(len(peaks)))
}
