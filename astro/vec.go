package astro

import "math"

// Vec is a vector in some right-handed set of axes; what the axes are is said
// where it is used. A direction is a Vec of length 1.
type Vec struct{ X, Y, Z float64 }

// Direction makes the unit vector of a longitude and latitude (right
// ascension and declination, azimuth-like angles, and so on).
func Direction(lon, lat Angle) Vec {
	cb := math.Cos(lat.rad)
	return Vec{math.Cos(lon.rad) * cb, math.Sin(lon.rad) * cb, math.Sin(lat.rad)}
}

// Dot returns the scalar product.
func (v Vec) Dot(w Vec) float64 { return v.X*w.X + v.Y*w.Y + v.Z*w.Z }

// Cross returns the vector product v x w.
func (v Vec) Cross(w Vec) Vec {
	return Vec{v.Y*w.Z - v.Z*w.Y, v.Z*w.X - v.X*w.Z, v.X*w.Y - v.Y*w.X}
}

// Plus returns v + w.
func (v Vec) Plus(w Vec) Vec { return Vec{v.X + w.X, v.Y + w.Y, v.Z + w.Z} }

// Minus returns v - w.
func (v Vec) Minus(w Vec) Vec { return Vec{v.X - w.X, v.Y - w.Y, v.Z - w.Z} }

// Times returns v scaled by k.
func (v Vec) Times(k float64) Vec { return Vec{k * v.X, k * v.Y, k * v.Z} }

// Norm returns the length.
func (v Vec) Norm() float64 { return math.Sqrt(v.Dot(v)) }

// Unit returns v scaled to length 1; the zero vector stays zero.
func (v Vec) Unit() Vec {
	n := v.Norm()
	if n == 0 {
		return v
	}
	return v.Times(1 / n)
}

// LonLat returns longitude in [0, 360) degrees and latitude of the vector.
// At a pole the longitude is 0. It never returns NaN for a finite vector.
func (v Vec) LonLat() (lon, lat Angle) {
	xy := math.Hypot(v.X, v.Y)
	if xy != 0 {
		lon = Angle{math.Atan2(v.Y, v.X)}.Turn()
	}
	return lon, Angle{math.Atan2(v.Z, xy)}
}

// Separation returns the angle between two vectors, 0 to 180 degrees, exact
// also for very small and very large angles.
//
//	atan2(|v x w|, v . w)
func Separation(v, w Vec) Angle {
	return Angle{math.Atan2(v.Cross(w).Norm(), v.Dot(w))}
}

// Mat is a 3 by 3 matrix, rows first; here always a rotation.
type Mat [3]Vec

// Apply returns m v.
func (m Mat) Apply(v Vec) Vec { return Vec{m[0].Dot(v), m[1].Dot(v), m[2].Dot(v)} }

// ApplyT returns the transpose of m times v: the inverse rotation.
func (m Mat) ApplyT(v Vec) Vec {
	return m[0].Times(v.X).Plus(m[1].Times(v.Y)).Plus(m[2].Times(v.Z))
}

// Mul returns m n.
func (m Mat) Mul(n Mat) Mat {
	return Mat{n.ApplyT(m[0]), n.ApplyT(m[1]), n.ApplyT(m[2])}
}

// Rotation returns the matrix that expresses a vector in axes turned by the
// angle about axis 0 (x), 1 (y) or 2 (z), anticlockwise seen from the axis'
// positive end: the R1, R2, R3 of the literature. Another axis panics.
func Rotation(axis int, by Angle) Mat {
	s, c := math.Sincos(by.rad)
	switch axis {
	case 0:
		return Mat{{1, 0, 0}, {0, c, s}, {0, -s, c}}
	case 1:
		return Mat{{c, 0, -s}, {0, 1, 0}, {s, 0, c}}
	case 2:
		return Mat{{c, s, 0}, {-s, c, 0}, {0, 0, 1}}
	}
	panic("astro: Rotation wants axis 0, 1 or 2")
}
