package lighttrap

import (
	"math"
	"testing"
)

// FuzzTrace: any numbers give an error, or shares that are finite and add up to
// 1; no ray is lost and none runs for ever.
func FuzzTrace(f *testing.F) {
	f.Add(uint8(1), uint8(0), PyramidAngle, 0.7, 3.5, 1.0, 160e3, 0.0, 0.0, 1.0, 0.9, uint8(0))
	f.Add(uint8(2), uint8(5), 1e-9, 1.5707963267948966, 1.0, 0.0, 0.0, 1.5707963, 0.7853981633974483, 0.0, 1.0, uint8(3))
	f.Add(uint8(4), uint8(4), 1.5707, 1.5707, 8.0, 1e9, 1e9, 1.57079632679, 1.5707963267948966, 5e3, 0.0, uint8(9))
	f.Add(uint8(3), uint8(6), 0.5, 0.5, 0.3, 1e-300, 1e300, 0.1, 0.2, 1e-9, 0.5, uint8(31))
	// Light so close to the plane that rounding decides on total reflection.
	f.Add(uint8(0), uint8(0), 0.5, 0.5, 14.0, 0.0, 0.0, 1.5707963, 0.157, 0.0, 0.5, uint8(0))
	f.Fuzz(func(t *testing.T, front, rear uint8, a, b, n, alpha, thickness, angle, azimuth, period, mirror float64, flags uint8) {
		w := Wafer{Index: n, Absorption: alpha, Thickness: thickness}
		face := func(kind uint8, angle float64) Face {
			f := Face{Texture: Texture(kind % textureKinds)}
			if f.Texture.textured() {
				f.Angle, f.Azimuth = angle, azimuth
				if f.Texture != RandomPyramids {
					f.Period = period
				}
			}
			if f.Texture == CosinePower {
				f.Exponent = angle
			}
			return f
		}
		w.Front, w.Rear = face(front, a), face(rear, b)
		films := UniformFacet(mirror, mirror)
		if flags&1 != 0 {
			w.Rear.Films, w.Rear.Opaque = &films, true
		}
		if flags&2 != 0 {
			w.Covers = []Cover{{Index: 0.5 + math.Abs(mirror), Absorption: alpha, Thickness: thickness}}
		}
		l := Light{Angle: angle, Azimuth: azimuth, FromRear: flags&4 != 0, Polarization: Polarization(flags >> 6)}
		if flags&8 != 0 {
			l.Cone, l.Angle = angle, 0
		}
		s := Settings{Rays: 4, Repetitions: 4, Seed: uint64(flags), Workers: 1}
		if flags&16 != 0 {
			s.Depths = []float64{0, thickness / 3, thickness}
		}
		r, err := Trace(w, l, s)
		if err != nil {
			return
		}
		if dev := math.Abs(total(&r) - 1); !(dev <= 1e-12) {
			t.Errorf("shares miss 1 by %g: %+v", dev, r)
		}
		for _, e := range []Estimate{r.Reflected, r.Escaped, r.Transmitted, r.Absorbed, r.FreeCarriers, r.Unfinished, r.Entered, r.Path, r.SentBack} {
			if !(e.Value >= 0 && e.Error >= 0) || math.IsInf(e.Value, 0) || math.IsInf(e.Error, 0) {
				t.Errorf("estimate %v: %+v", e, r)
			}
		}
		sum := 0.0
		for _, e := range r.Profile {
			sum += e.Value
		}
		if s.Depths != nil && !(math.Abs(sum-r.Absorbed.Value) <= 1e-12) {
			t.Errorf("cells add up to %g, absorbed is %v", sum, r.Absorbed)
		}
	})
}

// FuzzFacetTable: any table is an error or keeps the shares at 1.
func FuzzFacetTable(f *testing.F) {
	f.Add(0.5, 0.3, 0.2, 0.6, 0.1, 1.0, 2.0, uint8(2))
	f.Add(0.958, 1.0, 0.0, 0.0, 0.0, math.Pi, -1e9, uint8(5))
	f.Add(1e-300, 0.0, 0.0, 1.0, 0.0, 0.0, 0.0, uint8(0))
	f.Fuzz(func(t *testing.T, cos, rs, ts, rp, tp, phase, transmitted float64, texture uint8) {
		row := func(v float64) []float64 { return []float64{1, v, v} }
		zero := func(v float64) []float64 { return []float64{0, v, v} }
		side := FacetSide{
			Cos: []float64{0, cos, 1}, RS: row(rs), RP: row(rp), TS: zero(ts), TP: zero(tp),
			AS: [][]float64{zero(1 - rs - ts)}, AP: [][]float64{zero(1 - rp - tp)},
			Phase: []float64{0, phase, phase}, TransmittedPhase: []float64{0, transmitted, transmitted},
		}
		films := FacetTable{Outside: side, Inside: side}
		w := Wafer{Index: 1, Absorption: 10, Thickness: 100e3, Front: Face{Texture: Texture(texture % textureKinds), Films: &films}}
		w.Rear = Face{Opaque: true, Films: &films}
		switch {
		case w.Front.Texture.textured():
			w.Front.Angle = 0.9
		case w.Front.Texture == CosinePower:
			w.Front.Exponent = 2
		}
		r, err := Trace(w, Light{Angle: 0.7, Polarization: P}, Settings{Rays: 16, Repetitions: 4, Workers: 1})
		if err != nil {
			return
		}
		if dev := math.Abs(total(&r) - 1); !(dev <= 1e-12) {
			t.Errorf("shares miss 1 by %g: %+v", dev, r)
		}
	})
}
