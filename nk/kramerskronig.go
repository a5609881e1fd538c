package nk

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/interp"
)

const (
	// kkNodes is the number of Gauss-Legendre nodes in a cell of the table. The
	// rule serves cells at least their own width away from the pole, where its
	// error is of the order 5.8^-16 = 6e-13.
	kkNodes = 8
	// kkSmallest is the shortest table that can be transformed.
	kkSmallest = 5
)

// KramersKronigSettings says what to compare. The zero value compares the whole
// table but its two ends.
type KramersKronigSettings struct {
	Low, High float64 // compare within these vacuum wavelengths, nm; both 0: whole table
	Anchor    float64 // wavelength where both n are made equal, nm (the nearest one compared); 0: the middle one
}

// KramersKronigResult says how far the n of a table is from the transform of
// its k.
type KramersKronigResult struct {
	Lambda []float64 // wavelengths compared, nm
	N      []float64 // n by transform of k, equal to the table's at Anchor

	RMS   float64 // root mean square of N - n
	Max   float64 // largest |N - n|
	MaxAt float64 // where, nm

	Anchor    float64 // nm
	TableLow  float64 // range of the table, over which k is integrated, nm
	TableHigh float64

	// What the range that the table lacks may be worth: the largest change of N
	// within the wavelengths compared if k went on constant beyond TableHigh, and
	// like E⁻³ (far above all resonances) below TableLow, from its end values. N
	// does not contain it.
	MissingAbove float64 // beyond TableHigh
	MissingBelow float64 // below TableLow
}

// KramersKronig compares the n of a table with the transform of its k,
//
//	n(E) - n(Ea) = X(E) - X(Ea), X(E) = (2/pi) P ∫ x k(x)/(x² - E²) dx,
//
// anchored at one wavelength, which removes most of what lies outside the
// table. k is a local piecewise cubic (Akima) over the photon energy between the
// table's points and 0 outside. Sources: H. A. Kramers, Atti Cong. Intern.
// Fisica Como 2, 545 (1927), R. de L. Kronig, J. Opt. Soc. Am. 12, 547 (1926);
// subtraction: R. K. Ahrenkiel, J. Opt. Soc. Am. 61, 1651 (1971) (from memory).
//
// The figures tell an inconsistent table only as far as they exceed the missing
// ranges and the error of the interpolation (of the order of the spacing
// squared times the curvature of k). Where k ends at a value that is not 0, N is
// infinite at that end; therefore the ends are never compared. The work grows
// with the square of the table's length.
//
// ErrInput: fewer than 5 wavelengths, not ascending, not finite, a negative n
// or k, settings that make no sense. ErrRange: no wavelength to compare.
func KramersKronig(lambda []float64, index []complex128, s KramersKronigSettings) (KramersKronigResult, error) {
	if err := checkKramersKronig(lambda, index, s); err != nil {
		return KramersKronigResult{}, err
	}
	last := len(lambda) - 1
	res := KramersKronigResult{TableLow: lambda[0], TableHigh: lambda[last]}
	low, high := s.Low, s.High
	if low == 0 && high == 0 {
		low, high = lambda[0], lambda[last]
	}
	var rows []int
	for i := 1; i < last; i++ {
		if lambda[i] >= low && lambda[i] <= high {
			rows = append(rows, i)
		}
	}
	if len(rows) == 0 {
		return res, fmt.Errorf("nk: Kramers-Kronig: no inner wavelength of the table within %g-%g nm: %w", low, high, ErrRange)
	}
	anchor := len(rows) / 2
	if s.Anchor != 0 {
		for a, i := range rows {
			if math.Abs(lambda[i]-s.Anchor) < math.Abs(lambda[rows[anchor]]-s.Anchor) {
				anchor = a
			}
		}
	}
	res.Anchor = lambda[rows[anchor]]

	t := newKKTransform(lambda, index)
	zero := t.at(last - rows[anchor])
	below, above := t.missing(last - rows[anchor])
	sum := 0.0
	for _, i := range rows {
		n := real(index[rows[anchor]]) + 2/math.Pi*(t.at(last-i)-zero)
		res.Lambda, res.N = append(res.Lambda, lambda[i]), append(res.N, n)
		d := math.Abs(n - real(index[i]))
		sum += d * d
		if d > res.Max || res.MaxAt == 0 {
			res.Max, res.MaxAt = d, lambda[i]
		}
		b, a := t.missing(last - i)
		res.MissingBelow = max(res.MissingBelow, 2/math.Pi*math.Abs(b-below))
		res.MissingAbove = max(res.MissingAbove, 2/math.Pi*math.Abs(a-above))
	}
	res.RMS = math.Sqrt(sum / float64(len(rows)))
	return res, nil
}

func checkKramersKronig(lambda []float64, index []complex128, s KramersKronigSettings) error {
	bad := func(format string, a ...any) error {
		return fmt.Errorf("nk: Kramers-Kronig: "+format+": %w", append(a, ErrInput)...)
	}
	if len(lambda) != len(index) || len(lambda) < kkSmallest {
		return bad("%d wavelengths and %d indices, at least %d are needed", len(lambda), len(index), kkSmallest)
	}
	for i, l := range lambda {
		if _, err := photonEnergy(l); err != nil {
			return bad("wavelength %d is %g nm", i, l)
		}
		if i > 0 && !(nmEV/l < nmEV/lambda[i-1]) {
			return bad("wavelength %d, %g nm, does not exceed the one before", i, l)
		}
		if n := index[i]; !finite(n) || real(n) < 0 || imag(n) < 0 {
			return bad("index %d is %g", i, n)
		}
	}
	if !(s.Low >= 0 && s.High >= s.Low) || math.IsInf(s.High, 0) {
		return bad("compare within %g-%g nm", s.Low, s.High)
	}
	if !(s.Anchor >= 0) || math.IsInf(s.Anchor, 0) {
		return bad("anchor %g nm", s.Anchor)
	}
	return nil
}

// kkTransform integrates k over the photon energy, cell by cell.
type kkTransform struct {
	e, k, slope []float64 // energies ascending (eV), k and its slope there
	x, wk       []float64 // nodes of all cells, weight times k
}

func newKKTransform(lambda []float64, index []complex128) *kkTransform {
	n := len(lambda)
	t := &kkTransform{e: make([]float64, n), k: make([]float64, n), slope: make([]float64, n),
		x: make([]float64, (n-1)*kkNodes), wk: make([]float64, (n-1)*kkNodes)}
	for i, l := range lambda {
		t.e[n-1-i], t.k[n-1-i] = nmEV/l, imag(index[i])
	}
	var f interp.AkimaSpline
	if err := f.Fit(t.e, t.k); err != nil {
		panic("nk: checked table refused: " + err.Error())
	}
	for i, e := range t.e {
		t.slope[i] = f.PredictDerivative(e)
	}
	for c := range n - 1 {
		at := c * kkNodes
		x, w := t.x[at:at+kkNodes], t.wk[at:at+kkNodes]
		quad.Legendre{}.FixedLocations(x, w, t.e[c], t.e[c+1])
		p := t.cubic(c)
		for j := range x {
			u := (x[j] - t.e[c]) / (t.e[c+1] - t.e[c])
			w[j] *= p[0] + u*(p[1]+u*(p[2]+u*p[3]))
		}
	}
	return t
}

// cubic returns the coefficients of k in cell c over u = 0..1.
func (t *kkTransform) cubic(c int) [4]float64 {
	h := t.e[c+1] - t.e[c]
	d, s0, s1 := t.k[c+1]-t.k[c], h*t.slope[c], h*t.slope[c+1]
	return [4]float64{t.k[c], s0, 3*d - 2*s0 - s1, s0 + s1 - 2*d}
}

// at returns P ∫ x k/(x² - E²) dx at E = e[i]. With
// x/(x² - E²) = [1/(x - E) + 1/(x + E)]/2 only the first part has a pole.
func (t *kkTransform) at(i int) float64 {
	e := t.e[i]
	sum := 0.0
	for c := range len(t.e) - 1 {
		a, b := t.e[c], t.e[c+1]
		x, wk := t.x[c*kkNodes:(c+1)*kkNodes], t.wk[c*kkNodes:(c+1)*kkNodes]
		if max(a-e, e-b) >= b-a {
			for j, v := range x {
				sum += wk[j] * v / ((v - e) * (v + e))
			}
			continue
		}
		for j, v := range x {
			sum += wk[j] / (2 * (v + e))
		}
		sum += t.pole(c, e) / 2
	}
	return sum
}

// pole returns P ∫ k/(x - E) dx over cell c, close to E or next to it. With
// k = P(u) and E at u = v, P(u) = P(v) + (u - v) Q(u), so the integral is
// P(v) log|(b - E)/(a - E)| + ∫ Q du. Where E is an end of the cell the infinite
// logarithm is left out: the next cell has it with the other sign.
func (t *kkTransform) pole(c int, e float64) float64 {
	a, b := t.e[c], t.e[c+1]
	p := t.cubic(c)
	v := (e - a) / (b - a)
	l := 0.0
	if e != b {
		l += math.Log(math.Abs(b - e))
	}
	if e != a {
		l -= math.Log(math.Abs(a - e))
	}
	return (p[0]+v*(p[1]+v*(p[2]+v*p[3])))*l + p[1] + p[2]*(0.5+v) + p[3]*(1.0/3+v*(0.5+v))
}

// missing returns the integral at E = e[i] over what the table lacks: at
// wavelengths below it (energies above b) with k = k(b) (b/x)³, and at those
// above it (energies below a) with k = k(a).
func (t *kkTransform) missing(i int) (below, above float64) {
	last := len(t.e) - 1
	e, a, b := t.e[i], t.e[0], t.e[last]
	// ∫ b³/(x² (x² - E²)) dx from b = (b²/E²) [atanh(u)/u - 1] with u = E/b
	u := e / b
	f := math.Atanh(u)/u - 1
	if u < 1e-3 {
		f = u * u / 3
	}
	below = t.k[last] * f / (u * u)
	// ∫ x/(x² - E²) dx from 0 to a
	above = t.k[0] / 2 * math.Log1p(-(a/e)*(a/e))
	return below, above
}
