package main

import (
	"fmt"
	"image/color"
	"math"
	"os"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
)

// drawFigure writes one panel per device: the generation rate as steps over the
// depth, the mean of each cell.
func drawFigure(path string, profiles []profile) error {
	const width, height = 12 * vg.Centimeter, 9 * vg.Centimeter
	canvas := vgimg.NewWith(vgimg.UseWH(width*vg.Length(len(profiles)), height), vgimg.UseDPI(120))
	dc := draw.New(canvas)
	for i, p := range profiles {
		panel := plot.New()
		panel.Title.Text = p.name
		panel.X.Label.Text = "depth from the lit face (µm)"
		panel.Y.Label.Text = "generation rate, 1/(cm³ s)"
		steps, lo, hi := outline(p)
		panel.Y.Tick.Marker = decades(lo, hi)
		panel.Y.Min, panel.Y.Max = math.Floor(lo), math.Ceil(hi)
		line, err := plotter.NewLine(steps)
		if err != nil {
			return err
		}
		line.Color, line.Width = color.RGBA{R: 18, G: 52, B: 92, A: 255}, vg.Points(1.6)
		grid := plotter.NewGrid()
		grid.Vertical.Color, grid.Horizontal.Color = color.Gray{Y: 224}, color.Gray{Y: 224}
		panel.Add(grid, line)
		panel.Draw(draw.Crop(dc, width*vg.Length(i), -width*vg.Length(len(profiles)-1-i)-12, 6, -4))
	}
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	if _, err := (vgimg.PngCanvas{Canvas: canvas}).WriteTo(f); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	return f.Close()
}

// decades marks the whole powers of ten of an axis of logarithms.
func decades(lo, hi float64) plot.ConstantTicks {
	var ticks plot.ConstantTicks
	for d := math.Floor(lo); d <= math.Ceil(hi); d++ {
		ticks = append(ticks, plot.Tick{Value: d, Label: fmt.Sprintf("1e%g", d)})
	}
	return ticks
}

// outline returns the steps of a profile, depth in µm and decimal logarithm of
// the rate, and the range of the latter; cells without any generation are left
// out.
func outline(p profile) (steps plotter.XYs, lo, hi float64) {
	lo, hi = math.Inf(1), math.Inf(-1)
	for c, rate := range p.rate {
		if rate <= 0 {
			continue
		}
		y := math.Log10(rate)
		lo, hi = min(lo, y), max(hi, y)
		steps = append(steps, plotter.XY{X: p.mesh[c] / nmPerMicron, Y: y}, plotter.XY{X: p.mesh[c+1] / nmPerMicron, Y: y})
	}
	return steps, lo, hi
}
