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

var (
	dark  = color.RGBA{R: 18, G: 52, B: 92, A: 255}
	rust  = color.RGBA{R: 176, G: 72, B: 32, A: 255}
	green = color.RGBA{R: 92, G: 120, B: 84, A: 255}
	grey  = color.RGBA{R: 150, G: 150, B: 150, A: 255}
)

// drawFigure writes two panels: the currents over the thickness of the
// perovskite, and where the photons go at the match.
func drawFigure(path string, c *cell, curve []point, m point) error {
	currents := panel("thickness of the perovskite (nm)", "photocurrent (mA/cm²)")
	currents.Title.Text = fmt.Sprintf("match at %.0f nm, %.2f mA/cm²", m.thickness, m.top)
	top, bottom := make(plotter.XYs, len(curve)), make(plotter.XYs, len(curve))
	for i, p := range curve {
		top[i], bottom[i] = plotter.XY{X: p.thickness, Y: p.top}, plotter.XY{X: p.thickness, Y: p.bottom}
	}
	if err := add(currents, "perovskite", top, rust, nil); err != nil {
		return err
	}
	if err := add(currents, "silicon", bottom, dark, []vg.Length{7, 3}); err != nil {
		return err
	}
	currents.Legend.Top = false
	currents.Legend.YOffs = 3 * vg.Centimeter // between the lines

	shares := panel("wavelength (nm)", "share of the incident photons")
	shares.Title.Text = "at the match"
	shares.Y.Min, shares.Y.Max = 0, 1.3 // room for the legend
	var ticks plot.ConstantTicks
	shares.Legend.Top = true
	for _, v := range []float64{0, 0.2, 0.4, 0.6, 0.8, 1} {
		ticks = append(ticks, plot.Tick{Value: v, Label: fmt.Sprint(v)})
	}
	shares.Y.Tick.Marker = ticks
	w := len(c.sweep.Wavelength)
	series := func(values []float64) plotter.XYs {
		xy := make(plotter.XYs, w)
		for i, l := range c.sweep.Wavelength {
			xy[i] = plotter.XY{X: l, Y: values[i]}
		}
		return xy
	}
	oxides := make([]float64, w)
	for i := range oxides {
		for _, j := range []int{0, 1, 3, 5} {
			oxides[i] += m.response.A[j*w+i]
		}
		oxides[i] += m.response.T[i]
	}
	for _, s := range []struct {
		name   string
		values []float64
		color  color.Color
		dash   []vg.Length
	}{
		{"perovskite", m.response.A[perovskite*w : (perovskite+1)*w], rust, nil},
		{"silicon", m.response.A[silicon*w : (silicon+1)*w], dark, []vg.Length{7, 3}},
		{"reflected or escaped", m.response.R, grey, []vg.Length{2, 2}},
		{"oxides, fluoride and metal", oxides, green, []vg.Length{9, 3, 2, 3}},
	} {
		if err := add(shares, s.name, series(s.values), s.color, s.dash); err != nil {
			return err
		}
	}

	const width, height = 13 * vg.Centimeter, 10 * vg.Centimeter
	canvas := vgimg.NewWith(vgimg.UseWH(2*width, height), vgimg.UseDPI(120))
	dc := draw.New(canvas)
	currents.Draw(draw.Crop(dc, 0, -width-8, 4, -4))
	shares.Draw(draw.Crop(dc, width, -8, 4, -4))
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

func panel(x, y string) *plot.Plot {
	p := plot.New()
	p.X.Label.Text, p.Y.Label.Text = x, y
	p.Legend.Padding, p.Legend.ThumbnailWidth = 3, 34
	grid := plotter.NewGrid()
	grid.Vertical.Color, grid.Horizontal.Color = color.Gray{Y: 228}, color.Gray{Y: 228}
	p.Add(grid)
	return p
}

func add(p *plot.Plot, name string, xy plotter.XYs, c color.Color, dash []vg.Length) error {
	line, err := plotter.NewLine(xy)
	if err != nil {
		return err
	}
	line.Color, line.Width, line.Dashes = c, vg.Points(1.7), dash
	p.Add(line)
	p.Legend.Add(name, line)
	return nil
}
