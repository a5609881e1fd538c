package lighttrap

import "math"

// DiffuseReflectance returns the Fresnel reflectance of isotropic unpolarised
// light at the plane interface between vacuum and a lossless medium of index n,
// from outside and from inside (total reflection included), relative accuracy
// 1e-14 for every n, also next to 1.
//
// Source: J. W. T. Walsh, Dep. Sci. Ind. Res. Illum. Tech. Pap. 2 (1926) and S.
// Q. Duntley, J. Opt. Soc. Am. 32, 61 (1942), from memory; checked by quadrature.
// The inside value follows from reciprocity: 1 - (1 - outside)/n².
//
// Special cases: NaN unless n is finite and >= 1; for the ratio of two media take
// n2/n1 >= 1.
func DiffuseReflectance(n float64) (outside, inside float64) {
	if !(n >= 1) || math.IsInf(n, 1) {
		return math.NaN(), math.NaN()
	}
	if n == 1 {
		return 0, 0
	}
	if n >= closedFrom {
		outside = diffuseClosed(n)
		return outside, 1 - (1-outside)/n/n
	}
	outside = diffuseSeries(n)
	// Does not cancel for n near 1.
	return outside, ((n-1)*(n+1) + outside) / (n * n)
}

// closedFrom is the index below which the terms of the closed form cancel by so
// much that the series is better.
const closedFrom = 2.5

// diffuseClosed is the closed form in p = 1/n and q = p².
func diffuseClosed(n float64) float64 {
	p := 1 / n
	q := p * p
	return 0.5 + (1-p)*(3+p)/(6*(1+p)*(1+p)) +
		(1-q)*(1-q)/((1+q)*(1+q)*(1+q))*math.Log1p(-2/(n+1)) -
		2*p*(1+2*p-q)/((1+q)*(1-q*q)) +
		8*q*(1+q*q)/((1+q)*(1-q*q)*(1-q*q))*math.Log(n)
}

// diffuseSeries is the same as a sum of positive terms.
//
// derived: with cosθ1 = g sinh u, n cosθ2 = g cosh u, g² = n² - 1 and v = exp(-2u)
// the amplitudes are rs = -v and rp = (κ-v)/(1-κv), κ = (n²-1)/(n²+1); normal
// incidence is v = ν = (n-1)/(n+1), grazing v = 1, and the weight 2 cosθ1 dcosθ1
// is g²/2 (1-v²)/v² dv. For s light the integral is elementary; for p light
// 1/(1-κv)² = Σ (k+1) (κv)^k leaves the moments M_j = ∫ v^j dv from ν to 1.
func diffuseSeries(n float64) float64 {
	g2 := (n - 1) * (n + 1)
	kappa, nu := g2/(n*n+1), (n-1)/(n+1)
	s := (1 - nu) * (1 - nu) * (2 + nu) / 3
	// m holds M_(k-2) to M_(k+2), power is ν^(k+3).
	power := nu * nu * nu
	m := [5]float64{1/nu - 1, -math.Log(nu), 1 - nu, (1 - nu*nu) / 2, (1 - power) / 3}
	p, c := 0.0, 1.0
	for k := 0.0; k < 400; k++ {
		term := (k + 1) * c * (kappa*kappa*(m[0]-m[2]) - 2*kappa*(m[1]-m[3]) + (m[2] - m[4]))
		p += term
		if term < 1e-18*p {
			break
		}
		c *= kappa
		power *= nu
		copy(m[:], m[1:])
		m[4] = (1 - power) / (k + 4)
	}
	return g2 / 8 * (s + p)
}

// DiffuseMean returns the mean of a quantity over isotropic light, the integral
// of 2 c f(c) over c = cosθ from 0 to 1, for f given at ascending cosines and
// linear between them. The first cosine must be 0 and the last 1.
//
// Special case: NaN for lengths that differ and cosines that are not so.
func DiffuseMean(cos, f []float64) float64 {
	n := len(cos)
	if n < 2 || len(f) != n || cos[0] != 0 || cos[n-1] != 1 {
		return math.NaN()
	}
	sum := 0.0
	for i := 1; i < n; i++ {
		a, b := cos[i-1], cos[i]
		if !(b > a) {
			return math.NaN()
		}
		// Simpson's rule is exact for the product of two linear functions.
		mid := 0.5 * (a + b)
		sum += (b - a) / 3 * (a*f[i-1] + 2*mid*(f[i-1]+f[i]) + b*f[i])
	}
	return sum
}
