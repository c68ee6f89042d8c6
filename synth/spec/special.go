package spec

import (
	"regexp"
	"slices"
	"strconv"
	"strings"

	"go.yaml.in/yaml/v3"
)

const partAllowed = "letters, digits, '-', '_' and '.', 1 to 64 of them, the first a letter, a digit or '_'"

var (
	partName = regexp.MustCompile(`^[A-Za-z0-9_][A-Za-z0-9_.-]{0,63}$`)
	// Names that a common file system takes for a device, with any ending.
	deviceName = regexp.MustCompile(`(?i)^(con|prn|aux|nul|com[0-9]|lpt[0-9])(\.|$)`)
)

func partField() field[Spec] {
	schema := object{{"type", []string{"string", "number"}}, {"pattern", partName.String()}}
	return field[Spec]{name: "part", doc: "name of the part, of the output folder and of its files", allowed: partAllowed, schema: schema,
		read: func(r *reader, w where, s *Spec) {
			name, ok := r.text(w)
			if !ok {
				return
			}
			if !partName.MatchString(name) || strings.HasSuffix(name, ".") || deviceName.MatchString(name) {
				f := Fault{Path: w.path, Found: describe(w.val), Allowed: partAllowed}
				if strings.HasSuffix(name, ".") {
					f.Advice = "the last may not be '.'"
				} else if deviceName.MatchString(name) {
					f.Advice = "some file systems keep this name for a device: take another"
				}
				r.fault(w.place(), f)
				return
			}
			s.Part = name
		}}.required()
}

var (
	percentValue = regexp.MustCompile(`^([0-9]+(?:\.[0-9]*)?|\.[0-9]+) ?%$`)
	timeValue    = regexp.MustCompile(`^([0-9]+(?:\.[0-9]*)?|\.[0-9]+) ?ms$`)
)

func percentField() field[Tolerance] {
	const allowed = "a share in percent, above 0% and at most 100%, as 10%"
	schema := object{{"type", "string"}, {"pattern", percentValue.String()}}
	return field[Tolerance]{name: "acceleration", allowed: allowed, schema: schema,
		doc: "largest acceleration error of the follower on the written path as a share of the design's peak, as 10%",
		read: func(r *reader, w where, t *Tolerance) {
			r.seen(w)
			x, ok := suffixed(w, percentValue)
			if !ok || x <= 0 || x > 100 {
				advice := ""
				if w.val.Kind == yaml.ScalarNode && w.val.Style == 0 && decimal.MatchString(w.val.Value) {
					advice = "the unit % is missing"
				}
				r.wrong(w, allowed, advice)
				return
			}
			x /= 100
			t.Acceleration = &x
		}}
}

// suffixed parses a number followed by a unit, one plain or quoted scalar.
func suffixed(w where, form *regexp.Regexp) (float64, bool) {
	if w.val.Kind != yaml.ScalarNode {
		return 0, false
	}
	m := form.FindStringSubmatch(w.val.Value)
	if m == nil {
		return 0, false
	}
	x, err := strconv.ParseFloat(m[1], 64)
	return x, err == nil
}

// draft is an event before times and rest are turned into angles.
type draft struct {
	Event
	rest  bool
	ms    float64 // the duration when Timed
	where where
	share bool // constant_share was given

	inflection bool // inflection was given
	from, to   stated
}

func overSpan() span { return span{noun: "an angle in degrees", lo: 0, hi: 360, above: true} }

const longestEvent = 1e9 // ms: more than any turn at an allowed speed worth having

func eventTable(v Vocabulary) table[draft] {
	verbs := []string{string(Dwell), string(Rise), string(Fall)}
	move := func(kind EventKind, doc string) field[draft] {
		f := number(string(kind), doc, length(), func(d *draft) *float64 { return &d.Lift })
		set := f.read
		f.read = func(r *reader, w where, d *draft) { d.Kind = kind; set(r, w, d) }
		return f.of(string(kind)).required()
	}
	return table[draft]{what: "an event", kinds: verbs,
		fresh: draft{Event: Event{Law: Law{ConstantShare: defaultConstantShare}}},
		place: func(d *draft, p Place) { d.Place = p },
		kind:  func(r *reader, w where) (string, bool) { return eventKind(r, w, verbs) },
		after: finishEvent,
		fields: []field[draft]{
			durationField("dwell", "how long the lift is held: degrees of cam angle, a time, or rest: what is left of 360, once", true).of(string(Dwell)).required(),
			move(Rise, "by how much the lift grows, length"),
			move(Fall, "by how much the lift falls, length; the law runs backwards in time"),
			durationField("over", "how long it takes: degrees of cam angle or a time", false).of(string(Rise), string(Fall)).required(),
			lawField(v).of(string(Rise), string(Fall)),
			shareField().of(string(Rise), string(Fall)),
			inflectionField().of(string(Rise), string(Fall)),
			velocityField(v, "from_velocity", "starts", "the event before", func(d *draft) *stated { return &d.from }).of(string(Rise), string(Fall)),
			velocityField(v, "to_velocity", "ends", "the next event", func(d *draft) *stated { return &d.to }).of(string(Rise), string(Fall)),
		}}
}

// eventKind finds the one of dwell, rise and fall that stands in an event.
func eventKind(r *reader, w where, verbs []string) (string, bool) {
	var kinds []string
	for i := 0; i+1 < len(w.val.Content); i += 2 {
		if k := w.val.Content[i].Value; slices.Contains(verbs, k) && !slices.Contains(kinds, k) {
			kinds = append(kinds, k)
		}
	}
	f := Fault{Path: w.path, Allowed: "one of " + strings.Join(verbs, ", ")}
	switch {
	case len(kinds) == 1:
		return kinds[0], true
	case len(kinds) > 1:
		f.Found, f.Advice = strings.Join(kinds, " and ")+" in one event", "make it two events"
	default:
		f.Found = "an event that is neither dwell nor rise nor fall"
		for i := 0; i+1 < len(w.val.Content) && f.Nearest == ""; i += 2 {
			f.Nearest = nearest(w.val.Content[i].Value, verbs)
		}
	}
	r.fault(w.place(), f)
	return "", false
}

func durationField(name, doc string, rest bool) field[draft] {
	s := overSpan()
	allowed := s.String() + ", or a time as 62.5 ms"
	shapes := []object{s.schema(), {{"type", "string"}, {"pattern", timeValue.String()}}}
	if rest {
		allowed += ", or rest"
		shapes = append(shapes, object{{"const", "rest"}})
	}
	return field[draft]{name: name, doc: doc, allowed: allowed, schema: object{{"oneOf", shapes}},
		read: func(r *reader, w where, d *draft) {
			r.seen(w)
			if rest {
				d.Kind = Dwell // the only event whose duration may be rest
			}
			ms, timed := suffixed(w, timeValue)
			switch {
			case rest && w.val.Kind == yaml.ScalarNode && w.val.Value == "rest":
				d.rest = true
			case timed && ms > 0 && ms <= longestEvent:
				d.Timed, d.ms = true, ms
			default:
				d.Over = r.duration(w, s, allowed)
			}
		}}
}

// duration reads an angle where a time might stand too.
func (r *reader) duration(w where, s span, allowed string) float64 {
	x, advice, ok := plainNumber(w)
	switch {
	case ok && s.holds(x):
		return x
	case ok:
		r.fault(w.place(), Fault{Path: w.path, Found: w.val.Value, Allowed: allowed})
	case withUnit.MatchString(w.val.Value) && w.val.Style == 0:
		r.wrong(w, allowed, "degrees are written without a unit, times in ms")
	default:
		r.wrong(w, allowed, advice)
	}
	return 0
}

func shareField() field[draft] {
	s := span{noun: "a share", lo: 0, hi: 1, above: true, below: true}
	f := number("constant_share", "share of the angle at constant velocity, for the laws that take it, default 0.5", s,
		func(d *draft) *float64 { return &d.Law.ConstantShare })
	set := f.read
	f.read = func(r *reader, w where, d *draft) { d.share = true; set(r, w, d) }
	return f
}

// lawTable is the law {sine: , constant: , cosine: }.
func lawTable() table[Law] {
	return table[Law]{what: "a law", fields: []field[Law]{
		number("sine", "share of the angle where the acceleration follows a sine", share(), func(l *Law) *float64 { return &l.Sine }),
		number("constant", "share of the angle at constant acceleration", share(), func(l *Law) *float64 { return &l.Constant }),
		number("cosine", "share of the angle where the acceleration follows a cosine", share(), func(l *Law) *float64 { return &l.Cosine }),
	}, after: func(r *reader, w where, l *Law, whole bool) {
		const rounding = 1e-9 // three shares written with ten decimals or fewer
		sum := l.Sine + l.Constant + l.Cosine
		if whole && (sum < 1-rounding || sum > 1+rounding) {
			r.fault(w.place(), Fault{Path: w.path, Found: "shares that sum to " + figure(sum), Allowed: "shares of the angle that sum to 1"})
		}
	}}
}

const lawDoc = "the motion law: a name, or the shares of the angle of the general trigonometric family, which sum to 1; left out beside from_velocity or to_velocity it is polynomial"

func lawAllowed(v Vocabulary) string {
	return strings.Join(v.Laws, ", ") + ", " + Polynomial + ", or " + sharesForm + " with shares that sum to 1"
}

func lawField(v Vocabulary) field[draft] {
	t := lawTable()
	names := append(slices.Clone(v.Laws), Polynomial)
	return field[draft]{name: "law", doc: lawDoc, allowed: lawAllowed(v),
		schema: object{{"oneOf", []object{enum(names), t.schema()}}},
		read: func(r *reader, w where, d *draft) {
			d.Law.Place = w.place()
			if w.val.Kind == yaml.MappingNode {
				d.Law.Name = Trigonometric
				readObject(r, w, t, &d.Law)
				return
			}
			r.seen(w)
			if w.val.Kind == yaml.ScalarNode && slices.Contains(names, w.val.Value) {
				d.Law.Name = w.val.Value
				return
			}
			near := ""
			if w.val.Kind == yaml.ScalarNode {
				near = nearest(w.val.Value, names)
			}
			r.fault(w.place(), Fault{Path: w.path, Found: describe(w.val), Allowed: lawAllowed(v), Nearest: near})
		}}
}
