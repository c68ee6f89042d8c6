package pack

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"strconv"
	"strings"
	"testing"

	"lobewright/export/svg"
)

// label is a text of a figure with the box it takes, mm.
type label struct {
	text           string
	x0, y0, x1, y1 float64
}

// labels reads the texts of a figure with an XML parser, 0.55 em wide a character, as wide as a common
// sans-serif face runs on average, and the size of its page.
func labels(t *testing.T, data []byte) (w, h float64, all []label) {
	t.Helper()
	d := xml.NewDecoder(bytes.NewReader(data))
	var open *label
	var size float64
	var anchor string
	turned := false
	for {
		tok, err := d.Token()
		if err != nil {
			return w, h, all
		}
		switch e := tok.(type) {
		case xml.StartElement:
			at := func(name string) string {
				for _, a := range e.Attr {
					if a.Name.Local == name {
						return strings.TrimSuffix(a.Value, "mm")
					}
				}
				return ""
			}
			number := func(name string) float64 {
				v, err := strconv.ParseFloat(at(name), 64)
				if err != nil {
					t.Fatal(err)
				}
				return v
			}
			switch e.Name.Local {
			case "svg":
				w, h = number("width"), number("height")
			case "text":
				size, anchor, turned = number("font-size"), at("text-anchor"), at("transform") != ""
				open = &label{x0: number("x"), y0: number("y")}
			}
		case xml.CharData:
			if open != nil {
				open.text += string(e)
			}
		case xml.EndElement:
			if open == nil || e.Name.Local != "text" {
				continue
			}
			x, y, long := open.x0, open.y0, 0.55*size*float64(len([]rune(open.text)))
			back := map[string]float64{"": 0, "middle": long / 2, "end": long}[anchor]
			*open = label{open.text, x - back, y - 0.72*size, x - back + long, y + 0.2*size}
			if turned {
				*open = label{open.text, x - 0.72*size, y + back - long, x + 0.2*size, y + back}
			}
			all = append(all, *open)
			open = nil
		}
	}
}

// What people look at of every sample: see the checks.
func TestSamplesAreDrawn(t *testing.T) {
	t.Parallel()
	for _, name := range releasingSamples(t) {
		_, j, err := work(readSample(t, name), options())
		if err != nil {
			t.Fatal(err)
		}
		t.Run(j.spec.Part, func(t *testing.T) {
			checkTexts(t, j)
			checkToolPaths(t, j)
			checkTrace(t, j)
		})
	}
}

// checkTexts: on drawing and charts, on every sheet and with the tool paths shown, no text stands on another and
// none leaves the sheet.
func checkTexts(t *testing.T, j *job) {
	f, err := j.figures(true)
	if err != nil {
		t.Fatal(err)
	}
	figures := map[string][]byte{"drawing": f.Drawing, "motion": f.Motion, "error": f.Deviation}
	for _, sheet := range []string{"A4", "A3", "Letter"} {
		j.opt.Sheet, j.opt.ToolPaths = sheet, true
		if figures["drawing "+sheet], err = svg.Drawing(j.drawingData(j.head(true))); err != nil {
			t.Fatal(err)
		}
	}
	for what, data := range figures {
		w, h, all := labels(t, data)
		if len(all) < 20 {
			t.Errorf("%s: %d texts", what, len(all))
		}
		for i, a := range all {
			if a.x0 < 0 || a.y0 < 0 || a.x1 > w || a.y1 > h {
				t.Errorf("%s: %q leaves the sheet", what, a.text)
			}
			for _, b := range all[:i] {
				if a.x0 < b.x1 && b.x0 < a.x1 && a.y0 < b.y1 && b.y0 < a.y1 {
					t.Errorf("%s: %q overlaps %q", what, a.text, b.text)
				}
			}
		}
	}
}

// A swinging follower's drawing shows pivot and arm and says whether the arm leads or trails. On tray-tilt the cam turns
// clockwise under a roller above the center line, so its surface runs to the right, towards the pivot: the arm
// leads. Turned the other way it trails.
func TestArmLeadsOrTrails(t *testing.T) {
	for rotation, want := range map[string]string{"clockwise": "LEADING", "counterclockwise": "TRAILING"} {
		p := changed(t, "tray-tilt", "rotation: clockwise", "rotation: "+rotation)
		drawing := ""
		for _, f := range p.Files {
			if f.Name == "tray-tilt.svg" {
				drawing = string(f.Data)
			}
		}
		for _, text := range []string{fmt.Sprintf("ARM 70, %s", want), "PIVOT, "} {
			if !strings.Contains(drawing, text) {
				t.Errorf("%s: the drawing lacks %q", rotation, text)
			}
		}
	}
}
