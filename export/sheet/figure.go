package sheet

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"html/template"
	"io"
	"regexp"
	"strings"
)

// Figures stand in the page itself, not in image files, so that the sheet is one file
// and prints sharp. Three SVG documents in one page share its ids: each id and each
// reference to it gets the figure's prefix. A value in quotes cannot occur in the
// text of a well-formed writer that escapes quotes, so attributes are found by pattern.

// reference finds the attributes that carry ids or refer to them.
var reference = regexp.MustCompile(`(\s(?:id|aria-labelledby|aria-describedby|clip-path|mask|filter|fill|stroke|href|xlink:href|` +
	`marker-start|marker-mid|marker-end)=")([^"]*)(")`)

// inline returns the SVG for the page: without prolog, ids prefixed. It refuses what is
// not well formed and what could run or load something.
func inline(prefix string, svg []byte) (template.HTML, error) {
	if len(svg) == 0 {
		return "", nil
	}
	if err := harmless(svg); err != nil {
		return "", fmt.Errorf("sheet: figure %s: %w", prefix, err)
	}
	start := bytes.Index(svg, []byte("<svg"))
	if start < 0 {
		return "", fmt.Errorf("sheet: figure %s: there is no svg element", prefix)
	}
	out := reference.ReplaceAllStringFunc(string(svg[start:]), func(m string) string {
		p := reference.FindStringSubmatch(m)
		return p[1] + prefixed(prefix, strings.TrimSpace(p[1]), p[2]) + p[3]
	})
	return template.HTML(strings.TrimSpace(out)), nil
}

// prefixed puts the prefix before the ids in one attribute's value.
func prefixed(prefix, name, value string) string {
	switch {
	case strings.HasPrefix(name, "id="):
		return prefix + "-" + value
	case strings.HasPrefix(name, "aria-"):
		ids := strings.Fields(value)
		for i := range ids {
			ids[i] = prefix + "-" + ids[i]
		}
		return strings.Join(ids, " ")
	case strings.HasPrefix(value, "#") && strings.Contains(name, "href"):
		return "#" + prefix + "-" + value[1:]
	}
	return strings.ReplaceAll(value, "url(#", "url(#"+prefix+"-")
}

// harmless reads the figure to its end and refuses scripts, foreign content, event
// attributes and links that leave the page.
func harmless(svg []byte) error {
	d := xml.NewDecoder(bytes.NewReader(svg))
	for {
		tok, err := d.Token()
		if err == io.EOF {
			return nil
		}
		if err != nil {
			return fmt.Errorf("not well-formed XML: %w", err)
		}
		e, ok := tok.(xml.StartElement)
		if !ok {
			continue
		}
		switch strings.ToLower(e.Name.Local) {
		case "script", "foreignobject", "style", "image", "iframe", "animate", "set":
			return fmt.Errorf("element %s is not allowed; a figure holds shapes and text", e.Name.Local)
		}
		for _, a := range e.Attr {
			n := strings.ToLower(a.Name.Local)
			if strings.HasPrefix(n, "on") || n == "href" && !strings.HasPrefix(a.Value, "#") {
				return fmt.Errorf("attribute %s=%q is not allowed; a figure loads and runs nothing", a.Name.Local, a.Value)
			}
		}
	}
}
