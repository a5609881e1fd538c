package nk

import (
	"fmt"
	"math"
)

// Published is a dispersion formula with published coefficients.
type Published struct {
	Name       string // of this package, unique
	Material   string
	Source     string  // paper of the coefficients
	Conditions string  // temperature, ray, how the figures are known if not read
	Low, High  float64 // range of validity, vacuum wavelength in nm, ends included
	Model      Model   // the formula, without the range
}

// Index returns N at a vacuum wavelength in nm; ErrRange outside Low..High,
// ErrInput if the wavelength is not finite and positive.
func (p Published) Index(lambda float64) (complex128, error) {
	if _, err := photonEnergy(lambda); err != nil {
		return 0, err
	}
	if lambda < p.Low || lambda > p.High {
		return 0, fmt.Errorf("nk: %s: %g nm is outside %g-%g nm: %w", p.Name, lambda, p.Low, p.High, ErrRange)
	}
	return p.Model.Index(lambda)
}

// Formula returns the published formula of that name, or ErrUnknown. The value
// is the caller's own: its parameters may be changed.
func Formula(name string) (Published, error) {
	for _, f := range published() {
		if f.Name == name {
			return f, nil
		}
	}
	return Published{}, fmt.Errorf("nk: no formula named %q: %w", name, ErrUnknown)
}

// Formulas returns the names of all published formulas, transparent materials
// first.
func Formulas() []string {
	var names []string
	for _, f := range published() {
		names = append(names, f.Name)
	}
	return names
}

func published() []Published { return append(sellmeierFormulas(), otherFormulas()...) }

func sellmeierFormulas() []Published {
	const (
		ordinary      = "ordinary ray"
		extraordinary = "extraordinary ray"
	)
	return []Published{
		{"sio2_malitson1965", "fused silica", "I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965)", "20 °C; fit 210-3710 nm, verified to 6700 nm", 210, 6700,
			&Sellmeier{1, []float64{0.6961663, 0.4079426, 0.8974794}, []float64{0.0684043, 0.1162414, 9.896161}}},
		{"mgf2_o_dodge1984", "magnesium fluoride", "M. J. Dodge, Appl. Opt. 23, 1980 (1984)", ordinary + ", 19 °C", 200, 7000,
			&Sellmeier{1, []float64{0.48755108, 0.39875031, 2.3120353}, []float64{0.04338408, 0.09461442, 23.793604}}},
		{"mgf2_e_dodge1984", "magnesium fluoride", "M. J. Dodge, Appl. Opt. 23, 1980 (1984)", extraordinary + ", 19 °C", 200, 7000,
			&Sellmeier{1, []float64{0.41344023, 0.50497499, 2.4904862}, []float64{0.03684262, 0.09076162, 23.771995}}},
		{"al2o3_o_malitson1962", "sapphire", "I. H. Malitson, J. Opt. Soc. Am. 52, 1377 (1962)", ordinary + ", 24 °C", 265.2, 5577,
			&Sellmeier{1, []float64{1.023798, 1.058264, 5.280792}, []float64{0.06144821, 0.1106997, 17.92656}}},
		{"al2o3_o_malitson1972", "sapphire", "I. H. Malitson and M. J. Dodge, J. Opt. Soc. Am. 62, 1405 (1972)", ordinary + "; range from memory", 200, 5000,
			&Sellmeier{1, []float64{1.43134930, 0.65054713, 5.3414021}, []float64{0.0726631, 0.1193242, 18.028251}}},
		{"al2o3_e_malitson1972", "sapphire", "I. H. Malitson and M. J. Dodge, J. Opt. Soc. Am. 62, 1405 (1972)", extraordinary + "; range from memory", 200, 5000,
			&Sellmeier{1, []float64{1.5039759, 0.55069141, 6.5927379}, []float64{0.0740288, 0.1216529, 20.072248}}},
		{"si3n4_luke2015", "silicon nitride, LPCVD film", "K. Luke et al., Opt. Lett. 40, 4823 (2015)", "stoichiometric film", 310, 5504,
			&Sellmeier{1, []float64{3.0249, 40314}, []float64{0.1353406, 1239.842}}},
		{"si3n4_philipp1973", "silicon nitride", "H. R. Philipp, J. Electrochem. Soc. 120, 295 (1973); formula by T. Bååk, Appl. Opt. 21, 1069 (1982)", "film", 207, 1240,
			&Sellmeier{1, []float64{2.8939}, []float64{0.13967}}},
		{"inp_pettit1965", "indium phosphide, transparent range", "G. D. Pettit and W. J. Turner, J. Appl. Phys. 36, 2081 (1965); formula from Handbook of Optics, 2nd ed., vol. 2", "room temperature", 950, 10000,
			&Sellmeier{7.255, []float64{2.316, 2.765}, []float64{0.6263, 32.935}}},
		{"tio2_o_devore1951", "titanium dioxide, rutile", "J. R. DeVore, J. Opt. Soc. Am. 41, 416 (1951)", ordinary, 430, 1530,
			poleSum(5.913, []float64{0.2441}, []float64{math.Sqrt(0.0803)})},
		{"zns_debenham1984", "zinc sulphide, cubic", "M. Debenham, Appl. Opt. 23, 2238 (1984); formula by C. A. Klein, Appl. Opt. 25, 1873 (1986)", "room temperature", 405, 13000,
			poleSum(8.393, []float64{0.14383, 4430.99}, []float64{0.2421, 36.71})},
	}
}

func otherFormulas() []Published {
	return []Published{
		{"glass_rubin1985", "soda-lime glass, clear", "M. Rubin, Sol. Energy Mater. 12, 275 (1985)", "n only: the glass's k is not in the formula", 310, 4600,
			&Herzberger{A: 1.5130, B: 0.003962, D: -0.003169}},
		{"si_edwards1980", "silicon, infrared", "D. F. Edwards and E. Ochoa, Appl. Opt. 19, 4130 (1980)", "room temperature", 2437.3, 25000,
			&Herzberger{A: 3.41983, B: 0.159906, C: -0.123109, D: 1.26878e-6, E: -1.95104e-9, Pole: 0.028}},
		{"asi_jellison1996", "amorphous silicon", "G. E. Jellison and F. A. Modine, Appl. Phys. Lett. 69, 371 (1996), erratum 69, 2137 (1996)",
			"parameters from memory, not read; a fit to the table asi_pierce1972 gives nearly the same, and the range is that table's", 206.6, 2066,
			&TaucLorentz{A: 122, E0: 3.45, C: 2.54, Eg: 1.20, EpsInf: 1.15}},
	}
}

// poleSum turns the form n² = a + sum of p/(lambda² - c²) with p in µm² into
// Sellmeier's: p/(lambda² - c²) = (p/c²) [lambda²/(lambda² - c²) - 1].
func poleSum(a float64, p, c []float64) *Sellmeier {
	s := &Sellmeier{Offset: a, C: c}
	for i := range p {
		b := p[i] / (c[i] * c[i])
		s.B = append(s.B, b)
		s.Offset -= b
	}
	return s
}
