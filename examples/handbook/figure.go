package main

import (
	"image/color"
	"math"
	"strings"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// drawFigure writes one dot per value: its deviation in units of the deviation that the
// published digits allow, file by file.
func drawFigure(path string, results []result) error {
	p := plot.New()
	p.Title.Text = "published values: deviation in units of the allowed one"
	p.Y.Label.Text = "deviation / allowed deviation"
	p.Y.Tick.Marker = plot.ConstantTicks{
		{Value: floor, Label: "none"}, {Value: -5, Label: "1e-5"}, {Value: -4, Label: "1e-4"}, {Value: -3, Label: "0.001"},
		{Value: -2, Label: "0.01"}, {Value: -1, Label: "0.1"}, {Value: 0, Label: "1"},
	}
	p.Y.Min, p.Y.Max = floor, ceiling
	var names []string
	var dots plotter.XYs
	for i, r := range results {
		name := strings.TrimSuffix(r.File, ".csv")
		if len(names) == 0 || names[len(names)-1] != name {
			names = append(names, name)
		}
		// A fixed spread within the column, so that dots do not hide each other.
		x := float64(len(names)-1) + 0.6*(math.Mod(float64(i)*0.618034, 1)-0.5)
		dots = append(dots, plotter.XY{X: x, Y: min(ceiling, max(floor, math.Log10(r.share())))})
	}
	scatter, err := plotter.NewScatter(dots)
	if err != nil {
		return err
	}
	scatter.GlyphStyle = draw.GlyphStyle{Color: color.RGBA{R: 18, G: 52, B: 92, A: 255}, Radius: vg.Points(2), Shape: draw.CircleGlyph{}}
	limit, err := plotter.NewLine(plotter.XYs{{X: -0.5, Y: 0}, {X: float64(len(names)) - 0.5, Y: 0}})
	if err != nil {
		return err
	}
	limit.Color, limit.Width = color.RGBA{R: 176, G: 72, B: 32, A: 255}, vg.Points(1.5)
	p.Add(scatter, limit)
	p.NominalX(names...)
	p.X.Tick.Label.Rotation = 0.6
	p.X.Tick.Label.XAlign = draw.XRight
	return p.Save(22*vg.Centimeter, 13*vg.Centimeter, path)
}

// Range of the decimal logarithm; smaller deviations are drawn at the floor.
const floor, ceiling = -6, 0.3
