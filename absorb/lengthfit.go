package absorb

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"
)

// LengthSettings says which wavelengths a [FitLength] uses and how. The zero value
// fits slope and intercept to all of them, for light along the normal.
type LengthSettings struct {
	Shortest   float64   // nm, least penetration depth 1/alpha used, >= 0
	Longest    float64   // nm, greatest penetration depth used; 0: no bound
	Cos        float64   // of the angle of the light in the base, 0..1; 0 stands for 1
	ThroughOne bool      // hold the intercept at 1
	Weight     []float64 // of each 1/IQE, >= 0, one per wavelength; nil: equal weights
}

// LengthFit is an effective diffusion length with its standard error, from the
// scatter of the points about the line.
type LengthFit struct {
	Length         float64 // nm
	LengthError    float64 // nm, standard error
	Intercept      float64 // of 1/IQE at alpha = infinity; 1 without losses at the front
	InterceptError float64 // standard error
	Shortest       float64 // nm, least penetration depth of the points used
	Longest        float64 // nm, greatest penetration depth of the points used
	Points         int     // number of points used
}

// FitLength determines the effective diffusion length from the internal quantum
// efficiency by linear regression of
//
//	1/IQE = intercept + cos/(alpha L_eff)
//
// over the penetration depth (P. A. Basore, Proc. 23rd IEEE PVSC (1993) 147, from
// memory; exact for a base without end, with intercept 1). In a wafer it holds
// for light that is absorbed well before the rear, and well behind the front
// layer: the caller chooses the range, and the result tells what was used.
// alpha is in 1/cm; iqe is per photon entering.
//
// Errors wrap [ErrInput], or [ErrFit] if fewer points are in the range than a
// standard error needs (three, two with ThroughOne), or if they do not rise.
func FitLength(alpha, iqe []float64, s LengthSettings) (LengthFit, error) {
	x, y, w, err := inverse(alpha, iqe, s)
	if err != nil {
		return LengthFit{}, fmt.Errorf("absorb: effective length: %w", err)
	}
	fitted := 2
	if s.ThroughOne {
		fitted = 1
	}
	if len(x) <= fitted {
		return LengthFit{}, fmt.Errorf("absorb: effective length: %d points in the range, want %d or more: %w", len(x), fitted+1, ErrFit)
	}
	l := regress(x, y, w, s.ThroughOne, len(x)-fitted)
	if !(l.slope > 0) || math.IsInf(l.slope, 1) {
		return LengthFit{}, fmt.Errorf("absorb: effective length: slope of 1/IQE over 1/alpha is %g /nm, want a positive one: %w", l.slope, ErrFit)
	}
	cos := s.Cos
	if cos == 0 {
		cos = 1
	}
	f := LengthFit{
		Length:         cos / l.slope,
		Intercept:      1 + l.intercept,
		InterceptError: l.interceptError,
		Shortest:       slices.Min(x),
		Longest:        slices.Max(x),
		Points:         len(x),
	}
	f.LengthError = f.Length / l.slope * l.slopeError
	for _, v := range [...]float64{f.Length, f.LengthError, f.Intercept, f.InterceptError} {
		if !finite(v) {
			return LengthFit{}, fmt.Errorf("absorb: effective length: the points do not determine a line: %w", ErrFit)
		}
	}
	return f, nil
}

// line is a fitted straight line with its standard errors.
type line struct{ intercept, slope, interceptError, slopeError float64 }

// regress fits a line, through the origin if asked, with standard errors from the
// scatter of the points with the given degrees of freedom (textbook formulas of
// weighted least squares).
func regress(x, y, w []float64, origin bool, freedom int) line {
	var l line
	l.intercept, l.slope = stat.LinearRegression(x, y, w, origin)
	mean := 0.0
	if !origin {
		mean = stat.Mean(x, w)
	}
	var weights, spread, scatter float64
	for i := range x {
		weight := 1.0
		if w != nil {
			weight = w[i]
		}
		r := y[i] - l.intercept - l.slope*x[i]
		weights += weight
		spread += weight * (x[i] - mean) * (x[i] - mean)
		scatter += weight * r * r
	}
	variance := scatter / float64(freedom)
	l.slopeError = math.Sqrt(variance / spread)
	if !origin {
		l.interceptError = math.Sqrt(variance * (1/weights + mean*mean/spread))
	}
	return l
}

// inverse returns penetration depth, 1/IQE - 1 and weight of the points in the range;
// points of weight 0 are left out.
func inverse(alpha, iqe []float64, s LengthSettings) (x, y, w []float64, err error) {
	switch {
	case !amount(s.Shortest), !amount(s.Longest), s.Longest != 0 && s.Longest < s.Shortest:
		return nil, nil, nil, fmt.Errorf("range %g nm to %g nm: %w", s.Shortest, s.Longest, ErrInput)
	case !share(s.Cos):
		return nil, nil, nil, fmt.Errorf("cosine %g is not in 0..1: %w", s.Cos, ErrInput)
	case len(iqe) != len(alpha):
		return nil, nil, nil, fmt.Errorf("%d quantum efficiencies for %d absorption coefficients: %w", len(iqe), len(alpha), ErrInput)
	}
	if s.Weight != nil {
		if err := checkAmounts("weight", "", s.Weight, len(alpha)); err != nil {
			return nil, nil, nil, err
		}
	}
	for i, a := range alpha {
		if err := checkPositive("absorption coefficient", " /cm", a); err != nil {
			return nil, nil, nil, fmt.Errorf("value %d: %w", i, err)
		}
		if err := checkPositive("quantum efficiency", "", iqe[i]); err != nil {
			return nil, nil, nil, fmt.Errorf("value %d: %w", i, err)
		}
		depth := PenetrationDepth(a)
		if depth < s.Shortest || s.Longest != 0 && depth > s.Longest || s.Weight != nil && s.Weight[i] == 0 {
			continue
		}
		x, y = append(x, depth), append(y, 1/iqe[i]-1)
		if s.Weight != nil {
			w = append(w, s.Weight[i])
		}
	}
	return x, y, w, nil
}
