package spectrum

import (
	"math"
	"sort"

	"gonum.org/v1/gonum/integrate/quad"
)

// degree of the interpolating polynomial of a panel; its nodes are 0..degree.
const degree = 16

// momentNodes is the number of Gauss nodes that integrate, on one straight
// piece of the spectrum, wavelength times spectrum times polynomial exactly:
// degree 18, of 19 that ten nodes are good for.
const momentNodes = 10

// chebyshev holds what all panels share.
type chebyshev struct {
	node    [degree + 1]float64               // on -1..1, ascending
	to8     [degree / 4][degree/4 + 1]float64 // from every fourth node to those that every second adds
	to16    [degree / 2][degree/2 + 1]float64 // from every second node to those that all add
	weights [degree + 1][degree + 1]float64   // from moments to weights
	gauss   [momentNodes]float64              // nodes on -1..1
	gaussW  [momentNodes]float64
}

func newChebyshev() *chebyshev {
	c := new(chebyshev)
	for k := range c.node {
		c.node[k] = -math.Cos(math.Pi * float64(k) / degree)
	}
	c.node[0], c.node[degree/2], c.node[degree] = -1, 0, 1
	for i := range c.to8 {
		c.lagrange(c.to8[i][:], 4, c.node[4*i+2])
	}
	for i := range c.to16 {
		c.lagrange(c.to16[i][:], 2, c.node[2*i+1])
	}
	// The interpolant is Σ'' c_k T_k with c_k = 2/n Σ'' f_j cos(πkj/n), '' halving the
	// first and last term (J. C. Mason, D. C. Handscomb, Chebyshev Polynomials
	// (2003), section 6.3, from memory; the nodes count from -1 here).
	half := func(k int) float64 {
		if k == 0 || k == degree {
			return 0.5
		}
		return 1
	}
	for j := range c.weights {
		for k := range c.weights[j] {
			// The argument is reduced so that the cosine is that of a small angle.
			angle := math.Pi * float64(k*(degree-j)%(2*degree)) / degree
			c.weights[j][k] = 2.0 / degree * half(j) * half(k) * math.Cos(angle)
		}
	}
	quad.Legendre{}.FixedLocations(c.gauss[:], c.gaussW[:], -1, 1)
	return c
}

// lagrange stores the factors that take the values at every step-th node to the
// value at x, by the product formula.
func (c *chebyshev) lagrange(dst []float64, step int, x float64) {
	for i := range dst {
		dst[i] = 1
		for j := range dst {
			if j != i {
				dst[i] *= (x - c.node[j*step]) / (c.node[i*step] - c.node[j*step])
			}
		}
	}
}

// safety is the factor on the convergence rate of a panel, see Sampler. Without
// it the bound fails where degree 4 is worse than the sequence suggests.
const safety = 4

// panel is one piece of the range.
type panel struct {
	lo, hi float64 // nm
	at     int     // of its values in the store
	flux   float64 // integral of the spectrum
}

// place returns room for the values and the bounds of a panel.
func (p *Sampler) place() int {
	if n := len(p.free); n > 0 {
		at := p.free[n-1]
		p.free = p.free[:n-1]
		return at
	}
	at, n := len(p.store), (degree+2)*p.n
	if at+n <= cap(p.store) {
		p.store = p.store[:at+n]
	} else {
		p.store = append(p.store, make([]float64, n)...)
	}
	return at
}

// node returns the shares at node k.
func (p *Sampler) node(q *panel, k int) []float64 {
	return p.store[q.at+k*p.n:][:p.n:p.n]
}

// bound returns the bound of share j, which stands after the nodes.
func (p *Sampler) bound(q *panel, j int) float64 {
	return p.store[q.at+(degree+1)*p.n+j]
}

// wavelength of node k.
func (p *Sampler) wavelength(q *panel, k int) float64 {
	switch k {
	case 0:
		return q.lo
	case degree:
		return q.hi
	}
	return 0.5*q.lo + 0.5*q.hi + 0.5*(q.hi-q.lo)*p.table.node[k]
}

// fill evaluates the function at the nodes of a panel other than the ends and
// the middle, and sets the bounds.
func (p *Sampler) fill(run *sampling, q *panel) error {
	for k := 1; k < degree; k++ {
		if k == degree/2 {
			continue
		}
		if err := run.call(p.wavelength(q, k), p.node(q, k)); err != nil {
			return err
		}
	}
	q.flux = math.Abs(p.flux.upTo(q.hi) - p.flux.upTo(q.lo))
	c, n := p.table, p.n
	for j := range n {
		v := p.store[q.at+j:]
		e4, e8 := 0.0, 0.0
		for i := range c.to8 {
			e4 = max(e4, math.Abs(v[(4*i+2)*n]-strided(c.to8[i][:], v, 4*n)))
		}
		for i := range c.to16 {
			e8 = max(e8, math.Abs(v[(2*i+1)*n]-strided(c.to16[i][:], v, 2*n)))
		}
		e := e8
		if safety*e8 < e4 {
			e = e8 * (safety * e8 / e4)
		}
		p.store[q.at+(degree+1)*n+j] = e * q.flux
	}
	return nil
}

// strided is the sum of factors times every stride-th value.
func strided(factors, v []float64, stride int) float64 {
	sum := 0.0
	for i, f := range factors {
		sum += f * v[i*stride]
	}
	return sum
}

// roundings bounds the relative rounding error of an integral.
const roundings = 1e-15

// finish writes the result: panels meet in one wavelength.
func (p *Sampler) finish(dst *Samples, s Spectrum) {
	count := degree*len(p.panels) + 1
	dst.Wavelength, dst.Weights = fit(dst.Wavelength, count), fit(dst.Weights, count)
	dst.Integral, dst.Bound = fit(dst.Integral, p.n), fit(dst.Bound, p.n)
	if cap(dst.Share) < p.n {
		dst.Share = append(dst.Share[:cap(dst.Share)], make([][]float64, p.n-cap(dst.Share))...)
	}
	dst.Share = dst.Share[:p.n]
	for j := range dst.Share {
		dst.Share[j] = fit(dst.Share[j], count)
	}
	clear(dst.Weights)
	l := newLine(s.Wavelength, s.Irradiance, p.panels[0].lo)
	for i := range p.panels {
		q := &p.panels[i]
		p.addWeights(dst.Weights[degree*i:][:degree+1], q, &l)
		for k := range degree + 1 {
			dst.Wavelength[degree*i+k] = p.wavelength(q, k)
			for j, v := range p.node(q, k) {
				dst.Share[j][degree*i+k] = v
			}
		}
	}
	for j := range p.n {
		sum, size, bound := 0.0, 0.0, 0.0
		for i, w := range dst.Weights {
			sum += w * dst.Share[j][i]
			size += math.Abs(w * dst.Share[j][i])
		}
		for i := range p.panels {
			bound += p.bound(&p.panels[i], j)
		}
		dst.Integral[j], dst.Bound[j] = sum, bound+roundings*size
	}
}

// addWeights adds the integrals of the spectrum times each node's Lagrange
// polynomial: the moments with Chebyshev polynomials, transformed.
func (p *Sampler) addWeights(dst []float64, q *panel, l *line) {
	c := p.table
	var moment [degree + 1]float64
	for a := q.lo; a < q.hi; {
		b := min(q.hi, l.end())
		// Straight on the piece, so known from its ends (see cells.next).
		ea, eb := l.at(a)*0.5*(b-a), l.at(b)*0.5*(b-a)
		xa, xb := ((a-q.lo)-(q.hi-a))/(q.hi-q.lo), ((b-q.lo)-(q.hi-b))/(q.hi-q.lo)
		for i, g := range c.gauss {
			u := 0.5 + 0.5*g
			f := c.gaussW[i] * ((1-u)*ea + u*eb)
			if p.Weighting == Photons {
				f *= ((1-u)*a + u*b) * currentPerIrradiance
			}
			x := (1-u)*xa + u*xb
			t0, t1 := 1.0, x
			for k := range moment {
				moment[k] += f * t0
				t0, t1 = t1, 2*x*t1-t0
			}
		}
		l.pass(b)
		a = b
	}
	for j := range dst {
		for k, m := range moment {
			dst[j] += c.weights[j][k] * m
		}
	}
}

// cumulative is the integral of a spectrum from its first row on.
type cumulative struct {
	s       Spectrum
	photons bool
	sum     []float64 // at each row
}

func (c *cumulative) fill(s Spectrum, weighting Weighting) {
	c.s, c.photons = s, weighting == Photons
	c.sum = fit(c.sum, len(s.Wavelength))
	c.sum[0] = 0
	for i := 1; i < len(c.sum); i++ {
		c.sum[i] = c.sum[i-1] + c.piece(i, s.Wavelength[i])
	}
}

// piece integrates from row i-1 to a wavelength before row i or at it.
func (c *cumulative) piece(i int, to float64) float64 {
	cell := cells{spectrum: line{c.s.Wavelength, c.s.Irradiance, i}, photons: c.photons}
	left, right := cell.next(c.s.Wavelength[i-1], to)
	return left + right
}

func (c *cumulative) upTo(l float64) float64 {
	i := sort.SearchFloat64s(c.s.Wavelength, l)
	if c.s.Wavelength[i] == l {
		return c.sum[i]
	}
	return c.sum[i-1] + c.piece(i, l)
}
