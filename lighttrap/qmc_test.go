package lighttrap

import (
	"math"
	"testing"
)

// order returns the multiplicative order of x modulo the polynomial.
func order(polynomial uint32, degree int) int {
	state := uint32(1)
	for k := 1; k < 1<<20; k++ {
		state <<= 1
		if state>>degree&1 == 1 {
			state ^= polynomial
		}
		if state == 1 {
			return k
		}
	}
	return -1
}

// TestSobolTable: the polynomials are primitive (x has the order 2^s - 1), the
// initial integers odd and below 2^i: what a Sobol sequence needs (I. M. Sobol,
// USSR Comput. Math. Math. Phys. 7, 86 (1967)). No two dimensions share a polynomial.
func TestSobolTable(t *testing.T) {
	seen := map[[2]uint32]bool{}
	for d, row := range sobolTable {
		s := int(row.degree)
		polynomial := 1<<s | row.coefficients<<1 | 1
		if got := order(polynomial, s); got != 1<<s-1 {
			t.Errorf("dimension %d: polynomial %b has order %d", d+2, polynomial, got)
		}
		key := [2]uint32{row.degree, row.coefficients}
		if seen[key] {
			t.Errorf("dimension %d: polynomial comes twice", d+2)
		}
		seen[key] = true
		for i, m := range row.m {
			if i < s && (m%2 == 0 || m >= 2<<i) || i >= s && m != 0 {
				t.Errorf("dimension %d: integer %d is %d", d+2, i+1, m)
			}
		}
	}
}

// TestStratified: the first 2^k points of every dimension have one in each of 2^k
// equal intervals, and in each box of the first two dimensions of that volume,
// also after scrambling; and their mean is that of the interval within the
// error that this allows.
func TestStratified(t *testing.T) {
	const k = 10
	var q sequence
	q.start(42, 3)
	var points [1 << k][sobolDims]float64
	for i := range points {
		if i > 0 {
			q.next()
		}
		for d := range sobolDims {
			points[i][d] = q.at(d)
		}
		if u := q.at(sobolDims); !(u > 0 && u < 1) {
			t.Fatalf("later choice %g", u)
		}
	}
	for d := range sobolDims {
		var seen [1 << k]bool
		for i := range points {
			cell := int(points[i][d] * (1 << k))
			if seen[cell] {
				t.Fatalf("dimension %d: interval %d holds two points", d, cell)
			}
			seen[cell] = true
		}
	}
	for a := 0; a <= k; a++ {
		var seen [1 << k]bool
		for i := range points {
			cell := int(points[i][0]*float64(int(1)<<a))<<(k-a) | int(points[i][1]*float64(int(1)<<(k-a)))
			if seen[cell] {
				t.Fatalf("box %d of 2^%d by 2^%d holds two points", cell, a, k-a)
			}
			seen[cell] = true
		}
	}
}

// TestUnbiased: over many seeds, each choice of each ray is uniform: mean 1/2
// and variance 1/12, and choices of different numbers are uncorrelated.
func TestUnbiased(t *testing.T) {
	const seeds = 20000
	for _, ray := range []int{0, 1, 5} {
		sum := [3]float64{}
		square, cross := 0.0, 0.0
		for seed := range uint64(seeds) {
			var q sequence
			q.start(seed, 0)
			for range ray {
				q.next()
			}
			a, b, c := q.at(0), q.at(7), q.at(sobolDims)
			sum[0], sum[1], sum[2] = sum[0]+a, sum[1]+b, sum[2]+c
			square += (a - 0.5) * (a - 0.5)
			cross += (a - 0.5) * (b - 0.5)
		}
		// Standard deviations of a mean of uniform numbers: 1/√12n; of the others
		// √(1/180)/√n and 1/12√n. Bounds are four of them.
		n := math.Sqrt(seeds)
		for i, s := range sum {
			if dev := math.Abs(s/seeds - 0.5); dev > 4/math.Sqrt(12)/n {
				t.Errorf("ray %d: mean of choice %d off by %g", ray, i, dev)
			}
		}
		if dev := math.Abs(square/seeds - 1.0/12); dev > 4*math.Sqrt(1.0/180)/n {
			t.Errorf("ray %d: variance off by %g", ray, dev)
		}
		if dev := math.Abs(cross / seeds); dev > 4.0/12/n {
			t.Errorf("ray %d: correlation %g", ray, dev)
		}
	}
}
