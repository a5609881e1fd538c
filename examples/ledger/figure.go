package main

import (
	"fmt"
	"image/color"
	"os"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"

	"photonledger/spectrum"
)

// shades fill the entries from the bottom of the stack upwards: neighbours
// differ in lightness, so that they are told apart in grey and by readers who do
// not see all colours.
var shades = []color.Color{
	color.RGBA{R: 18, G: 52, B: 92, A: 255}, color.RGBA{R: 232, G: 196, B: 92, A: 255}, color.RGBA{R: 108, G: 84, B: 138, A: 255},
	color.RGBA{R: 246, G: 226, B: 196, A: 255}, color.RGBA{R: 140, G: 62, B: 40, A: 255}, color.RGBA{R: 150, G: 200, B: 214, A: 255},
	color.RGBA{R: 92, G: 120, B: 84, A: 255}, color.RGBA{R: 214, G: 214, B: 214, A: 255},
}

// drawFigure writes one panel per variant, the shares stacked over the wavelength, and
// the key beside them.
func drawFigure(path string, names []string, ledgers []spectrum.Ledger) error {
	const panel, key, height = 14 * vg.Centimeter, 5 * vg.Centimeter, 10 * vg.Centimeter
	canvas := vgimg.NewWith(vgimg.UseWH(panel*vg.Length(len(names))+key, height), vgimg.UseDPI(120))
	dc := draw.New(canvas)
	var legend plot.Legend
	for i, l := range ledgers {
		p := plot.New()
		p.Title.Text = names[i]
		p.X.Label.Text = "wavelength (nm)"
		p.Y.Label.Text = "share of the incident photons"
		p.X.Min, p.X.Max = l.Wavelength[0], l.Wavelength[len(l.Wavelength)-1]
		p.Y.Min, p.Y.Max = 0, 1
		areas, err := stack(l)
		if err != nil {
			return err
		}
		for j, a := range areas {
			p.Add(a)
			if i == 0 {
				legend.Add(l.Entries[len(areas)-1-j].Name, areas[len(areas)-1-j])
			}
		}
		right := dc.Max.X - dc.Min.X - panel*vg.Length(i+1)
		p.Draw(draw.Crop(dc, panel*vg.Length(i), -right, 0, 0))
	}
	legend.TextStyle = text.Style{Font: plot.DefaultFont, Handler: plot.DefaultTextHandler}
	legend.TextStyle.Font.Size = 11
	legend.Top, legend.Left = true, true
	legend.Padding, legend.ThumbnailWidth = 3, 18
	legend.Draw(draw.Crop(dc, panel*vg.Length(len(names))+10, -5, 40, -28))

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

// stack turns the shares of a ledger into areas that lie on each other.
func stack(l spectrum.Ledger) ([]*plotter.Polygon, error) {
	n := len(l.Wavelength)
	base := make([]float64, n)
	var areas []*plotter.Polygon
	for j, e := range l.Entries {
		outline := make(plotter.XYs, 2*n)
		for i, w := range l.Wavelength {
			outline[2*n-1-i] = plotter.XY{X: w, Y: base[i]}
			base[i] += e.Share[i]
			outline[i] = plotter.XY{X: w, Y: base[i]}
		}
		area, err := plotter.NewPolygon(outline)
		if err != nil {
			return nil, err
		}
		area.Color = shades[j%len(shades)]
		area.LineStyle = draw.LineStyle{Color: color.White, Width: vg.Points(0.6)}
		areas = append(areas, area)
	}
	return areas, nil
}
