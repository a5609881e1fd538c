package main

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"photonledger/examples/internal/picture"
	"photonledger/nk"
)

// drawFigure writes the measurement with the fit, and the residuals below in
// units of the noise.
func drawFigure(path string, m *measurement, fit nk.FitResult) error {
	n := len(m.wavelength)
	measured, rest, fitted := make(plotter.XYs, n), make(plotter.XYs, n), make([]float64, n)
	largest := 0.0
	for i, l := range m.wavelength {
		noise := math.Sqrt(fit.ReducedChiSquare)
		if m.sigma != nil {
			noise = m.sigma[i]
		}
		fitted[i] = m.reflectance[i] - fit.Residuals[i]
		measured[i] = plotter.XY{X: l, Y: m.reflectance[i]}
		rest[i] = plotter.XY{X: l, Y: fit.Residuals[i] / noise}
		largest = max(largest, math.Abs(rest[i].Y))
	}
	title := "film on silicon"
	if m.film != nil {
		title = "invented measurement of a film on silicon"
	}
	top := picture.Panel(title, "", "reflectance")
	points, err := plotter.NewScatter(measured)
	if err != nil {
		return err
	}
	points.GlyphStyle = draw.GlyphStyle{Color: picture.Sky, Radius: vg.Points(2.2), Shape: draw.RingGlyph{}}
	top.Add(points)
	top.Legend.Add("measured", points)
	if err := picture.Line(top, "fitted", m.wavelength, fitted, picture.Ink, picture.Solid); err != nil {
		return err
	}
	// The legend stands above the curve.
	top.Legend.Top, top.Legend.XOffs = true, -6
	low, high := top.Y.Min, top.Y.Max
	top.Y.Min, top.Y.Max = min(0, low), high+0.25*(high-low)

	bottom := picture.Panel("", "wavelength (nm)", "residual / noise")
	dots, err := plotter.NewScatter(rest)
	if err != nil {
		return err
	}
	dots.GlyphStyle = points.GlyphStyle
	dots.Color = picture.Ink
	if err := picture.Line(bottom, "", []float64{m.wavelength[0], m.wavelength[n-1]}, []float64{0, 0}, picture.Grey, picture.Solid); err != nil {
		return err
	}
	bottom.Add(dots)
	bottom.Y.Max = max(3, 1.05*largest)
	bottom.Y.Min = -bottom.Y.Max
	for _, p := range []*plot.Plot{top, bottom} {
		p.X.Min, p.X.Max = m.wavelength[0], m.wavelength[n-1]
		p.X.Tick.Marker = picture.Every(100, p.X.Min, p.X.Max)
	}
	const width, high1, high2 = 16 * vg.Centimeter, 8.5 * vg.Centimeter, 5 * vg.Centimeter
	return picture.Save(path, width, high1+high2, func(c draw.Canvas) error {
		picture.Column(draw.Crop(c, 4, -10, 4, -4), []*plot.Plot{top, bottom}, []vg.Length{high1 - 8, high2})
		return nil
	})
}
