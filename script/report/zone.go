package report

import "math"

// wignerSeitz returns the corners, counter-clockwise, of the points that lie closer to the
// origin than to any of the others.
func wignerSeitz(others [][2]float64, reach float64) [][2]float64 {
	cell := [][2]float64{{-reach, -reach}, {reach, -reach}, {reach, reach}, {-reach, reach}}
	for _, g := range others {
		if half := (g[0]*g[0] + g[1]*g[1]) / 2; half > 0 {
			cell = cutHalf(cell, g, half)
		}
	}
	return cell
}

// cutHalf keeps the part of a polygon with x·g <= limit.
func cutHalf(cell [][2]float64, g [2]float64, limit float64) [][2]float64 {
	var out [][2]float64
	for i, a := range cell {
		b := cell[(i+1)%len(cell)]
		da, db := a[0]*g[0]+a[1]*g[1]-limit, b[0]*g[0]+b[1]*g[1]-limit
		if da <= 0 {
			out = append(out, a)
		}
		if da < 0 && db > 0 || da > 0 && db < 0 {
			t := da / (da - db)
			out = append(out, [2]float64{a[0] + t*(b[0]-a[0]), a[1] + t*(b[1]-a[1])})
		}
	}
	return out
}

// combinations returns n₁b₁ + n₂b₂ for |n| up to most, without the origin.
func combinations(b [2][2]float64, most int) [][2]float64 {
	var out [][2]float64
	for n1 := -most; n1 <= most; n1++ {
		for n2 := -most; n2 <= most; n2++ {
			if n1 != 0 || n2 != 0 {
				out = append(out, [2]float64{float64(n1)*b[0][0] + float64(n2)*b[1][0], float64(n1)*b[0][1] + float64(n2)*b[1][1]})
			}
		}
	}
	return out
}

// shortened returns the shortest basis of the lattice of two vectors, by the algorithm
// of Lagrange and Gauss.
func shortened(b [2][2]float64) [2][2]float64 {
	p, q := b[0], b[1]
	square := func(v [2]float64) float64 { return v[0]*v[0] + v[1]*v[1] }
	for range 1000 {
		if square(p) > square(q) {
			p, q = q, p
		}
		n := math.Round((p[0]*q[0] + p[1]*q[1]) / square(p))
		if n == 0 {
			break
		}
		q = [2]float64{q[0] - n*p[0], q[1] - n*p[1]}
	}
	return [2][2]float64{p, q}
}
