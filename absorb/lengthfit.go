package absorb

import (
	"fmt"
	"math"

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
	f := LengthFit{Intercept: 1, Points: len(x), Shortest: x[0], Longest: x[0]}
	for _, v := range x {
		f.Shortest, f.Longest = min(f.Shortest, v), max(f.Longest, v)
	}
	var slope float64
	mean := 0.0
	if s.ThroughOne {
		for i := range y {
			y[i]--
		}
		_, slope = stat.LinearRegression(x, y, w, true)
		for i := range y {
			y[i]++
		}
	} else {
		mean = stat.Mean(x, w)
		f.Intercept, slope = stat.LinearRegression(x, y, w, false)
	}
	if !(slope > 0) || math.IsInf(slope, 1) {
		return LengthFit{}, fmt.Errorf("absorb: effective length: slope of 1/IQE over 1/alpha is %g /nm, want a positive one: %w", slope, ErrFit)
	}
	var weights, spread, scatter float64
	for i := range x {
		weight := 1.0
		if w != nil {
			weight = w[i]
		}
		r := y[i] - f.Intercept - slope*x[i]
		weights += weight
		spread += weight * (x[i] - mean) * (x[i] - mean)
		scatter += weight * r * r
	}
	variance := scatter / float64(len(x)-fitted)
	cos := s.Cos
	if cos == 0 {
		cos = 1
	}
	f.Length = cos / slope
	f.LengthError = f.Length / slope * math.Sqrt(variance/spread)
	if !s.ThroughOne {
		f.InterceptError = math.Sqrt(variance * (1/weights + mean*mean/spread))
	}
	for _, v := range [...]float64{f.Length, f.LengthError, f.Intercept, f.InterceptError} {
		if !finite(v) {
			return LengthFit{}, fmt.Errorf("absorb: effective length: the points do not determine a line: %w", ErrFit)
		}
	}
	return f, nil
}

// inverse returns penetration depth, 1/IQE and weight of the points in the range;
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
		x, y = append(x, depth), append(y, 1/iqe[i])
		if s.Weight != nil {
			w = append(w, s.Weight[i])
		}
	}
	return x, y, w, nil
}
