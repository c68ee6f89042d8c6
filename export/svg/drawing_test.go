package svg

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"io"
	"os"
	"strconv"
	"strings"
	"testing"
)

// written is a text as found in the file.
type written struct {
	text string
	box  box
}

// textBoxes reads a figure with an XML parser and returns the page and every text
// with a box of 0.6 em a character. It shares no code with the layout.
func textBoxes(t *testing.T, data []byte) (page box, texts []written) {
	t.Helper()
	dec := xml.NewDecoder(bytes.NewReader(data))
	var open *written
	var size float64
	var anchor, turn string
	for {
		tok, err := dec.Token()
		if err == io.EOF {
			return page, texts
		}
		if err != nil {
			t.Fatalf("not well formed: %v\n%s", err, data)
		}
		switch e := tok.(type) {
		case xml.StartElement:
			at := map[string]string{}
			for _, a := range e.Attr {
				at[a.Name.Local] = a.Value
			}
			f := func(k string) float64 {
				v, err := strconv.ParseFloat(strings.TrimSuffix(at[k], "mm"), 64)
				if err != nil {
					t.Fatalf("%s of %s: %v", k, e.Name.Local, err)
				}
				return v
			}
			switch e.Name.Local {
			case "svg":
				page = box{0, 0, f("width"), f("height")}
				if want := fmt.Sprintf("0 0 %g %g", page.x1, page.y1); at["viewBox"] != want {
					t.Errorf("viewBox %q, want %q: the sheet is not at true size", at["viewBox"], want)
				}
			case "text":
				size, anchor, turn = f("font-size"), at["text-anchor"], at["transform"]
				open = &written{box: box{f("x"), f("y"), 0, 0}}
			}
		case xml.CharData:
			if open != nil {
				open.text += string(e)
			}
		case xml.EndElement:
			if e.Name.Local != "text" {
				continue
			}
			x, y := open.box.x0, open.box.y0
			w := 0.6 * size * float64(len([]rune(open.text)))
			shift := map[string]float64{"": 0, "middle": w / 2, "end": w}[anchor]
			open.box = box{x - shift, y - 0.72*size, x - shift + w, y + 0.2*size}
			if strings.HasPrefix(turn, "rotate(-90") {
				open.box = box{x - 0.72*size, y + shift - w, x + 0.2*size, y + shift}
			}
			texts = append(texts, *open)
			open = nil
		}
	}
}

// checkTexts asserts that no two texts overlap and none leaves the sheet.
func checkTexts(t *testing.T, data []byte) []written {
	t.Helper()
	page, texts := textBoxes(t, data)
	if len(texts) == 0 {
		t.Fatal("no text found")
	}
	for i, a := range texts {
		if !page.holds(a.box) {
			t.Errorf("%q at %.1f is outside the sheet %.1f", a.text, a.box, page)
		}
		for _, b := range texts[:i] {
			if a.box.meets(b.box) {
				t.Errorf("%q at %.1f overlaps %q at %.1f", a.text, a.box, b.text, b.box)
			}
		}
	}
	return texts
}

func has(texts []written, want string) bool {
	for _, w := range texts {
		if strings.Contains(w.text, want) {
			return true
		}
	}
	return false
}

// show writes a figure to the folder named by SVG_OUT, for looking at it.
func show(t *testing.T, name string, data []byte) {
	t.Helper()
	if dir := os.Getenv("SVG_OUT"); dir != "" {
		if err := os.WriteFile(dir+"/"+name+".svg", data, 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

func drawings() map[string]DrawingData {
	m := map[string]DrawingData{
		"plain":   mmCam(5, true).drawing(),
		"inline":  mmCam(0, false).drawing(),
		"right":   mmCam(-8, false).drawing(),
		"refused": mmCam(5, true).drawing(),
		"bare":    mmCam(0, true).drawing(),
		"wordy":   mmCam(5, true).drawing(),
		"holes":   mmCam(5, true).drawing(),
	}
	inch := mmCam(5, true)
	inch.k = 1 / 25.4
	m["inch"] = inch.drawing()
	big := mmCam(20, true)
	big.rb, big.r, big.rise = 210, 30, 60
	m["big"] = big.drawing()
	small := mmCam(0.5, false)
	small.rb, small.r, small.rise = 6, 1.5, 1.5
	d := small.drawing()
	d.Bore, d.Holes = &Bore{Diameter: 3}, []Hole{{1, 4.2, 90}}
	m["small"] = d

	d = m["refused"]
	d.Released = false
	m["refused"] = d
	d = m["bare"]
	d.Bore, d.Holes, d.NoDatum, d.Cautions, d.Notes = nil, nil, true, nil, nil
	d.Material, d.Hardness, d.Finish, d.Date, d.Drawn, d.Checked = "", "", "", "", "", ""
	m["bare"] = d
	d = m["wordy"]
	d.Title = strings.Repeat("A very long title of a cam ", 8)
	d.Part = strings.Repeat("part-", 12)
	d.Notes = append(d.Notes, strings.Repeat("Long note without an end in sight. ", 90), strings.Repeat("x", 400))
	m["wordy"] = d
	d = m["holes"]
	d.Holes = nil
	for i := 0; i < 24; i++ {
		d.Holes = append(d.Holes, Hole{4, 30, float64(i) * 15})
	}
	m["holes"] = d
	return m
}

func TestDrawingTextsKeepApart(t *testing.T) {
	for name, d := range drawings() {
		t.Run(name, func(t *testing.T) {
			out, err := Drawing(d)
			if err != nil {
				t.Fatal(err)
			}
			show(t, name, out)
			texts := checkTexts(t, out)
			if got := has(texts, "NOT RELEASED"); got == d.Released {
				t.Errorf("NOT RELEASED shown: %v, released: %v", got, d.Released)
			}
			if !has(texts, "SEEN ON THE MARKED FACE (Z0)") {
				t.Error("the side that is seen is not said")
			}
		})
	}
}
