package absorb

import "fmt"

// Histogram stores in dst the generation rate in cm^-3 s^-1 of every cell of the
// mesh from absorption that is known only as shares absorbed in the cells of
// another mesh, for example of a wafer through which rays were traced.
//
// edges are the boundaries of those cells in nm, ascending, from the lit face.
// shares holds their absorbed shares of the incident photons, one wavelength after
// the other: shares[w*(len(edges)-1)+c] for the wavelength w and the cell c.
// Within such a cell the density is taken as constant, so that every photon is kept
// whatever the meshes. dst is allocated when nil and must have one value less than
// mesh otherwise.
//
// Errors wrap [ErrInput], or [ErrRange] if the mesh leaves the histogram.
func (g *Generator) Histogram(dst, mesh, photons, edges, shares []float64) ([]float64, error) {
	dst, err := g.start(dst, mesh, photons, len(photons))
	if err == nil {
		err = g.collect(photons, edges, shares)
	}
	if err == nil && mesh[0] < edges[0]*(1-roundingOfDepth) {
		err = fmt.Errorf("mesh begins at %g nm, histogram at %g nm: %w", mesh[0], edges[0], ErrRange)
	}
	if err == nil {
		err = checkInside("histogram", mesh[len(mesh)-1], edges[len(edges)-1])
	}
	if err != nil {
		return nil, fmt.Errorf("absorb: generation: %w", err)
	}
	clear(dst)
	last := len(edges) - 2
	for i, c := 0, 0; i < len(dst); i++ {
		for c < last && edges[c+1] <= mesh[i] {
			c++
		}
		for ; ; c++ {
			// The first and the last cell of the histogram take what rounding leaves over.
			lo, hi := max(mesh[i], edges[c]), min(mesh[i+1], edges[c+1])
			if c == 0 {
				lo = mesh[i]
			}
			if c == last {
				hi = mesh[i+1]
			}
			dst[i] += g.counts[c] * ((hi - lo) / (edges[c+1] - edges[c]))
			if c == last || edges[c+1] >= mesh[i+1] {
				break
			}
		}
		dst[i] *= nmPerCM / g.width[i]
	}
	return finish(dst)
}

// collect sums the photons absorbed in each cell of a histogram over the
// wavelengths.
func (g *Generator) collect(photons, edges, shares []float64) error {
	if err := checkMesh("histogram", edges); err != nil {
		return err
	}
	cells := len(edges) - 1
	if err := checkAmounts("absorbed share", "", shares, len(photons)*cells); err != nil {
		return err
	}
	if cap(g.counts) < cells {
		g.counts = make([]float64, cells)
	}
	g.counts = g.counts[:cells]
	clear(g.counts)
	for w, n := range photons {
		sum := 0.0
		for c, s := range shares[w*cells : (w+1)*cells] {
			g.counts[c] += n * s
			sum += s
		}
		if sum > 1+excess {
			return fmt.Errorf("wavelength %d: absorbed shares add up to %g: %w", w, sum, ErrInput)
		}
	}
	return nil
}
