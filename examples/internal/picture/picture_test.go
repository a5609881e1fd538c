package picture

import (
	"bytes"
	"os"
	"path/filepath"
	"testing"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// TestSave: each format begins with the signature of its standard, and other
// names are refused before anything is drawn.
func TestSave(t *testing.T) {
	dir := t.TempDir()
	if ticks := Every(0.1, 0, 1); len(ticks) != 11 || ticks[3].Label != "0.3" || ticks[0].Label != "0" {
		t.Errorf("ticks %v", ticks)
	}
	for name, signature := range map[string]string{"a.png": "\x89PNG", "a.svg": "<?xml", "a.pdf": "%PDF-"} {
		path := filepath.Join(dir, name)
		err := Save(path, 8*vg.Centimeter, 8*vg.Centimeter, func(c draw.Canvas) error {
			p, q := Panel("title", "x", "a wide axis"), Panel("", "x", "y")
			if err := Line(p, "line", []float64{0, 1}, []float64{0, 1e6}, Ink, Dashed); err != nil {
				return err
			}
			q.X.Tick.Marker = Every(0.1, 0, 1)
			Column(c, []*plot.Plot{p, q}, []vg.Length{4 * vg.Centimeter, 4 * vg.Centimeter})
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
		b, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.HasPrefix(b, []byte(signature)) {
			t.Errorf("%s begins with %q", name, b[:min(len(b), 8)])
		}
	}
	for _, name := range []string{"", "a", ".png", "a.gif", "a.PNG", "b/a.png", "../a.png"} {
		if err := CheckName(name); err == nil {
			t.Errorf("%q is accepted", name)
		}
	}
}
