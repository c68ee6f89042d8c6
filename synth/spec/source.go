package spec

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strconv"
	"strings"
	"unicode/utf8"

	"go.yaml.in/yaml/v3"
)

// From bytes to one tree of nodes with places.
//
// The obvious way, decoding into a struct, reports no column, takes "20" in
// quotes and 010 for numbers, and stops or loses the column when several things
// are wrong. So the library only parses; every node is then read by hand.
// A parser that repairs what it does not understand would be a danger here: a
// comma forgotten in {x: 2 y: 3} must be refused. yaml/v3 refuses it, and did
// not panic or hang in any trial; its one weakness, syntax errors with a line
// that may be off and no column, is made good in place.go.

// Limits of a spec file. A spec is some thousand bytes and five levels deep.
const (
	mostBytes = 1 << 20
	mostDepth = 16
)

// parse returns the root of the only document in data, or the faults that keep
// data from being a plain YAML document.
func parse(file string, data []byte) (root *yaml.Node, faults Faults) {
	at := func(p Place, found, allowed, advice string) (*yaml.Node, Faults) {
		return nil, Faults{{File: file, Line: p.Line, Column: p.Column, Found: found, Allowed: allowed, Advice: advice}}
	}
	if len(data) > mostBytes {
		return at(Place{1, 1}, fmt.Sprintf("a file of more than %d bytes", mostBytes), fmt.Sprintf("at most %d bytes", mostBytes), "a spec holds one cam")
	}
	data = withoutMark(data)
	if bad := invalidUTF8(data); bad >= 0 {
		return at(placeOf(data, bad), fmt.Sprintf("the byte 0x%02x, which is not UTF-8 text", data[bad]), "", "save the file as UTF-8")
	}
	root, second, err := documents(data)
	switch {
	case errors.Is(err, io.EOF):
		return at(Place{1, 1}, "an empty file", "a spec", "`lobewright new` prints a spec to start from")
	case err != nil:
		message := plainMessage(err)
		return at(syntaxPlace(data, message, err), "no valid YAML: "+inPlainWords(message), "", "look here for a missing quote, bracket, comma or colon, or a wrong indentation")
	case second != nil:
		return at(Place{second.Line, second.Column}, "a second document after ---", "one cam a file", "put it into a file of its own")
	}
	if faults := unplain(file, data, root); len(faults) > 0 {
		return nil, faults
	}
	return root, nil
}

// documents parses data and returns the first document's root and, when there
// is one, the second's. A panic in the library comes back as an error.
func documents(data []byte) (first, second *yaml.Node, err error) {
	defer func() {
		if p := recover(); p != nil {
			err = fmt.Errorf("yaml: %v", p)
		}
	}()
	dec := yaml.NewDecoder(bytes.NewReader(data))
	var one, two yaml.Node
	if err := dec.Decode(&one); err != nil {
		return nil, nil, err
	}
	switch err := dec.Decode(&two); {
	case errors.Is(err, io.EOF):
		return content(&one), nil, nil
	case err != nil:
		return nil, nil, err
	}
	return content(&one), content(&two), nil
}

func content(doc *yaml.Node) *yaml.Node {
	if doc.Kind == yaml.DocumentNode && len(doc.Content) == 1 {
		return doc.Content[0]
	}
	return doc
}

// withoutMark strips a byte order mark.
func withoutMark(data []byte) []byte {
	return bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
}

// invalidUTF8 returns the offset of the first byte that is not UTF-8, or -1.
func invalidUTF8(data []byte) int {
	for i := 0; i < len(data); {
		r, n := utf8.DecodeRune(data[i:])
		if r == utf8.RuneError && n == 1 {
			return i
		}
		i += n
	}
	return -1
}

// unplain finds what a spec may not use although YAML has it: anchors, aliases,
// tags, merge keys and deep nesting.
func unplain(file string, data []byte, root *yaml.Node) Faults {
	var faults Faults
	lines := sourceLines(data)
	fault := func(n *yaml.Node, found string) {
		faults = append(faults, Fault{File: file, Line: n.Line, Column: n.Column, Found: found,
			Allowed: "plain keys, numbers, text, lists and maps", Advice: "write the value out"})
	}
	var walk func(n *yaml.Node, depth int)
	walk = func(n *yaml.Node, depth int) {
		if len(faults) >= mostFaults {
			return
		}
		if n.Line > len(lines) { // a value left out at the very end: the library ends the last line itself
			n.Line, n.Column = len(lines), utf8.RuneCountInString(lines[len(lines)-1])+1
		}
		switch {
		case depth > mostDepth:
			fault(n, fmt.Sprintf("values nested more than %d deep", mostDepth))
			return
		case n.Kind == yaml.AliasNode:
			fault(n, "the alias "+quoted("*"+n.Value))
			return
		case n.Anchor != "":
			fault(n, "the anchor "+quoted("&"+n.Anchor))
		case n.Style&yaml.TaggedStyle != 0, startsWith(lines, n, '!'):
			fault(n, "the tag "+quoted(n.Tag))
		case n.Tag == "!!merge":
			fault(n, "the merge key <<")
		}
		for _, child := range n.Content {
			walk(child, depth+1)
		}
	}
	walk(root, 1)
	return faults.sorted()
}

// sourceLines splits as YAML does.
func sourceLines(data []byte) []string {
	breaks := strings.NewReplacer("\r\n", "\n", "\r", "\n", "\u0085", "\n", "\u2028", "\n", "\u2029", "\n")
	return strings.Split(breaks.Replace(string(data)), "\n")
}

func startsWith(lines []string, n *yaml.Node, sign rune) bool {
	if n.Line < 1 || n.Line > len(lines) || len(lines[n.Line-1]) < n.Column {
		return false
	}
	column := 1
	for _, r := range lines[n.Line-1] {
		if column == n.Column {
			return r == sign
		}
		column++
	}
	return false
}

// plainMessage strips the library's prefixes from a message.
func plainMessage(err error) string {
	m := strings.TrimPrefix(err.Error(), "yaml: ")
	return linePrefix.ReplaceAllString(m, "")
}

var linePrefix = regexp.MustCompile(`^line (\d+): `)

// inPlainWords says a message of the library in the words of a spec's author.
func inPlainWords(message string) string {
	switch message {
	case "found unexpected end of stream":
		return "a quote that is never closed"
	case "did not find expected ',' or ']'":
		return "a list [ ] whose values are not followed by , or ]"
	case "did not find expected ',' or '}'":
		return "a map { } whose values are not followed by , or }"
	case "did not find expected key", "did not find expected '-' indicator":
		return "an indentation or a bracket that fits nothing above"
	case "could not find expected ':'":
		return "a key without a colon and a blank"
	case "found character that cannot start any token":
		return "a character that cannot begin a value"
	case "found a tab character that violates indentation":
		return "a tab in the indentation"
	case "mapping values are not allowed in this context":
		return "a second colon in a value, or a key indented deeper than its neighbors"
	case "did not find expected node content":
		return "nothing where a value must stand"
	}
	return message
}

// libraryLine is the line in the library's message, 1 when it names none.
func libraryLine(err error) int {
	m := linePrefix.FindStringSubmatch(strings.TrimPrefix(err.Error(), "yaml: "))
	if m == nil {
		return 1
	}
	n, _ := strconv.Atoi(m[1]) // digits only; an overflow cannot come from 1 MiB
	return max(n, 1)
}
