package main

import (
	"fmt"
	"image/color"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"photonledger/examples/internal/picture"
	"photonledger/spectrum"
)

// shades go from pale to ink: lightness alone tells the value.
type shades int

func (n shades) Colors() []color.Color {
	list := make([]color.Color, n)
	for i := range list {
		t := float64(i) / float64(n-1)
		mix := func(pale, ink float64) uint8 { return uint8(pale + (ink-pale)*t) }
		list[i] = color.RGBA{R: mix(250, 18), G: mix(242, 52), B: mix(214, 92), A: 255}
	}
	return list
}

// drawFigure writes the map of one film above the colours of the wafer, and beside
// them the reflectance over the wavelength.
func drawFigure(path string, o options, w *wafer, m *chart, coatings []coating) error {
	reflected, err := drawMap(o, m, coatings)
	if err != nil {
		return err
	}
	colours, err := drawColours(m)
	if err != nil {
		return err
	}
	spectra, err := drawSpectra(o, w, coatings)
	if err != nil {
		return err
	}
	const left, right, high, low = 14 * vg.Centimeter, 13 * vg.Centimeter, 9.5 * vg.Centimeter, 3.2 * vg.Centimeter
	return picture.Save(path, left+right, high+low+8, func(c draw.Canvas) error {
		picture.Column(draw.Crop(c, 4, -right-12, 4, -4), []*plot.Plot{reflected, colours}, []vg.Length{high, low})
		spectra.Draw(draw.Crop(c, left+8, -8, 4, -4))
		return nil
	})
}

// drawMap shows the reflectance with labelled lines, the best index and the
// published films.
func drawMap(o options, m *chart, coatings []coating) (*plot.Plot, error) {
	title := fmt.Sprintf("reflected photons, one film on silicon, %g–%g nm\n× best index: %.4f    ○ published films", o.first, o.last, coatings[1].reflected)
	p := picture.Panel(title, "", "index of the film")
	heat := plotter.NewHeatMap(m, shades(256))
	heat.Rasterized = true
	p.Add(heat)
	var levels []float64
	var styles []draw.LineStyle
	var marks plotter.XYLabels
	var inks []color.Color
	row := len(m.index) / 3
	for _, level := range []float64{0.01, 0.02, 0.05, 0.1, 0.12, 0.15, 0.2, 0.25, 0.3} {
		if level <= m.least() || level >= heat.Max {
			continue
		}
		ink := color.Color(color.White) // on dark shades
		if (level-heat.Min)/(heat.Max-heat.Min) < 0.5 {
			ink = color.Black
		}
		levels, styles = append(levels, level), append(styles, draw.LineStyle{Color: ink, Width: vg.Points(0.8)})
		if at, ok := m.crossing(level, row); ok && m.room(at, marks.XYs) {
			marks.XYs, marks.Labels, inks = append(marks.XYs, at), append(marks.Labels, fmt.Sprint(level)), append(inks, ink)
		}
	}
	if len(levels) > 0 {
		lines := plotter.NewContour(m, levels, nil)
		lines.LineStyles = styles
		p.Add(lines)
	}
	if len(marks.XYs) > 0 {
		labels, err := plotter.NewLabels(marks)
		if err != nil {
			return nil, err
		}
		for i := range labels.TextStyle {
			labels.TextStyle[i].Color, labels.TextStyle[i].YAlign = inks[i], text.YCenter
		}
		labels.Offset.X = vg.Points(3)
		p.Add(labels)
	}
	best := coatings[1].films[0]
	published := plotter.XYs{}
	for _, c := range coatings[3:] {
		if len(c.films) == 1 {
			published = append(published, plotter.XY{X: c.films[0].thickness, Y: c.films[0].index})
		}
	}
	for _, v := range []struct {
		at    plotter.XYs
		shape draw.GlyphDrawer
	}{
		{plotter.XYs{{X: best.thickness, Y: best.index}}, draw.CrossGlyph{}},
		{published, draw.RingGlyph{}},
	} {
		points, err := plotter.NewScatter(v.at)
		if err != nil {
			return nil, err
		}
		points.GlyphStyle = draw.GlyphStyle{Color: picture.Rust, Radius: vg.Points(5), Shape: v.shape}
		p.Add(points)
	}
	p.X.Min, p.X.Max = m.thickness[0], m.thickness[len(m.thickness)-1]
	p.Y.Min, p.Y.Max = m.index[0], m.index[len(m.index)-1]
	p.X.Tick.Marker, p.Y.Tick.Marker = picture.Every(20, p.X.Min, p.X.Max), picture.Every(0.2, p.Y.Min, p.Y.Max)
	return p, nil
}

// crossing finds where a level is met farthest to the right in a row of the map.
func (m *chart) crossing(level float64, row int) (plotter.XY, bool) {
	for c := len(m.thickness) - 2; c >= 0; c-- {
		a, b := m.reflected[row][c]-level, m.reflected[row][c+1]-level
		if a*b <= 0 && a != b {
			return plotter.XY{X: m.thickness[c] + (m.thickness[c+1]-m.thickness[c])*a/(a-b), Y: m.index[row]}, true
		}
	}
	return plotter.XY{}, false
}

// room reports whether a label at a place meets neither another one nor the end.
func (m *chart) room(at plotter.XY, labels plotter.XYs) bool {
	first, last := m.thickness[0], m.thickness[len(m.thickness)-1]
	width := 0.09 * (last - first)
	for _, other := range labels {
		if math.Abs(other.X-at.X) < width {
			return false
		}
	}
	return at.X+width <= last
}

// drawColours shows a row of colours for each published film.
func drawColours(m *chart) (*plot.Plot, error) {
	p := plot.New()
	p.X.Label.Text, p.Y.Label.Text = "thickness of the film (nm) and colour of the wafer", "index"
	last := len(m.thickness) - 1
	p.X.Min, p.X.Max, p.Y.Min, p.Y.Max = m.thickness[0], m.thickness[last], 0, float64(len(m.films))
	p.X.Tick.Marker = picture.Every(20, p.X.Min, p.X.Max)
	var ticks plot.ConstantTicks
	for k, f := range m.films {
		bottom := float64(len(m.films) - 1 - k)
		ticks = append(ticks, plot.Tick{Value: bottom + 0.5, Label: fmt.Sprintf("%.2f", f.index)})
		for c := range last {
			// Each box reaches to the end and is covered by the next: no seams.
			a, b := m.thickness[c], m.thickness[last]
			box, err := plotter.NewPolygon(plotter.XYs{{X: a, Y: bottom}, {X: b, Y: bottom}, {X: b, Y: bottom + 0.92}, {X: a, Y: bottom + 0.92}})
			if err != nil {
				return nil, err
			}
			box.Color, box.LineStyle.Width = screen(m.colours[k][c]), 0
			p.Add(box)
		}
	}
	p.Y.Tick.Marker = ticks
	p.Y.Tick.LineStyle.Width, p.Y.LineStyle.Width = 0, 0
	return p, nil
}

// drawSpectra shows bare silicon, the best published single and double layer with
// the band of their thicknesses, and the best two indices.
func drawSpectra(o options, w *wafer, coatings []coating) (*plot.Plot, error) {
	p := picture.Panel(fmt.Sprintf("reflectance, band: thickness ±%g %%", o.spread), "wavelength (nm)", "reflectance")
	best := map[int]coating{}
	for _, c := range coatings[3:] {
		if n := len(c.films); c.entered > best[n].entered {
			best[n] = c
		}
	}
	lines := []struct {
		coating
		color  color.RGBA
		dashes []vg.Length
		band   bool
	}{
		{coatings[0], picture.Grey, picture.Dotted, false},
		{best[1], picture.Ink, picture.Solid, true},
		{best[2], picture.Rust, picture.Dashed, true},
		{coatings[2], picture.Ochre, picture.Mixed, false},
	}
	for _, v := range lines {
		if !v.band {
			continue
		}
		n := len(w.wavelength)
		outline := make(plotter.XYs, 2*n)
		for i, l := range w.wavelength {
			outline[i], outline[2*n-1-i] = plotter.XY{X: l, Y: v.low[i]}, plotter.XY{X: l, Y: v.high[i]}
		}
		area, err := plotter.NewPolygon(outline)
		if err != nil {
			return nil, err
		}
		pale := v.color
		pale.R, pale.G, pale.B, pale.A = pale.R/4, pale.G/4, pale.B/4, 64 // a quarter, alpha premultiplied
		area.Color, area.LineStyle.Width = pale, 0
		p.Add(area)
	}
	for _, v := range lines {
		if err := picture.Line(p, v.name, w.wavelength, v.spectrum, v.color, v.dashes); err != nil {
			return nil, err
		}
	}
	p.Legend.Top, p.Legend.XOffs, p.Legend.YOffs = true, -4, -2
	p.Legend.TextStyle.Font.Size = 10
	p.Y.Min, p.Y.Max = 0, math.Ceil(14*p.Y.Max)/10 // the legend stands above silicon
	p.X.Tick.Marker, p.Y.Tick.Marker = picture.Every(100, o.first, o.last), picture.Every(0.1, 0, p.Y.Max)
	return p, nil
}

// screen is the colour on a screen, moved to what it can show.
func screen(t spectrum.Tristimulus) color.Color {
	rgb, _ := t.SRGB()
	b := func(v float64) uint8 { return uint8(math.Round(255 * v)) }
	return color.RGBA{R: b(rgb[0]), G: b(rgb[1]), B: b(rgb[2]), A: 255}
}
