package lighttrap

// vec is a vector in space.
type vec struct{ x, y, z float64 }

func (a vec) dot(b vec) float64 { return a.x*b.x + a.y*b.y + a.z*b.z }

func (a vec) cross(b vec) vec {
	return vec{a.y*b.z - a.z*b.y, a.z*b.x - a.x*b.z, a.x*b.y - a.y*b.x}
}

func (a vec) scale(f float64) vec { return vec{a.x * f, a.y * f, a.z * f} }

// along returns a + f b.
func (a vec) along(f float64, b vec) vec { return vec{a.x + f*b.x, a.y + f*b.y, a.z + f*b.z} }
