package main

import (
	"fmt"
	"image/color"
	"math"
	"os"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/palette"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"

	"photonledger/spectrum"
)

// shades go from dark blue to light sand: lightness alone tells the value.
type shades int

func (n shades) Colors() []color.Color {
	list := make([]color.Color, n)
	for i := range list {
		t := float64(i) / float64(n-1)
		list[i] = color.RGBA{R: uint8(18 + 232*t), G: uint8(40 + 196*t), B: uint8(92 + 112*t), A: 255}
	}
	return list
}

var _ palette.Palette = shades(0)

// drawFigure writes the map with lines of equal reflectance and the best single
// layer, and below it the colours of the wafer over the thickness.
func drawFigure(path string, m *chart, designs []design) error {
	p := plot.New()
	p.Title.Text = "photon-weighted reflectance of one film on silicon"
	p.Y.Label.Text = "index of the film"
	heat := plotter.NewHeatMap(m, shades(64))
	levels := []float64{0.1, 0.12, 0.14, 0.16, 0.2, 0.24, 0.28}
	lines := plotter.NewContour(m, levels, nil)
	lines.LineStyles = []draw.LineStyle{{Color: color.White, Width: vg.Points(0.8)}}
	best, err := plotter.NewScatter(plotter.XYs{{X: designs[0].thickness[0], Y: designs[0].index[0]}})
	if err != nil {
		return err
	}
	best.GlyphStyle = draw.GlyphStyle{Color: color.White, Radius: vg.Points(5), Shape: draw.CrossGlyph{}}
	var labels plotter.XYLabels
	for _, level := range levels {
		if at, ok := m.crossing(level); ok {
			labels.XYs, labels.Labels = append(labels.XYs, at), append(labels.Labels, fmt.Sprint(level))
		}
	}
	labels.XYs = append(labels.XYs, plotter.XY{X: designs[0].thickness[0] + 3, Y: designs[0].index[0]})
	labels.Labels = append(labels.Labels, fmt.Sprintf("%.4f", designs[0].reflected))
	text, err := plotter.NewLabels(labels)
	if err != nil {
		return err
	}
	for i := range text.TextStyle {
		text.TextStyle[i].Color = color.White
	}
	p.Add(heat, lines, best, text)
	p.X.Min, p.X.Max = m.thickness[0], m.thickness[len(m.thickness)-1]

	strip := plot.New()
	strip.X.Label.Text = "thickness (nm)"
	strip.Y.Label.Text = fmt.Sprintf("colour, index %g", swatchIndex)
	strip.Y.Tick.Marker = plot.ConstantTicks{}
	strip.Y.Min, strip.Y.Max, strip.X.Min, strip.X.Max = 0, 1, p.X.Min, p.X.Max
	for i := 1; i < len(m.thickness); i++ {
		a, b := m.thickness[i-1], m.thickness[i]
		box, err := plotter.NewPolygon(plotter.XYs{{X: a, Y: 0}, {X: b, Y: 0}, {X: b, Y: 1}, {X: a, Y: 1}})
		if err != nil {
			return err
		}
		box.Color, box.LineStyle.Width = screen(m.colours[i]), 0
		strip.Add(box)
	}

	const width, height, low = 16 * vg.Centimeter, 14 * vg.Centimeter, 3.4 * vg.Centimeter
	canvas := vgimg.NewWith(vgimg.UseWH(width, height), vgimg.UseDPI(120))
	dc := draw.New(canvas)
	p.Draw(draw.Crop(dc, 0, -10, low, -4))
	strip.Draw(draw.Crop(dc, 31, -10, 4, low-height-4))
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

// crossing finds where a level is met at the upper edge of the thickness axis,
// for its label.
func (m *chart) crossing(level float64) (plotter.XY, bool) {
	r := len(m.index) / 3
	for c := len(m.thickness) - 2; c > 0; c-- {
		if (m.reflected[r][c]-level)*(m.reflected[r][c+1]-level) <= 0 {
			return plotter.XY{X: m.thickness[c], Y: m.index[r]}, true
		}
	}
	return plotter.XY{}, false
}

// screen is the colour on a screen, clipped to what it can show.
func screen(t spectrum.Tristimulus) color.Color {
	rgb, _ := t.SRGB()
	b := func(v float64) uint8 { return uint8(math.Round(255 * min(1, max(0, v)))) }
	return color.RGBA{R: b(rgb[0]), G: b(rgb[1]), B: b(rgb[2]), A: 255}
}
