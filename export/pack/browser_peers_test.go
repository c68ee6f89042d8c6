//go:build peers

package pack

import (
	"context"
	"fmt"
	"math"
	"net/url"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/accessibility"
	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
	"github.com/chromedp/chromedp/kb"
)

// browser is a headless Chromium (Debian package chromium) with one tab, and what it complained of.
type browser struct {
	ctx   context.Context
	lock  sync.Mutex
	wrong []string
}

// startBrowser fails the test when there is no browser.
func startBrowser(t *testing.T) *browser {
	t.Helper()
	options := append(chromedp.DefaultExecAllocatorOptions[:], chromedp.ExecPath("chromium"), chromedp.NoSandbox, chromedp.DisableGPU,
		chromedp.Flag("disable-quic", true), chromedp.Flag("disable-background-networking", true), chromedp.Flag("disable-component-update", true),
		chromedp.Flag("disable-sync", true), chromedp.UserDataDir(t.TempDir()))
	all, endAll := chromedp.NewExecAllocator(context.Background(), options...)
	tab, endTab := chromedp.NewContext(all)
	ctx, stop := context.WithTimeout(tab, 5*time.Minute)
	t.Cleanup(func() { stop(); endTab(); endAll() })
	b := &browser{ctx: ctx}
	none := chromedp.Do(ctx) // starts the browser
	if none == nil {
		none = chromedp.Listen(ctx, b.listen)
	}
	if none == nil {
		_, none = chromedp.Call(ctx, network.Enable, network.EnableParams{})
	}
	if none == nil {
		_, none = chromedp.Call(ctx, log.Enable, cdp.Empty{})
	}
	if none != nil {
		t.Fatalf("chromium is needed: %v", none)
	}
	return b
}

// listen notes every complaint of the page and every request that leaves it.
func (b *browser) listen(event any) {

	switch e := event.(type) {
	case *network.EventRequestWillBeSent:
		if !strings.HasPrefix(e.Request.URL, "file:") && !strings.HasPrefix(e.Request.URL, "data:") {
			b.note("a request left the page: " + e.Request.URL)
		}
	case *runtime.EventExceptionThrown:
		b.note(fmt.Sprintf("exception: %+v", e.ExceptionDetails))
	case *runtime.EventConsoleAPICalled:
		b.note(fmt.Sprintf("console %s: %v", e.Type, e.Args))
	case *log.EventEntryAdded:
		b.note(fmt.Sprintf("log %s: %s", e.Entry.Level, e.Entry.Text))
	}
}

func (b *browser) note(s string) {
	b.lock.Lock()
	defer b.lock.Unlock()
	b.wrong = append(b.wrong, s)
}

// run does the actions, or fails the test.
func (b *browser) run(t *testing.T, actions ...chromedp.Action[chromedp.Void]) {
	t.Helper()
	if err := chromedp.Do(b.ctx, actions...); err != nil {
		t.Fatal(err)
	}
}

// media switches between the screen ("") and the printed page ("print").
func (b *browser) media(t *testing.T, medium string) {
	t.Helper()
	if _, err := chromedp.Call(b.ctx, emulation.SetEmulatedMedia, emulation.SetEmulatedMediaParams{Media: medium}); err != nil {
		t.Fatal(err)
	}
}

// ask evaluates a script to a value.
func ask[T any](t *testing.T, b *browser, script string) T {
	t.Helper()
	v, err := chromedp.Run(b.ctx, chromedp.Evaluate[T](script))
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// placed is what the page draws of cam and follower at a cam angle.
type placed struct {
	Gap   float64 // px, between the follower's surface and the contour; negative when they overlap
	Lift  float64 // from where the follower stands on the screen, units or degrees
	Scale float64 // px a unit
	Off   float64 // px, largest distance of a chart's cursor from its place
	Count int     // cursors
}

// move sets the slider and measures on the screen.
const move = `(function (angle) {
  const at = (id) => document.getElementById(id), slider = at("turn-angle");
  slider.value = angle;
  slider.dispatchEvent(new Event("input"));
  const on = (e, x, y) => new DOMPoint(x, y).matrixTransform(e.getScreenCTM());
  const contour = at("turn-contour"), roller = at("turn-roller"), n = 3000, whole = contour.getTotalLength();
  if (contour.points === undefined) {
    contour.points = [];
    for (let i = 0; i < n; i++) { contour.points.push(contour.getPointAtLength(whole * i / n)); }
  }
  const turned = contour.getScreenCTM();
  const developed = Number(at("turn").dataset.developed), period = Math.abs(360 * developed) * turned.a;
  const edge = contour.points.map((p) => p.matrixTransform(turned));
  if (developed !== 0) { // the development goes on after a turn
    edge.push(...edge.map((p) => ({x: p.x - period, y: p.y})), ...edge.map((p) => ({x: p.x + period, y: p.y})));
  }
  const m = at("turn-follower").getScreenCTM(), cam = at("turn-cam").parentNode.getScreenCTM();
  const scale = cam.a;
  let gap = Infinity;
  if (roller !== null) {
    const c = on(roller, roller.cx.baseVal.value, roller.cy.baseVal.value);
    for (const p of edge) { gap = Math.min(gap, Math.hypot(p.x - c.x, p.y - c.y) - roller.r.baseVal.value * scale); }
  } else {
    const bars = document.querySelectorAll("#turn-follower line"), bar = bars[bars.length - 1];
    const a = on(bar, bar.x1.baseVal.value, bar.y1.baseVal.value), b = on(bar, bar.x2.baseVal.value, bar.y2.baseVal.value);
    const o = on(at("turn-cam"), 0, 0), length = Math.hypot(b.x - a.x, b.y - a.y);
    const side = (p) => ((b.x - a.x) * (p.y - a.y) - (b.y - a.y) * (p.x - a.x)) / length, inside = Math.sign(side(o));
    for (const p of edge) { gap = Math.min(gap, inside * side(p)); }
  }
  const pivot = Number(at("turn").dataset.pivot);
  const lift = developed !== 0 ? (cam.f - m.f) / scale : pivot === 0 ? (m.e - cam.e) / scale : Math.abs(Math.atan2(m.b, m.a)) * 180 / Math.PI;
  const frames = document.querySelectorAll("rect.over-angle"), rings = document.querySelectorAll("circle.by-polar"), lines = document.querySelectorAll(".turn-cursor");
  let off = 0;
  frames.forEach((r, i) => {
    const x = r.x.baseVal.value + r.width.baseVal.value * angle / 360, l = lines[i];
    off = Math.max(off, Math.abs(on(r, x, 0).x - on(l, l.x1.baseVal.value, 0).x), Math.abs(on(r, x, 0).x - on(l, l.x2.baseVal.value, 0).x));
  });
  return {Gap: gap, Lift: lift, Scale: scale, Off: off, Count: lines.length - rings.length === frames.length ? lines.length : 0};
})(%v)`

// crowded lists the texts of the figures whose boxes overlap or leave their figure. A box is that of getBBox, less
// the room above capitals and below the base line that no letter here needs.
const crowded = `(function () {
  const found = [];
  document.querySelectorAll("figure > svg").forEach((svg) => {
    const view = svg.viewBox.baseVal, boxes = [];
    svg.querySelectorAll("text").forEach((e) => {
      const b = e.getBBox(), m = svg.getScreenCTM().inverse().multiply(e.getScreenCTM());
      const y = b.y + 0.2 * b.height, h = 0.65 * b.height;
      const ps = [[b.x, y], [b.x + b.width, y], [b.x, y + h], [b.x + b.width, y + h]].map((p) => new DOMPoint(p[0], p[1]).matrixTransform(m));
      boxes.push({text: e.textContent, x0: Math.min(...ps.map((p) => p.x)), x1: Math.max(...ps.map((p) => p.x)), y0: Math.min(...ps.map((p) => p.y)), y1: Math.max(...ps.map((p) => p.y))});
    });
    boxes.forEach((a, i) => {
      if (a.x0 < view.x || a.y0 < view.y || a.x1 > view.x + view.width || a.y1 > view.y + view.height) { found.push(a.text + " leaves the figure"); }
      boxes.slice(0, i).forEach((b) => {
        if (a.x0 < b.x1 && b.x0 < a.x1 && a.y0 < b.y1 && b.y0 < a.y1) { found.push(a.text + " overlaps " + b.text); }
      });
    });
  });
  return found;
})()`

// spilled lists what is wider than its room: the page, and every text outside the boxes that scroll.
const spilled = `(function () {
  const found = [], page = document.documentElement;
  if (page.scrollWidth > page.clientWidth) { found.push("the page is " + page.scrollWidth + " px wide on " + page.clientWidth); }
  document.querySelectorAll("h1, h2, h3, p, li, dt, dd, output, label, button, .verdict").forEach((e) => {
    if (e.scrollWidth > e.clientWidth + 1 && getComputedStyle(e).display !== "inline") { found.push(e.tagName + " " + e.textContent.slice(0, 60)); }
    const r = e.getBoundingClientRect();
    if (r.width > 0 && (r.left < -0.5 || r.right > page.clientWidth + 0.5)) { found.push(e.tagName + " beyond the page: " + e.textContent.slice(0, 60)); }
  });
  return found;
})()`

// cutOff lists the tables and figures that paper would cut off on the right, and the controls that paper shows.
const cutOff = `(function () {
  const found = [], width = document.documentElement.clientWidth;
  document.querySelectorAll("table, figure, figure > svg").forEach((e) => {
    if (e.getBoundingClientRect().right > width + 0.5) { found.push(e.tagName + " is cut off: " + e.textContent.slice(0, 40)); }
  });
  document.querySelectorAll("button, input, .turn-cursor").forEach((e) => {
    if (e.getClientRects().length > 0) { found.push(e.tagName + " is printed"); }
  });
  return found;
})()`

// The release sheet of every sample in a browser: no complaint, no request, no text over another, nothing wider
// than the window of a phone or a desk; and at 12 cam angles the follower as drawn touches the contour as
// drawn and stands at the motion's lift, with every chart's cursor in its place.
func TestPeerBrowserSheets(t *testing.T) {
	b := startBrowser(t)
	dir := t.TempDir()
	worst := 0.0
	for _, name := range releasingSamples(t) {
		p, j, err := work(readSample(t, name), options())
		if err != nil {
			t.Fatal(err)
		}
		page := sheetFile(t, dir, p)
		b.run(t, chromedp.EmulateViewport(1280, 900), chromedp.Navigate(page))
		for _, s := range ask[[]string](t, b, crowded) {
			t.Errorf("%s: %s", p.Part, s)
		}
		for _, width := range []int64{360, 1280} {
			b.run(t, chromedp.EmulateViewport(width, 900))
			for _, s := range ask[[]string](t, b, spilled) {
				t.Errorf("%s, %d px: %s", p.Part, width, s)
			}
		}
		// On paper: the width of A4 and of Letter less the page's margins of 13 mm, at 96 px an inch.
		b.media(t, "print")
		for _, width := range []int64{695, 718} {
			b.run(t, chromedp.EmulateViewport(width, 1000))
			for _, s := range append(ask[[]string](t, b, spilled), ask[[]string](t, b, cutOff)...) {
				t.Errorf("%s, printed %d px wide: %s", p.Part, width, s)
			}
		}
		b.media(t, "")
		b.run(t, chromedp.EmulateViewport(1280, 900))
		for k := range 12 {
			angle := float64(30*k) + 2.5
			at := ask[placed](t, b, fmt.Sprintf(move, angle))
			if !(math.Abs(at.Gap) <= 0.5) {
				t.Errorf("%s at %g°: follower and contour are %.3f px apart", p.Part, angle, at.Gap)
			}
			if want := j.cam.LiftAt(angle).S; !(math.Abs(at.Lift-want) <= 1e-4*math.Max(1, want)) {
				t.Errorf("%s at %g°: the figure's lift is %.6f, the motion's %.6f", p.Part, angle, at.Lift, want)
			}
			if !(at.Off <= 0.05) || at.Count < 6 {
				t.Errorf("%s at %g°: %d cursors, %.3f px from their places", p.Part, angle, at.Count, at.Off)
			}
			worst = math.Max(worst, math.Abs(at.Gap))
		}
	}
	for _, s := range b.wrong {
		t.Error(s)
	}
	t.Logf("the follower is at most %.3f px from the contour", worst)
}

// sheetFile writes the release sheet of a pack and returns its address.
func sheetFile(t *testing.T, dir string, p *Pack) string {
	t.Helper()
	for _, f := range p.Files {
		if f.Name == p.Part+".report.html" {
			file := filepath.Join(dir, f.Name)
			if err := os.WriteFile(file, f.Data, 0o644); err != nil {
				t.Fatal(err)
			}
			return (&url.URL{Scheme: "file", Path: file}).String()
		}
	}
	t.Fatal("no release sheet")
	return ""
}

// The controls of the sheet: play moves them and stops again, arrow keys move the slider, the tool paths come and go,
// every control has a name for a screen reader, a wish for little motion is kept, and without scripts the page
// stands whole and shows no control that would do nothing.
func TestPeerBrowserControls(t *testing.T) {
	b := startBrowser(t)
	p, err := Make(readSample(t, samplesFolder+"/stick-lift.yaml"), options())
	if err != nil {
		t.Fatal(err)
	}
	page := sheetFile(t, t.TempDir(), p)
	b.run(t, chromedp.EmulateViewport(1280, 900), chromedp.Navigate(page))
	slider := func() float64 { return ask[float64](t, b, `Number(document.getElementById("turn-angle").value)`) }

	b.run(t, chromedp.Focus("#turn-angle"), chromedp.KeyEvent(kb.ArrowRight), chromedp.KeyEvent(kb.ArrowRight))
	if got := slider(); got != 1 {
		t.Errorf("two arrow keys bring the slider to %v, want 1", got)
	}
	before := ask[string](t, b, `document.getElementById("turn-cam").getAttribute("transform") + document.getElementById("turn-now").textContent`)
	b.run(t, chromedp.Focus("#turn-play"), chromedp.KeyEvent(" "))
	if _, err := chromedp.Run(b.ctx, chromedp.Poll[bool](`Number(document.getElementById("turn-angle").value) > 20`, chromedp.WithPollingTimeout(20*time.Second))); err != nil {
		t.Fatalf("play does not move the slider: %v", err)
	}
	if after := ask[string](t, b, `document.getElementById("turn-cam").getAttribute("transform") + document.getElementById("turn-now").textContent`); after == before {
		t.Error("play moves the slider but not the cam")
	}
	b.run(t, chromedp.Click("#turn-play"))
	at := slider()
	b.run(t, chromedp.Sleep(300*time.Millisecond))
	if got := slider(); got != at {
		t.Errorf("after the second press the slider runs on from %v to %v", at, got)
	}
	if got := ask[string](t, b, `document.getElementById("turn-play").textContent + document.getElementById("turn-play").getAttribute("aria-pressed")`); got != "Playfalse" {
		t.Errorf("after the second press the button says %q", got)
	}

	shown := func() string {
		return ask[string](t, b, `getComputedStyle(document.getElementById("turn-tools")).display`)
	}
	if got := shown(); got != "none" {
		t.Errorf("tool paths are shown before they are asked for: %q", got)
	}
	b.run(t, chromedp.Focus("#turn-tool"), chromedp.KeyEvent(" "))
	if got := shown(); got == "none" || ask[int](t, b, `document.querySelectorAll("#turn-tools path").length`) != 2 {
		t.Errorf("tool paths are not shown: %q", got)
	}

	// The measures of the other test see what is wrong.
	ask[bool](t, b, `(function () {
  const e = document.querySelector("figure > svg text"), p = document.createElement("p");
  e.parentNode.appendChild(e.cloneNode(true));
  p.textContent = "wide".repeat(600);
  p.style.overflowWrap = "normal";
  document.body.appendChild(p);
  return true;
})()`)
	if a, b := ask[[]string](t, b, crowded), ask[[]string](t, b, spilled); len(a) != 1 || len(b) < 2 {
		t.Errorf("a doubled text and a word without an end are seen as %q and %q", a, b)
	}

	tree, err := chromedp.Call(b.ctx, accessibility.GetFullAXTree, accessibility.GetFullAXTreeParams{})
	if err != nil {
		t.Fatal(err)
	}
	controls := 0
	for _, n := range tree.Nodes {
		if n.Ignored || n.Role == nil {
			continue
		}
		switch role := string(n.Role.Value); role {
		case `"button"`, `"slider"`, `"checkbox"`, `"link"`, `"image"`, `"img"`, `"SvgRoot"`:
			if n.Name == nil || len(n.Name.Value) <= len(`""`) {
				t.Errorf("a %s has no name", role)
			}
			if role != `"image"` && role != `"img"` && role != `"SvgRoot"` {
				controls++
			}
		}
	}
	if controls != 3 {
		t.Errorf("%d controls in the accessibility tree, want button, slider and checkbox", controls)
	}

	media := emulation.SetEmulatedMediaParams{Features: []*emulation.MediaFeature{{Name: "prefers-reduced-motion", Value: "reduce"}}}
	if _, err := chromedp.Call(b.ctx, emulation.SetEmulatedMedia, media); err != nil {
		t.Fatal(err)
	}
	b.run(t, chromedp.Reload())
	if !ask[bool](t, b, `document.getElementById("turn-play").hidden`) {
		t.Error("play is offered to who wants little motion")
	}
	if _, err := chromedp.Call(b.ctx, emulation.SetScriptExecutionDisabled, emulation.SetScriptExecutionDisabledParams{Value: true}); err != nil {
		t.Fatal(err)
	}
	b.run(t, chromedp.Reload())
	if got := ask[string](t, b, `getComputedStyle(document.getElementById("turn-controls")).display + " " + document.querySelectorAll("figure > svg").length + " " + document.querySelectorAll(".turn-cursor").length`); got != "none 4 0" {
		t.Errorf("without scripts: %q, want no controls, 4 figures, no cursors", got)
	}
	for _, s := range b.wrong {
		t.Error(s)
	}
}
