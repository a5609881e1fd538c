package main

import (
	"fmt"
	"image/color"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"photonledger/examples/internal/picture"
)

// drawFigure writes two panels: the currents over the thickness of the
// perovskite, and where the photons go at the match.
func drawFigure(path string, c *cell, curve []point, m point) error {
	const panel, key, height = 11.5 * vg.Centimeter, 5.2 * vg.Centimeter, 9.5 * vg.Centimeter
	currents, err := drawCurrents(curve, m)
	if err != nil {
		return err
	}
	shares, legend, err := drawShares(c, m)
	if err != nil {
		return err
	}
	return picture.Save(path, 2*panel+key, height, func(dc draw.Canvas) error {
		currents.Draw(draw.Crop(dc, 4, -panel-key-12, 4, -4))
		shares.Draw(draw.Crop(dc, panel+4, -key-8, 4, -4))
		legend.Draw(draw.Crop(dc, 2*panel+4, -4, 0, -30))
		return nil
	})
}

// drawCurrents shows both currents and where they meet.
func drawCurrents(curve []point, m point) (*plot.Plot, error) {
	var d, top, bottom []float64
	for _, p := range curve {
		d, top, bottom = append(d, p.thickness), append(top, p.top), append(bottom, p.bottom)
	}
	p := picture.Panel("photocurrents of the junctions", "thickness of the perovskite (nm)", "photocurrent (mA/cm²)")
	if err := picture.Line(p, "perovskite", d, top, picture.Rust, picture.Solid); err != nil {
		return nil, err
	}
	if err := picture.Line(p, "silicon", d, bottom, picture.Ink, picture.Dashed); err != nil {
		return nil, err
	}
	match, err := plotter.NewScatter(plotter.XYs{{X: m.thickness, Y: m.top}})
	if err != nil {
		return nil, err
	}
	match.GlyphStyle = draw.GlyphStyle{Color: color.Black, Radius: vg.Points(4.5), Shape: draw.RingGlyph{}}
	label, err := plotter.NewLabels(plotter.XYLabels{XYs: plotter.XYs{{X: m.thickness, Y: m.top}}, Labels: []string{fmt.Sprintf("match: %.0f nm, %.2f mA/cm²", m.thickness, m.top)}})
	if err != nil {
		return nil, err
	}
	label.TextStyle[0].YAlign = text.YCenter
	label.Offset.X = vg.Points(10)
	p.Add(match, label)
	p.X.Tick.Marker = picture.Every(100, d[0], d[len(d)-1])
	p.Y.Min, p.Y.Max = 0, 30 // the legend stands below the lines
	p.Y.Tick.Marker = picture.Every(5, 0, 30)
	p.Legend.XOffs, p.Legend.YOffs = -8, 8
	return p, nil
}

// drawShares stacks what every layer takes. Neighbours differ in lightness.
func drawShares(c *cell, m point) (*plot.Plot, plot.Legend, error) {
	p := picture.Panel("where the photons go at the match", "wavelength (nm)", "share of the incident photons")
	p.X.Tick.Marker, p.Y.Tick.Marker = picture.Every(200, 400, 1200), picture.Every(0.2, 0, 1)
	legend := plot.NewLegend()
	legend.TextStyle.Font.Size = 11
	legend.Top, legend.Left, legend.Padding, legend.ThumbnailWidth = true, true, 4, 18
	w := len(c.weights)
	film := func(j int) []float64 { return m.response.A[j*w : (j+1)*w] }
	useful, tail, rear := make([]float64, w), make([]float64, w), make([]float64, w)
	for i, l := range c.sweep.Wavelength {
		if l <= bandEdge {
			useful[i] = film(perovskite)[i]
		} else {
			tail[i] = film(perovskite)[i]
		}
		rear[i] = film(5)[i] + m.response.T[i]
	}
	base := make([]float64, w)
	areas := []struct {
		name  string
		share []float64
		color color.RGBA
	}{
		{"silicon", film(silicon), picture.Ink},
		{"perovskite", useful, picture.Ochre},
		{fmt.Sprintf("perovskite, tail > %g nm", bandEdge), tail, picture.Rust},
		{"junction oxide", film(3), color.RGBA{R: 196, G: 222, B: 232, A: 255}},
		{"front oxide", film(1), picture.Sky},
		{"magnesium fluoride", film(0), color.RGBA{R: 196, G: 208, B: 180, A: 255}},
		{"rear oxide and metal", rear, color.RGBA{R: 84, G: 60, B: 92, A: 255}},
		{"reflected or escaped", m.response.R, color.RGBA{R: 222, G: 222, B: 222, A: 255}},
	}
	boxes := make([]*plotter.Polygon, len(areas))
	for k, a := range areas {
		outline := make(plotter.XYs, 2*w)
		for i, l := range c.sweep.Wavelength {
			outline[2*w-1-i] = plotter.XY{X: l, Y: base[i]}
			base[i] += a.share[i]
			outline[i] = plotter.XY{X: l, Y: base[i]}
		}
		area, err := plotter.NewPolygon(outline)
		if err != nil {
			return nil, legend, err
		}
		area.Color, area.LineStyle = a.color, draw.LineStyle{Color: color.White, Width: vg.Points(0.3)}
		boxes[k] = area
		p.Add(area)
	}
	for k := len(areas) - 1; k >= 0; k-- {
		legend.Add(areas[k].name, boxes[k])
	}
	return p, legend, nil
}
