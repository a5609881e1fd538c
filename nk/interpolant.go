package nk

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/interp"
)

// Interpolant gives the optical constants of a table at any wavelength of its
// range. It is made by Table.Interpolate or Material, never changes, and serves
// any number of goroutines at the same time. The zero value knows no wavelength:
// every call returns ErrInput.
//
// Table is a copy of the rows and their provenance for reading; changes to it do
// not reach the interpolation.
type Interpolant struct {
	Table Table

	x   []float64 // wavelengths of the rows, nm
	seg []segment // seg[i] lies between x[i] and x[i+1]; the last one holds only the last row
	u   []float64 // relative uncertainty of alpha at the rows, or nil
}

// segment is the interpolation between two rows over t = (lambda - x[i])/width,
// 0 <= t < 1: n = n0 + t(n1 + t(n2 + t n3)), k likewise or by kind.
type segment struct {
	width          float64 // nm
	n0, n1, n2, n3 float64
	nNext          float64 // n at the next row
	k0, kNext      float64 // k at this and the next row
	l0, l1, l2, l3 float64 // of ln k, where kind is logarithmic
	kind           kind
}

type kind uint8

const (
	zero        kind = iota // k = 0 at both rows
	logarithmic             // k > 0 at both rows
	falling                 // k > 0, then 0
	rising                  // k = 0, then > 0
)

// Interpolate fits the interpolation. It returns the errors of Validate, and
// ErrInput if the slope between two rows is not a finite number.
//
// n is interpolated by the monotone piecewise cubic of F. N. Fritsch and
// J. Butland, SIAM J. Sci. Stat. Comput. 5, 300 (1984), and so is ln k wherever
// k > 0 at both neighbouring rows, because k spans many decades near an
// absorption edge. Between two rows the result never leaves the two values, and
// at a row it is the value of the row to the last bit.
//
// A row with k = 0 has no logarithm; it means absorption too small for the
// source to state. Between two such rows k is zero. Between a row with k > 0
// and one with k = 0, k follows the square of the distance from the zero row,
// the power law of an indirect or amorphous edge (J. Tauc, R. Grigorovici,
// A. Vancu, Phys. Status Solidi 15, 627 (1966)): it ends flat at the zero row
// and its area is a third of the rectangle under the row with k > 0, so that the
// edge adds less absorption than a straight line would.
//
// The variable is the wavelength, not the photon energy: spectra are tabulated
// and integrated over it. With every other row left out, the embedded tables are
// restored with the same error in either variable.
func (t Table) Interpolate() (*Interpolant, error) {
	if err := t.Validate(); err != nil {
		return nil, err
	}
	t = t.clone()
	ip := &Interpolant{Table: t, x: append([]float64(nil), t.Wavelength...), seg: make([]segment, len(t.N))}
	if t.Uncertainty != nil {
		ip.u = append([]float64{}, t.Uncertainty...)
	}
	for i := range ip.seg {
		s := &ip.seg[i]
		s.n0, s.k0 = t.N[i]+0, t.K[i]+0 // + 0 makes a positive zero of a negative one
		if i+1 < len(ip.seg) {
			s.width = t.Wavelength[i+1] - t.Wavelength[i]
			s.nNext, s.kNext = t.N[i+1]+0, t.K[i+1]+0
			s.kind = kindOf(s.k0, s.kNext)
		}
	}
	slope := nodeSlopes(ip.x, t.N)
	for i := range len(ip.seg) - 1 {
		s := &ip.seg[i]
		s.n1, s.n2, s.n3 = hermite(s.nNext-s.n0, slope[i]*s.width, slope[i+1]*s.width)
	}
	ip.fitLogarithms()
	for i := range ip.seg {
		s := &ip.seg[i]
		if sum := s.n1 + s.n2 + s.n3 + s.l1 + s.l2 + s.l3; math.IsNaN(sum) || math.IsInf(sum, 0) {
			return nil, fmt.Errorf("nk: %s: no finite slope between rows %d and %d, at %g and %g nm: %w",
				t.label(), i, i+1, ip.x[i], ip.x[i+1], ErrInput)
		}
	}
	return ip, nil
}

func kindOf(k, next float64) kind {
	switch {
	case k > 0 && next > 0:
		return logarithmic
	case k > 0:
		return falling
	case next > 0:
		return rising
	}
	return zero
}

// fitLogarithms fits ln k in every unbroken run of rows with k > 0.
func (ip *Interpolant) fitLogarithms() {
	for i := 0; i < len(ip.seg); i++ {
		first := i
		for i < len(ip.seg) && ip.seg[i].kind == logarithmic {
			i++
		}
		if i == first {
			continue
		}
		rows := ip.x[first : i+1]
		y := make([]float64, len(rows))
		for j := range y {
			y[j] = math.Log(ip.seg[first+j].k0)
		}
		slope := nodeSlopes(rows, y)
		for j := range len(rows) - 1 {
			s := &ip.seg[first+j]
			s.l0 = y[j]
			s.l1, s.l2, s.l3 = hermite(y[j+1]-y[j], slope[j]*s.width, slope[j+1]*s.width)
		}
	}
}

// nodeSlopes returns dy/dx of the monotone cubic at each of two or more nodes.
func nodeSlopes(x, y []float64) []float64 {
	var fb interp.FritschButland
	_ = fb.Fit(x, y) // always nil; it panics only on what Validate refuses
	d := make([]float64, len(x))
	for i := range d {
		d[i] = fb.PredictDerivative(x[i])
	}
	return d
}

// hermite returns the coefficients of t, t² and t³ of the cubic over 0..1 that
// rises by dy and has the slopes d0 and d1 at its ends.
func hermite(dy, d0, d1 float64) (c1, c2, c3 float64) {
	return d0, 3*dy - 2*d0 - d1, d0 + d1 - 2*dy
}

// At returns n + ik at a vacuum wavelength in nm. It returns ErrRange outside
// the range of the table and ErrInput for NaN. It does not allocate.
func (ip *Interpolant) At(lambda float64) (complex128, error) {
	i := ip.locate(lambda, 0)
	if i < 0 {
		return 0, ip.outside(lambda)
	}
	return ip.value(i, lambda), nil
}

// Sample stores n + ik at each wavelength (nm, any order) in dst and returns
// dst. A nil dst is allocated, else its length must be that of lambda
// (ErrInput). An error names the position of the wavelength that is outside
// the range (ErrRange) or NaN (ErrInput). With dst given it does not allocate.
func (ip *Interpolant) Sample(dst []complex128, lambda []float64) ([]complex128, error) {
	if dst == nil {
		dst = make([]complex128, len(lambda))
	}
	if len(dst) != len(lambda) {
		return dst, fmt.Errorf("nk: sample: %d places for %d wavelengths: %w", len(dst), len(lambda), ErrInput)
	}
	i := 0
	for j, l := range lambda {
		if i = ip.locate(l, max(i, 0)); i < 0 {
			return dst, fmt.Errorf("nk: sample: wavelength %d: %w", j, ip.outside(l))
		}
		dst[j] = ip.value(i, l)
	}
	return dst, nil
}

// RelativeUncertainty returns the relative standard uncertainty of the
// absorption coefficient at a wavelength in nm (0.01 is 1 %): the logarithm of
// the rows' values, linear over the wavelength (the values themselves if one is
// zero). It returns ErrUnknown for a table without uncertainties, and the
// errors of At.
func (ip *Interpolant) RelativeUncertainty(lambda float64) (float64, error) {
	i := ip.locate(lambda, 0)
	switch {
	case i < 0:
		return 0, ip.outside(lambda)
	case ip.u == nil:
		return 0, fmt.Errorf("nk: %s: uncertainty of the absorption coefficient: %w", ip.Table.label(), ErrUnknown)
	case lambda == ip.x[i]:
		return ip.u[i], nil
	}
	return logLinear(ip.u[i], ip.u[i+1], (lambda-ip.x[i])/ip.seg[i].width), nil
}

// logLinear is a at t = 0 and b at t = 1, its logarithm linear in between; if a
// or b is zero, it is linear itself.
func logLinear(a, b, t float64) float64 {
	if a > 0 && b > 0 {
		la := math.Log(a)
		return math.Exp(la + t*(math.Log(b)-la))
	}
	return a + t*(b-a)
}

// locate returns i with x[i] <= lambda < x[i+1], or the last row if lambda is
// the last wavelength, or -1. It tries the segments from hint first, so that a
// sweep in ascending order does not search.
func (ip *Interpolant) locate(lambda float64, hint int) int {
	x := ip.x
	last := len(x) - 1
	if last < 0 || !(lambda >= x[0] && lambda <= x[last]) {
		return -1
	}
	lo, hi := 0, last
	if lambda >= x[hint] {
		lo = hint
		for range 4 {
			if lo == last || lambda < x[lo+1] {
				return lo
			}
			lo++
		}
	} else {
		hi = hint
	}
	for lo+1 < hi {
		if mid := int(uint(lo+hi) >> 1); lambda >= x[mid] {
			lo = mid
		} else {
			hi = mid
		}
	}
	if lo < last && lambda >= x[lo+1] {
		lo++
	}
	return lo
}

// value evaluates segment i.
func (ip *Interpolant) value(i int, lambda float64) complex128 {
	s := &ip.seg[i]
	dx := lambda - ip.x[i]
	if dx == 0 {
		return complex(s.n0, s.k0)
	}
	t := dx / s.width
	// The cubic is monotone; the limits take off the last rounding.
	n := between(s.n0+t*(s.n1+t*(s.n2+t*s.n3)), s.n0, s.nNext)
	switch s.kind {
	case logarithmic:
		return complex(n, between(math.Exp(s.l0+t*(s.l1+t*(s.l2+t*s.l3))), s.k0, s.kNext))
	case falling:
		return complex(n, s.k0*(1-t)*(1-t))
	case rising:
		return complex(n, s.kNext*t*t)
	}
	return complex(n, 0)
}

// between limits x to the interval of a and b, in either order.
func between(x, a, b float64) float64 {
	if a > b {
		a, b = b, a
	}
	if x < a {
		return a
	}
	if x > b {
		return b
	}
	return x
}

// outside is the error for a wavelength that locate did not find.
func (ip *Interpolant) outside(lambda float64) error {
	switch {
	case len(ip.x) == 0:
		return fmt.Errorf("nk: interpolant without a table: %w", ErrInput)
	case math.IsNaN(lambda):
		return fmt.Errorf("nk: %s: wavelength is NaN: %w", ip.Table.label(), ErrInput)
	}
	return fmt.Errorf("nk: %s: wavelength %g nm is outside %g to %g nm: %w", ip.Table.label(), lambda, ip.x[0], ip.x[len(ip.x)-1], ErrRange)
}
