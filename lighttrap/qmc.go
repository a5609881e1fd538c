package lighttrap

import (
	"math/bits"
)

// sobolDims is the number of random choices of a ray that come from the
// low-discrepancy sequence; later ones come from the generator of the ray.
const sobolDims = 20

// sobolBits is the length of the sequence in bits, and so the largest number of
// rays of one repetition: 2^24.
const sobolBits = 24

// sobolTable holds, for dimensions 2 to 20, the coefficients of a primitive
// polynomial over GF(2) (without its first and last, always 1) and the first
// direction integers. Source: S. Joe, F. Y. Kuo, SIAM J. Sci. Comput. 30, 2635
// (2008), from memory; a test proves the polynomials primitive and the stratification.
var sobolTable = [sobolDims - 1]struct {
	degree, coefficients uint32
	m                    [7]uint32
}{
	{1, 0, [7]uint32{1}},
	{2, 1, [7]uint32{1, 3}},
	{3, 1, [7]uint32{1, 3, 1}},
	{3, 2, [7]uint32{1, 1, 1}},
	{4, 1, [7]uint32{1, 1, 3, 3}},
	{4, 4, [7]uint32{1, 3, 5, 13}},
	{5, 2, [7]uint32{1, 1, 5, 5, 17}},
	{5, 4, [7]uint32{1, 1, 5, 5, 5}},
	{5, 7, [7]uint32{1, 1, 7, 11, 19}},
	{5, 11, [7]uint32{1, 1, 5, 1, 1}},
	{5, 13, [7]uint32{1, 1, 1, 3, 11}},
	{5, 14, [7]uint32{1, 3, 5, 5, 31}},
	{6, 1, [7]uint32{1, 3, 3, 9, 7, 49}},
	{6, 13, [7]uint32{1, 1, 1, 15, 21, 21}},
	{6, 16, [7]uint32{1, 3, 1, 13, 27, 49}},
	{6, 19, [7]uint32{1, 1, 1, 15, 7, 5}},
	{6, 22, [7]uint32{1, 3, 1, 15, 13, 25}},
	{6, 25, [7]uint32{1, 1, 5, 5, 19, 61}},
	{7, 1, [7]uint32{1, 3, 7, 11, 23, 15, 103}},
}

// sobolDirections are the direction numbers with the first binary digit of the
// fraction in bit 0, the order that scramble works in.
var sobolDirections = func() (v [sobolBits][sobolDims]uint32) {
	for k := range sobolBits {
		v[k][0] = 1 << k
	}
	for d, row := range sobolTable {
		s := int(row.degree)
		var m [sobolBits]uint32
		copy(m[:], row.m[:s])
		for k := s; k < sobolBits; k++ {
			m[k] = m[k-s] ^ m[k-s]<<s
			for j := 1; j < s; j++ {
				if row.coefficients>>(s-1-j)&1 == 1 {
					m[k] ^= m[k-j] << j
				}
			}
		}
		for k, mk := range m {
			v[k][d+1] = bits.Reverse32(mk << (31 - k))
		}
	}
	return v
}()

// sequence makes the random choices of the rays of one repetition: a scrambled
// Sobol sequence for the first sobolDims of each ray, a generator seeded with
// the number of the ray for the others.
type sequence struct {
	point [sobolDims]uint32
	seed  [sobolDims]uint32
	shift [sobolDims]uint32
	base  uint64
	state uint64 // of the generator of the ray
	index uint32 // number of the ray
}

// golden is 2^64 over the golden ratio, the step of the generator.
const golden = 0x9e3779b97f4a7c15

// mix64 is the output function of the generator. Source: G. L. Steele, D. Lea,
// C. H. Flood, Proc. OOPSLA 2014, 453, in the variant of D. Stafford, from memory.
func mix64(z uint64) uint64 {
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}

// start begins a repetition.
func (q *sequence) start(seed, repetition uint64) {
	q.base = mix64(mix64(seed+golden) + repetition*golden)
	for d := range sobolDims {
		h := mix64(q.base + uint64(d+1)*golden)
		q.point[d], q.seed[d], q.shift[d] = 0, uint32(h), uint32(h>>32)
	}
	q.index = 0
	q.state = mix64(q.base ^ golden)
}

// next goes on to the next ray; the points come in the order of the Gray code.
func (q *sequence) next() {
	q.index++
	row := &sobolDirections[bits.TrailingZeros32(q.index)%sobolBits]
	for d := range q.point {
		q.point[d] ^= row[d]
	}
	q.state = mix64(q.base ^ uint64(q.index+1)*golden)
}

// at returns the random choice number dim of the ray, in (0, 1), uniformly
// distributed over the seeds. Within a repetition the choices of one number
// are scrambled digit by digit, each digit by a hash of those before it.
//
// Source: A. B. Owen, in Monte Carlo and Quasi-Monte Carlo Methods (1995), 299
// (nested scrambling); S. Laine, T. Karras, Comput. Graph. Forum 30, 1305 (2011)
// (by a hash); constants from B. Burley, J. Comput. Graph. Tech. 9, 1 (2020),
// from memory. The added digital shift makes every value equally likely
// whatever the quality of the hash.
func (q *sequence) at(dim int) float64 {
	if dim >= sobolDims {
		q.state += golden
		return (float64(mix64(q.state)>>12) + 0.5) / (1 << 52)
	}
	x := q.point[dim] + q.seed[dim]
	x ^= x * 0x6c50b47c
	x ^= x * 0xb82f1e52
	x ^= x * 0xc7afe638
	x ^= x * 0x8d22f6e6
	return (float64(bits.Reverse32(x)^q.shift[dim]) + 0.5) / (1 << 32)
}
