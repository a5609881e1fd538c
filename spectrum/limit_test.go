package spectrum

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
)

// TestConstants: the SI values (CODATA 2018 and 2022, read) and what follows from
// them (radiation constants printed by CODATA, read; more digits computed with 25
// digits).
func TestConstants(t *testing.T) {
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"h", planck, 6.62607015e-34}, {"c", light, 299792458}, {"e", charge, 1.602176634e-19}, {"k", boltzmann, 1.380649e-23},
		{"hc/e, nm eV", WavelengthOfEnergy, 1239.841984332003},
		{"first radiation constant, W m²", 2 * math.Pi * planck * light * light, 3.741771852192758e-16},
		{"first radiation constant for radiance", 2 * planck * light * light, 1.191042972397188e-16},
		{"second radiation constant, nm K", thermalWavelength, 0.01438776877503934 * nmPerMetre},
		{"thermal voltage at 298.15 K", boltzmann * 298.15 / charge, 0.02569257912},
		{"thermal voltage at 300 K", boltzmann * 300 / charge, 0.02585199979},
	} {
		tol := 1e-15
		if c.want < 0.03 && c.want > 0.02 {
			tol = 2e-10 // ten printed digits
		}
		near(t, c.name, c.got, c.want, tol)
	}
}

// TestPlanckPeaks: Wien's displacement law 2.897771955e-3 m K (CODATA, read), and
// λT = 3.669702865e-3 m K where the photon number peaks (computed).
func TestPlanckPeaks(t *testing.T) {
	const temperature = 5778
	for _, c := range []struct {
		name  string
		value func(l float64) float64
		want  float64 // m K
	}{
		{"radiance", func(l float64) float64 { return Radiance(l, temperature) }, 2.897771955e-3},
		{"photons", func(l float64) float64 { return l * Radiance(l, temperature) }, 3.669702865e-3},
	} {
		// The slope changes sign at the peak: differences of 0.1 nm on each side.
		peak := c.want * nmPerMetre / temperature
		slope := func(l float64) float64 { return c.value(l+0.1) - c.value(l-0.1) }
		lo, hi := peak-1, peak+1
		for range 60 {
			if mid := (lo + hi) / 2; slope(mid) > 0 {
				lo = mid
			} else {
				hi = mid
			}
		}
		// The third derivative moves the zero of the difference by about 0.1²/peak
		// relative to the peak, 4e-8; rounding of the slope by less.
		near(t, c.name, lo*temperature/nmPerMetre, c.want, 1e-7)
	}
}

func TestRadianceLimits(t *testing.T) {
	for _, c := range []struct{ l, temperature float64 }{{math.NaN(), 300}, {500, math.NaN()}, {0, 300}, {500, 0}, {-1, 300}, {math.Inf(1), 300}, {500, math.Inf(1)}} {
		if v := Radiance(c.l, c.temperature); !math.IsNaN(v) {
			t.Errorf("Radiance(%g, %g) = %g, want NaN", c.l, c.temperature, v)
		}
	}
	for _, c := range []struct{ l, temperature float64 }{{1e-300, 300}, {1, 1e-300}, {1e300, 1}, {1e-300, 1e-300}, {1e300, 1e-300}} {
		if v := Radiance(c.l, c.temperature); v != 0 {
			t.Errorf("Radiance(%g, %g) = %g, want 0", c.l, c.temperature, v)
		}
	}
	// Rayleigh-Jeans law 2ckT/λ⁴ at long wavelengths: x/2 is the next term.
	l, temperature := 1e12, 300.0
	want := 2 * light * boltzmann * temperature / math.Pow(l*metrePerNM, 4) * metrePerNM
	near(t, "Rayleigh-Jeans", Radiance(l, temperature), want*(1-thermalWavelength/(2*l*temperature)), 1e-9)
}

// energyCurrent is J0 by quadrature over photon energy, a way of its own:
// e 2π/(h³c²) ∫ A E²/(exp(E/kT)-1) dE with u = E/kT.
func energyCurrent(temperature, fromU, toU float64, absorptance func(l float64) float64) float64 {
	kt := boltzmann * temperature
	scale := 2 * math.Pi * charge / (planck * planck * planck * light * light) * kt * kt * kt * milliPerOne / cm2PerM2
	sum := 0.0
	const pieces = 400
	for i := range pieces {
		a, b := fromU+(toU-fromU)*float64(i)/pieces, fromU+(toU-fromU)*float64(i+1)/pieces
		sum += quad.Fixed(func(u float64) float64 {
			return u * u / math.Expm1(u) * absorptance(planck*light/(u*kt)*nmPerMetre)
		}, a, b, 12, quad.Legendre{}, 0)
	}
	return scale * sum
}

func TestRadiativeCurrent(t *testing.T) {
	one := func(float64) float64 { return 1 }
	for _, temperature := range []float64{3, 250, 298.15, 300, 600, 6000} {
		for _, gap := range []float64{0.05, 0.3, 1.12, 1.34, 2.5} {
			u := gap * charge / (boltzmann * temperature)
			if u > 600 {
				continue
			}
			closed := must(RadiativeCurrentOfGap(gap, temperature))
			near(t, "step, closed form", closed, energyCurrent(temperature, u, u+60, one), 1e-12)
			edge := WavelengthOfEnergy / gap
			near(t, "step, table", must(RadiativeCurrent([]float64{edge / 50, edge}, []float64{1, 1}, temperature)), closed-must(RadiativeCurrentOfGap(50*gap, temperature)), 1e-12)
		}
	}
	// A rising and falling absorptance on a coarse table.
	grid, a := []float64{400, 900, 1100, 1180, 1300}, []float64{1, 1, 0.8, 0.1, 0}
	at := func(l float64) float64 { return interpolate(grid, a, l) }
	kt := boltzmann * 298.15 / charge
	want := 0.0
	for i := 1; i < len(grid); i++ {
		want += energyCurrent(298.15, WavelengthOfEnergy/grid[i]/kt, WavelengthOfEnergy/grid[i-1]/kt, at)
	}
	near(t, "table", must(RadiativeCurrent(grid, a, 298.15)), want, 1e-12)
}

// TestBosonTail: 2ζ(3) at zero, and both series where they meet.
func TestBosonTail(t *testing.T) {
	near(t, "at 0", bosonTail(0), 2.404113806319188570799476, 1e-16)
	below, above := bosonTail(math.Nextafter(0.5, 0)), bosonTail(0.5)
	near(t, "below 0.5", below, above, 1e-15)
	// derivative -x²/(exp(x)-1)
	for _, x := range []float64{0.01, 0.4, 0.51, 1, 3, 30} {
		const h = 1e-3
		slope := quad.Fixed(func(u float64) float64 { return u * u / math.Expm1(u) }, x, x+h*x, 8, quad.Legendre{}, 0)
		near(t, "difference", bosonTail(x)-bosonTail(x+h*x), slope, 1e-15*bosonTail(x)/slope+1e-13)
	}
}

// TestIdealDiode: the maximum is one, and the figures belong together.
func TestIdealDiode(t *testing.T) {
	for _, c := range [][3]float64{{40, 1e-13, 298.15}, {1, 1, 300}, {1e-6, 1, 300}, {43, 1e-300, 300}, {1e300, 1e-20, 300}, {35, 1e-17, 5}} {
		d := must(IdealDiode(c[0], c[1], c[2]))
		volt := boltzmann * c[2] / charge
		near(t, "open circuit", c[1]*math.Expm1(math.Min(d.Voc/volt, 700)), math.Min(c[0], c[1]*math.Expm1(700)), 1e-12*math.Max(1, d.Voc/volt))
		if d.Voc/volt < 600 {
			near(t, "current at maximum", d.Current, c[0]-c[1]*math.Expm1(d.Voltage/volt), 1e-12*d.Voc/volt*c[0]/d.Current+1e-13)
			for _, v := range []float64{d.Voltage * 0.999, d.Voltage * 1.001} {
				if p := v * (c[0] - c[1]*math.Expm1(v/volt)); p > d.Power {
					t.Errorf("%v: more power at %g V: %g > %g", c, v, p, d.Power)
				}
			}
		}
		near(t, "fill factor", d.FillFactor*d.Voc*c[0], d.Power, 1e-13)
	}
}
