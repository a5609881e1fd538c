// Package picture holds what the figures of the example programs share: colours,
// lines, panels with common borders, and files in three formats.
package picture

import (
	"errors"
	"fmt"
	"image/color"
	"math"
	"os"
	"path/filepath"
	"slices"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
)

// The colours of lines, from dark to light. They differ in lightness, so that
// they are told apart in grey and by readers who do not see all colours; lines
// carry a dash pattern besides.
var (
	Ink   = color.RGBA{R: 18, G: 52, B: 92, A: 255}
	Rust  = color.RGBA{R: 170, G: 68, B: 30, A: 255}
	Sky   = color.RGBA{R: 84, G: 150, B: 184, A: 255}
	Ochre = color.RGBA{R: 226, G: 178, B: 74, A: 255}
	Grey  = color.RGBA{R: 120, G: 120, B: 120, A: 255}
)

// Solid, Dashed, Dotted and Mixed are the patterns of lines.
var (
	Solid  []vg.Length
	Dashed = []vg.Length{7, 3}
	Dotted = []vg.Length{2, 2}
	Mixed  = []vg.Length{9, 3, 2, 3}
)

// dotsPerInch of bitmaps.
const dotsPerInch = 144

// CheckName reports a file name of a figure that Save cannot write.
func CheckName(name string) error {
	if filepath.Base(name) != name {
		return fmt.Errorf("%q: want a file name; the folder is given by -out", name)
	}
	if ext := filepath.Ext(name); ext == name || !slices.Contains([]string{".png", ".svg", ".pdf"}, ext) {
		return fmt.Errorf("%q: want a file name that ends in .png, .svg or .pdf", name)
	}
	return nil
}

// Save draws a figure of the given size into a file, in the format that its name
// ends in.
func Save(path string, width, height vg.Length, paint func(draw.Canvas) error) (err error) {
	if err := CheckName(filepath.Base(path)); err != nil {
		return err
	}
	var canvas vg.CanvasWriterTo
	if format := filepath.Ext(path)[1:]; format == "png" {
		canvas = vgimg.PngCanvas{Canvas: vgimg.NewWith(vgimg.UseWH(width, height), vgimg.UseDPI(dotsPerInch))}
	} else if canvas, err = draw.NewFormattedCanvas(width, height, format); err != nil {
		return err
	}
	if err := paint(draw.NewCanvas(canvas, width, height)); err != nil {
		return err
	}
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	_, err = canvas.WriteTo(f)
	return errors.Join(err, f.Close())
}

// Panel returns an empty plot with a pale grid.
func Panel(title, x, y string) *plot.Plot {
	p := plot.New()
	p.Title.Text, p.X.Label.Text, p.Y.Label.Text = title, x, y
	p.Title.Padding = vg.Points(6)
	p.Legend.Padding, p.Legend.ThumbnailWidth = 3, 34
	grid := plotter.NewGrid()
	grid.Vertical.Color, grid.Horizontal.Color = color.Gray{Y: 228}, color.Gray{Y: 228}
	p.Add(grid)
	return p
}

// Line adds a line of a width that prints, with its entry in the legend unless
// the name is empty.
func Line(p *plot.Plot, name string, x, y []float64, c color.Color, dashes []vg.Length) error {
	xy := make(plotter.XYs, len(x))
	for i := range xy {
		xy[i] = plotter.XY{X: x[i], Y: y[i]}
	}
	line, err := plotter.NewLine(xy)
	if err != nil {
		return err
	}
	line.Color, line.Width, line.Dashes = c, vg.Points(1.7), dashes
	p.Add(line)
	if name != "" {
		p.Legend.Add(name, line)
	}
	return nil
}

// Every labels an axis at the multiples of a step between two ends.
func Every(step, from, to float64) plot.ConstantTicks {
	var ticks plot.ConstantTicks
	for k := math.Ceil(from/step - 1e-9); k*step <= to+1e-9*step; k++ {
		v := k*step + 0 // 0 instead of -0
		ticks = append(ticks, plot.Tick{Value: v, Label: fmt.Sprintf("%.10g", v)})
	}
	return ticks
}

// Column draws plots below each other, each with its height, so that their
// horizontal axes have the same ends on the paper.
func Column(c draw.Canvas, plots []*plot.Plot, heights []vg.Length) {
	canvases := make([]draw.Canvas, len(plots))
	top := vg.Length(0)
	left, right := c.Min.X, c.Max.X
	for i, p := range plots {
		canvases[i] = draw.Crop(c, 0, 0, c.Max.Y-c.Min.Y-top-heights[i], -top)
		top += heights[i]
		data := p.DataCanvas(canvases[i])
		left, right = max(left, data.Min.X), min(right, data.Max.X)
	}
	for i, p := range plots {
		data := p.DataCanvas(canvases[i])
		p.Draw(draw.Crop(canvases[i], left-data.Min.X, right-data.Max.X, 0, 0))
	}
}
