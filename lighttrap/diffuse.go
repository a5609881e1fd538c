package lighttrap

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// DiffuseReflectance returns the Fresnel reflectance of isotropic unpolarised
// light at the plane interface between vacuum and a lossless medium of index n,
// from outside and from inside (total reflection included), relative accuracy
// about 1e-14.
//
// Source: J. W. T. Walsh, Dep. Sci. Ind. Res. Illum. Tech. Pap. 2 (1926) and S.
// Q. Duntley, J. Opt. Soc. Am. 32, 61 (1942), from memory; checked by quadrature.
// The inside value follows from reciprocity: 1 - (1 - outside)/n².
//
// Special cases: NaN unless n >= 1; for the ratio of two media take n2/n1 >= 1.
func DiffuseReflectance(n float64) (outside, inside float64) {
	if !(n >= 1) || math.IsInf(n, 1) {
		return math.NaN(), math.NaN()
	}
	if n == 1 {
		return 0, 0
	}
	n2 := n * n
	if n >= closedFrom {
		n4 := n2 * n2
		outside = 0.5 + (n-1)*(3*n+1)/(6*(n+1)*(n+1)) +
			n2*(n2-1)*(n2-1)/((n2+1)*(n2+1)*(n2+1))*math.Log((n-1)/(n+1)) -
			2*n*n2*(n2+2*n-1)/((n2+1)*(n4-1)) +
			8*n4*(n4+1)/((n2+1)*(n4-1)*(n4-1))*math.Log(n)
	} else {
		outside = 0.5 * (diffuseS(n) + diffuseP(n))
	}
	// (n² - 1 + outside)/n² does not cancel for n near 1.
	return outside, ((n-1)*(n+1) + outside) / n2
}

// closedFrom is the index below which the terms of the closed form cancel.
const closedFrom = 2

// diffuseS and diffuseP are the reflectances of s and p light from outside.
//
// derived: with q1 = cosθ1 = g sinh u, q2 = n cosθ2 = g cosh u, g² = n² - 1 and
// v = exp(-2u) the amplitudes are rs = -v and rp = (κ-v)/(1-κv), κ = (n²-1)/(n²+1);
// normal incidence is ν = (n-1)/(n+1), grazing 1.
func diffuseS(n float64) float64 {
	nu := (n - 1) / (n + 1)
	return (n - 1) * (n + 1) * (1 - nu) * (1 - nu) * (2 + nu) / 12
}

func diffuseP(n float64) float64 {
	g2 := (n - 1) * (n + 1)
	kappa := g2 / (n*n + 1)
	lo := math.Log((n - 1) / (n + 1))
	return g2 / 4 * quad.Fixed(func(y float64) float64 {
		v := math.Exp(y)
		r := (kappa - v) / (1 - kappa*v)
		return (1 - v*v) / v * r * r
	}, lo, 0, 96, quad.Legendre{}, 0)
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
