package lanczos

import "math"

// gaussian returns two independent normal deviates that depend on the stream and
// the index only, so that any worker can fill any part of a vector: splitmix64
// (G. L. Steele, D. Lea and C. H. Flood, OOPSLA 2014) and the transformation of
// G. E. P. Box and M. E. Muller, Ann. Math. Stat. 29, 610 (1958).
func gaussian(stream uint64, index int) (x, y float64) {
	counter := stream + 2*uint64(index)*0x9e3779b97f4a7c15
	a := mix(counter)
	b := mix(counter + 0x9e3779b97f4a7c15)
	radius := math.Sqrt(-2 * math.Log((float64(a>>11)+1)*0x1p-53))
	sin, cos := math.Sincos(2 * math.Pi * float64(b>>11) * 0x1p-53)
	return radius * cos, radius * sin
}

func mix(z uint64) uint64 {
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}

// streamOf gives each random vector of a search a stream of its own.
func streamOf(seed uint64, run int) uint64 {
	return mix(mix(seed) + uint64(run+1)*0xd1342543de82ef95)
}
