package main

import (
	"image/color"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// drawFigure writes the photocurrents over the thickness; the lines differ in
// lightness and in dashes.
func drawFigure(path string, rows []row) error {
	p := plot.New()
	p.Title.Text = "silicon under AM1.5 global, 300 nm to 1200 nm"
	p.X.Label.Text = "thickness (µm)"
	p.Y.Label.Text = "photocurrent (mA/cm²)"
	p.Legend.Left = false
	p.Legend.Padding, p.Legend.ThumbnailWidth = 3, 34
	var ticks plot.ConstantTicks
	for d, label := range []string{"1", "10", "100"} {
		ticks = append(ticks, plot.Tick{Value: float64(d), Label: label})
		for k := 2; k < 10; k++ {
			ticks = append(ticks, plot.Tick{Value: float64(d) + math.Log10(float64(k))})
		}
	}
	p.X.Tick.Marker = ticks
	grid := plotter.NewGrid()
	grid.Vertical.Color, grid.Horizontal.Color = color.Gray{Y: 224}, color.Gray{Y: 224}
	p.Add(grid)
	lines := []struct {
		name  string
		value func(row) float64
		color color.Color
		dash  []vg.Length
	}{
		{"lambertian faces, no reflection", func(r row) float64 { return r.lambertian }, color.RGBA{R: 18, G: 52, B: 92, A: 255}, nil},
		{"4n² limit, no reflection", func(r row) float64 { return r.limit }, color.RGBA{R: 150, G: 170, B: 200, A: 255}, []vg.Length{6, 4}},
		{"coated random pyramids, traced", func(r row) float64 { return r.pyramids }, color.RGBA{R: 176, G: 72, B: 32, A: 255}, nil},
		{"rear mirror, no reflection", func(r row) float64 { return r.mirror }, color.RGBA{R: 92, G: 120, B: 84, A: 255}, []vg.Length{10, 3, 2, 3}},
		{"single pass, no reflection", func(r row) float64 { return r.single }, color.RGBA{R: 120, G: 120, B: 120, A: 255}, []vg.Length{2, 3}},
	}
	for _, l := range lines {
		var points plotter.XYs
		for _, r := range rows {
			points = append(points, plotter.XY{X: math.Log10(r.um), Y: l.value(r)})
		}
		line, dots, err := plotter.NewLinePoints(points)
		if err != nil {
			return err
		}
		line.Color, line.Width, line.Dashes = l.color, vg.Points(1.8), l.dash
		dots.GlyphStyle = draw.GlyphStyle{Color: l.color, Radius: vg.Points(2.2), Shape: draw.CircleGlyph{}}
		p.Add(line, dots)
		p.Legend.Add(l.name, line)
	}
	p.Y.Min = 0
	return p.Save(18*vg.Centimeter, 12*vg.Centimeter, path)
}
