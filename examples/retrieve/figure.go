package main

import (
	"fmt"
	"image/color"
	"os"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
)

// drawFigure writes the measurement with the fit, and the residuals below.
func drawFigure(path string, s *sample, residuals []float64) error {
	dark, rust := color.RGBA{R: 18, G: 52, B: 92, A: 255}, color.RGBA{R: 176, G: 72, B: 32, A: 255}
	measured, fitted, rest := make(plotter.XYs, len(residuals)), make(plotter.XYs, len(residuals)), make(plotter.XYs, len(residuals))
	for i, l := range s.wavelength {
		measured[i] = plotter.XY{X: l, Y: s.measured[i]}
		fitted[i] = plotter.XY{X: l, Y: s.measured[i] - residuals[i]}
		rest[i] = plotter.XY{X: l, Y: residuals[i] / s.sigma[i]}
	}
	points, err := plotter.NewScatter(measured)
	if err != nil {
		return err
	}
	points.GlyphStyle = draw.GlyphStyle{Color: dark, Radius: vg.Points(2), Shape: draw.RingGlyph{}}
	curve, err := plotter.NewLine(fitted)
	if err != nil {
		return err
	}
	curve.Color, curve.Width = rust, vg.Points(1.5)
	top := plot.New()
	top.Title.Text = "invented measurement of a nitride film on silicon"
	top.Y.Label.Text = "reflectance"
	top.Add(curve, points)
	top.Legend.Top, top.Legend.Padding = true, 3
	top.Legend.Add("measured", points)
	top.Legend.Add("fitted", curve)

	dots, err := plotter.NewScatter(rest)
	if err != nil {
		return err
	}
	dots.GlyphStyle = points.GlyphStyle
	zero, err := plotter.NewLine(plotter.XYs{{X: s.wavelength[0]}, {X: s.wavelength[len(s.wavelength)-1]}})
	if err != nil {
		return err
	}
	zero.Color = color.Gray{Y: 128}
	bottom := plot.New()
	bottom.X.Label.Text, bottom.Y.Label.Text = "wavelength (nm)", "residual / noise"
	bottom.Add(zero, dots)

	var ticks plot.ConstantTicks
	for _, l := range []float64{400, 500, 600, 700, 800, 900, 1000} {
		ticks = append(ticks, plot.Tick{Value: l, Label: fmt.Sprint(l)})
	}
	for _, p := range []*plot.Plot{top, bottom} {
		p.X.Tick.Marker, p.X.Min, p.X.Max = ticks, 400, 1000
	}

	const width, height, low = 16 * vg.Centimeter, 13 * vg.Centimeter, 5 * vg.Centimeter
	canvas := vgimg.NewWith(vgimg.UseWH(width, height), vgimg.UseDPI(120))
	dc := draw.New(canvas)
	top.Draw(draw.Crop(dc, 0, -8, low, -4))
	bottom.Draw(draw.Crop(dc, 0, -8, 4, low-height-4))
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	if _, err := (vgimg.PngCanvas{Canvas: canvas}).WriteTo(f); err != nil {
		return err
	}
	return f.Close()
}
