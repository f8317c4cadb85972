package lattice

import (
	"fmt"
	"math"

	"ketloom/basis/group"
)

// Isometry is a motion of the plane that keeps distances,
//
//	x → Linear·x + Translation,
//
// in Cartesian coordinates about (0, 0). Translation is one of those that
// differ by periods of the cluster.
type Isometry struct {
	Linear      [2][2]float64 // orthogonal; Linear[i] is row i
	Translation [2]float64
}

// Reflects reports whether the linear part is a reflection.
func (m Isometry) Reflects() bool { return cross(m.Linear[0], m.Linear[1]) < 0 }

// Angle returns, in radians, the angle of the rotation in [0, 2π),
// counter-clockwise; for a reflection or glide the direction of its axis in
// [0, π).
func (m Isometry) Angle() float64 {
	full := math.Atan2(m.Linear[1][0], m.Linear[0][0])
	if m.Reflects() {
		return wrapped(full/2, math.Pi)
	}
	return wrapped(full, 2*math.Pi)
}

// Turn returns the rotation as a fraction of a turn, such as 1/4; that of a
// reflection is no turn.
func (m Isometry) Turn() group.Turn {
	if m.Reflects() {
		return group.Turn{Num: 0, Den: 1}
	}
	share := m.Angle() / (2 * math.Pi)
	for n := int64(1); n <= MostSites; n++ {
		if k := math.Round(share * float64(n)); math.Abs(share*float64(n)-k) < 1e-7*float64(n) {
			return group.NewTurn(int64(k), n)
		}
	}
	return group.NewTurn(0, 1)
}

// wrapped returns the angle modulo the range; an angle just below the range is
// zero.
func wrapped(angle, full float64) float64 {
	angle -= full * math.Floor(angle/full)
	if full-angle < 1e-7 {
		return 0
	}
	return angle
}

// String describes the linear part and, if there is one, the translation.
func (m Isometry) String() string {
	text := ""
	switch turn := m.Turn(); {
	case m.Reflects():
		text = fmt.Sprintf("reflection in an axis at %.4g degrees", m.Angle()*180/math.Pi)
	case turn.IsZero():
		if length(m.Translation) < 1e-9 {
			return "identity"
		}
		return fmt.Sprintf("translation by (%.4g, %.4g)", m.Translation[0], m.Translation[1])
	default:
		text = fmt.Sprintf("rotation by %v of a turn", turn)
	}
	if length(m.Translation) > 1e-9 {
		text += fmt.Sprintf(" and translation by (%.4g, %.4g)", m.Translation[0], m.Translation[1])
	}
	return text
}

// apply returns the image of a point.
func (m Isometry) apply(at [2]float64) [2]float64 { return plus(m.turned(at), m.Translation) }

// turned returns the image of a displacement.
func (m Isometry) turned(v [2]float64) [2]float64 {
	return [2]float64{dot(m.Linear[0], v), dot(m.Linear[1], v)}
}

func rotation(angle float64) [2][2]float64 {
	s, c := math.Sincos(angle)
	return [2][2]float64{{c, -s}, {s, c}}
}

// reflection returns the reflection in an axis through the origin.
func reflection(axis float64) [2][2]float64 {
	s, c := math.Sincos(2 * axis)
	return [2][2]float64{{c, s}, {s, -c}}
}
