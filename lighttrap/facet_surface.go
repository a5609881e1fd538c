package lighttrap

import (
	"fmt"
	"math"
)

// The two sides of an interface: outside is above a cover or the front, and below
// the rear.
const (
	sideOut = iota
	sideIn
)

// Columns of a compiled table, before the absorptances of the films.
const (
	colRS  = iota // reflectances
	colRP         //
	colXRe        // rs rp*, the factor of the correlation of s and p
	colXIm        //
	colTS         // transmittances
	colTP         //
	colYRe        // ts tp* times the ratio of power that both share
	colYIm        //
	columns
)

// response is what an interface does at one angle; the absorptances of films are
// read from their row by the caller.
type response [columns]float64

// opticSide is one side of an interface, ready for tracing.
type opticSide struct {
	n1, n2 float64 // index on this side and on the other
	opaque bool    // no light goes on behind the interface

	cos   []float64 // nil: Fresnel
	rows  []float64 // len(cos) rows of columns + 2 films
	guide []int32   // interval of the table in which the i-th part of the cosines begins
	films int

	mean      response  // isotropic light, for Lambertian faces
	meanFilms []float64 // absorptances of it
}

// fresnel fills v for a bare interface and returns the cosine behind it, which
// is 0 beyond the critical angle.
//
// derived: from rs = (n1 c1 - n2 c2)/(n1 c1 + n2 c2), rp = (n2 c1 - n1 c2)/(n2 c1 + n1 c2),
// rp = -rs at normal incidence, with c2 = i g beyond the critical angle.
func fresnel(v *response, n1, n2, c1 float64) (c2 float64) {
	c2sq := refracted(n1/n2, c1)
	if c2sq > 0 {
		c2 = math.Sqrt(c2sq)
		fresnelPassing(v, n1, n2, c1, c2)
		return c2
	}
	g := math.Sqrt(-c2sq)
	a, b, e, f := n1*c1, n2*g, n2*c1, n1*g
	re, im := a*e+b*f, a*f-b*e
	d := re*re + im*im
	*v = response{1, 1, 1, 0, 0, 0, 0, 0}
	if d > 0 {
		v[colXRe], v[colXIm] = (re-im)*(re+im)/d, 2*re*im/d
	}
	return 0
}

// fresnelPassing is fresnel with both cosines known.
func fresnelPassing(v *response, n1, n2, c1, c2 float64) {
	a, b, e, f := n1*c1, n2*c2, n2*c1, n1*c2
	s, p := 1/(a+b), 1/(e+f)
	rs, rp := (a-b)*s, (e-f)*p
	t := 4 * a * b
	*v = response{rs * rs, rp * rp, rs * rp, 0, t * s * s, t * p * p, t * s * p, 0}
}

// refracted returns the square of the cosine behind an interface, 1 - m² sin²θ
// with m = n1/n2, in a form that does not cancel towards grazing light.
func refracted(m, c float64) float64 { return (1-m)*(1+m) + m*m*c*c }

// compile makes the side of an interface from a table, which may be nil.
func (o *opticSide) compile(s *FacetSide, n1, n2 float64, opaque bool) {
	o.n1, o.n2, o.opaque = n1, n2, opaque
	o.cos, o.rows, o.guide, o.films = o.cos[:0], o.rows[:0], o.guide[:0], 0
	if s == nil {
		return
	}
	o.films = len(s.AS)
	o.cos = append(o.cos, s.Cos...)
	for i := range s.Cos {
		sumS, sumP := s.RS[i]+s.TS[i], s.RP[i]+s.TP[i]
		for j := range s.AS {
			sumS, sumP = sumS+s.AS[j][i], sumP+s.AP[j][i]
		}
		rs, rp, ts, tp := s.RS[i]/sumS, s.RP[i]/sumP, s.TS[i]/sumS, s.TP[i]/sumP
		xr, xi := correlation(rs, rp, s.Phase, i)
		yr, yi := correlation(ts, tp, s.TransmittedPhase, i)
		o.rows = append(o.rows, rs, rp, xr, xi, ts, tp, yr, yi)
		for j := range s.AS {
			o.rows = append(o.rows, s.AS[j][i]/sumS, s.AP[j][i]/sumP)
		}
	}
	parts := 2 * len(s.Cos)
	k := int32(0)
	for i := range parts {
		for int(k) < len(s.Cos)-2 && s.Cos[k+1] <= float64(i)/float64(parts) {
			k++
		}
		o.guide = append(o.guide, k)
	}
}

// closed reports whether nothing goes through the interface or into its films.
func (o *opticSide) closed() bool {
	if len(o.cos) == 0 {
		return false
	}
	stride := columns + 2*o.films
	for i := range o.cos {
		row := o.rows[i*stride : (i+1)*stride]
		if row[colRS] < 1 || row[colRP] < 1 {
			return false
		}
	}
	return true
}

// correlation returns the geometric mean of two shares with their phase; 0 if
// there is none.
func correlation(a, b float64, phase []float64, i int) (re, im float64) {
	if phase == nil {
		return 0, 0
	}
	sin, cos := math.Sincos(phase[i])
	m := math.Sqrt(a * b)
	return m * cos, m * sin
}

// at returns the response at the cosine c and the cosine behind the interface
// (0 where nothing goes on), and leaves place and weight of the interval of
// the table for the films.
func (o *opticSide) at(v *response, c float64) (c2 float64, row []float64, weight float64) {
	if len(o.cos) == 0 {
		return fresnel(v, o.n1, o.n2, c), nil, 0
	}
	k := int(o.guide[min(int(c*float64(len(o.guide))), len(o.guide)-1)])
	for k < len(o.cos)-2 && o.cos[k+1] < c {
		k++
	}
	u := (c - o.cos[k]) / (o.cos[k+1] - o.cos[k])
	stride := columns + 2*o.films
	row = o.rows[k*stride : (k+2)*stride]
	a, b := (*response)(row[:columns]), (*response)(row[stride:stride+columns])
	for i := range v {
		v[i] = a[i] + u*(b[i]-a[i])
	}
	if o.opaque {
		return 0, row, u
	}
	if c2sq := refracted(o.n1/o.n2, c); c2sq > 0 {
		return math.Sqrt(c2sq), row, u
	}
	// Between the last angle of the table before the critical one and that itself
	// a little transmittance is left: it cannot go anywhere, so it is reflected.
	v[colRS], v[colRP] = v[colRS]+v[colTS], v[colRP]+v[colTP]
	v[colTS], v[colTP] = 0, 0
	return 0, row, u
}

// average fills the response to isotropic light, for Lambertian faces.
func (o *opticSide) average() {
	o.mean = response{}
	o.meanFilms = o.meanFilms[:0]
	if len(o.cos) == 0 {
		r := diffuseBare(o.n1, o.n2)
		o.mean = response{r, r, 0, 0, 1 - r, 1 - r, 0, 0}
		return
	}
	stride := columns + 2*o.films
	column := func(j int) float64 {
		sum := 0.0
		for i := 1; i < len(o.cos); i++ {
			a, b := o.cos[i-1], o.cos[i]
			fa, fb := o.rows[(i-1)*stride+j], o.rows[i*stride+j]
			// Simpson's rule is exact for the product of two linear functions.
			sum += (b - a) / 3 * (a*fa + (a+b)*(fa+fb) + b*fb)
		}
		return sum
	}
	r := 0.5 * (column(colRS) + column(colRP))
	t := 0.5 * (column(colTS) + column(colTP))
	total := r + t
	for j := range o.films {
		a := 0.5 * (column(columns+2*j) + column(columns+2*j+1))
		o.meanFilms = append(o.meanFilms, a)
		total += a
	}
	for j := range o.meanFilms {
		o.meanFilms[j] /= total
	}
	r, t = r/total, t/total
	o.mean = response{r, r, 0, 0, t, t, 0, 0}
}

// diffuseBare is the reflectance of isotropic light in n1 that meets n2.
func diffuseBare(n1, n2 float64) float64 {
	if n2 >= n1 {
		out, _ := DiffuseReflectance(n2 / n1)
		return out
	}
	_, in := DiffuseReflectance(n1 / n2)
	return in
}

// surface is one interface of a wafer with its covers, ready for tracing.
type surface struct {
	texture  Texture
	opaque   bool
	specular float64
	power    float64 // 1/(exponent+1) of a scattering face
	side     [2]opticSide

	// Facets. The frame of the texture has its z axis from the pyramids (or the
	// pits) to the other side; cells are squares of edge 1 about the origin.
	tan, height float64
	normals     [4]vec // +x, -x, +y, -y
	solid       bool   // the pyramids are wafer
	flip        bool   // the z axis of the texture is that of the wafer turned upside down
	turned      bool   // azimuth other than 0
	cosA, sinA  float64
	random      bool
	grooves     bool
	period      float64 // nm, 0: random places
}

// compile prepares an interface. n1 is the index outside, n2 that inside.
func (s *surface) compile(f *Face, name string, n1, n2 float64, rear bool) error {
	s.texture, s.opaque, s.specular, s.period = f.Texture, f.Opaque, f.Specular, f.Period
	s.power = 0.5
	if f.Texture == CosinePower {
		s.power = 1 / (f.Exponent + 1)
	}
	var out, in *FacetSide
	if f.Films != nil {
		if err := f.Films.check(); err != nil {
			return fmt.Errorf("lighttrap: %s: films: %w", name, err)
		}
		out, in = &f.Films.Outside, &f.Films.Inside
		if !f.Opaque && (f.Texture != Lambertian || f.Specular > 0) {
			if err := checkCritical(out, n1, n2); err != nil {
				return fmt.Errorf("lighttrap: %s: films: outside: %w", name, err)
			}
			if err := checkCritical(in, n2, n1); err != nil {
				return fmt.Errorf("lighttrap: %s: films: inside: %w", name, err)
			}
		}
	}
	s.side[sideOut].compile(out, n1, n2, false)
	s.side[sideIn].compile(in, n2, n1, f.Opaque)
	if f.Texture == Lambertian {
		s.side[sideOut].average()
		s.side[sideIn].average()
	}
	if !f.Texture.textured() {
		return nil
	}
	sin, cos := math.Sincos(f.Angle)
	s.tan, s.height = sin/cos, 0.5*sin/cos
	s.normals = [4]vec{{sin, 0, cos}, {-sin, 0, cos}, {0, sin, cos}, {0, -sin, cos}}
	s.solid = f.Texture != InvertedPyramids
	s.flip = rear == s.solid
	s.random, s.grooves = f.Texture == RandomPyramids, f.Texture == Grooves
	s.sinA, s.cosA = math.Sincos(f.Azimuth)
	s.turned = f.Azimuth != 0
	return nil
}

// checkCritical reports transmittance beyond the critical angle.
func checkCritical(s *FacetSide, n1, n2 float64) error {
	if n1 <= n2 {
		return nil
	}
	m := n2 / n1
	critical := math.Sqrt((1 - m) * (1 + m))
	for i, c := range s.Cos {
		if t := max(s.TS[i], s.TP[i]); c < critical*(1-1e-9) && t > FacetTolerance {
			return fmt.Errorf("cosine %d: transmittance %g at %g, beyond the critical angle of cosine %g: %w", i, t, c, critical, ErrInput)
		}
	}
	return nil
}
