package spec

import (
	"fmt"
	"slices"
	"strings"

	"go.yaml.in/yaml/v3"
)

// The keys of an event that change what its law does: inflection, from_velocity,
// to_velocity; how they are read, and what each needs of the law.

// stated is a velocity at an end of an event as the spec says it.
type stated struct {
	given, matched bool
	perSecond      float64 // length/s, when not matched
}

const matched = "matched"

// sharesForm is how the trigonometric law is written.
const sharesForm = "{sine: , constant: , cosine: }"

func inflectionField() field[draft] {
	s := span{noun: "a share", lo: 0, hi: 1, above: true, below: true}
	f := number("inflection", "share of the event's angle, counted as the cam turns, at which the acceleration changes sign, for laws whose halves mirror each other, default 0.5", s,
		func(d *draft) *float64 { return &d.Inflection })
	set := f.read
	f.read = func(r *reader, w where, d *draft) { d.inflection = true; set(r, w, d) }
	return f
}

func velocityField(v Vocabulary, name, verb, neighbor string, at func(*draft) *stated) field[draft] {
	s := speedSpan("s")
	doc := "velocity where the event " + verb + ", length/s at the camshaft's speed, positive when the lift grows (a fall's is negative), or matched: that of " + neighbor + ", default 0. " +
		"law: polynomial, or left out, is then the polynomial of least degree with the velocities given and no acceleration at both ends"
	if names := v.velocityLaws()[1:]; len(names) > 0 {
		doc += "; " + strings.Join(names, " and ") + " are run by half, their velocity fixed by lift and angle"
	}
	return field[draft]{name: name, doc: doc, allowed: s.String() + ", or " + matched,
		schema: object{{"oneOf", []object{s.schema(), {{"const", matched}}}}},
		read: func(r *reader, w where, d *draft) {
			r.seen(w)
			*at(d) = stated{given: true}
			if w.val.Kind == yaml.ScalarNode && w.val.Value == matched {
				at(d).matched = true
				return
			}
			x, advice, ok := plainNumber(w)
			if ok && s.holds(x) {
				at(d).perSecond = x + 0
				return
			}
			f := Fault{Path: w.path, Found: describe(w.val), Allowed: s.String() + ", or " + matched, Advice: advice}
			if ok {
				f.Found = w.val.Value
			} else if w.val.Kind == yaml.ScalarNode {
				f.Nearest = nearest(w.val.Value, []string{matched})
			}
			r.fault(w.place(), f)
		}}
}

// finishEvent gives an event without a law its polynomial, or misses the law.
func finishEvent(r *reader, w where, d *draft, _ bool) {
	d.where = w
	if _, ok := w.find("law"); ok || d.Kind == Dwell || d.Kind == "" || !r.ok(w.path+".law") {
		return
	}
	if !d.from.given && !d.to.given {
		r.missing(w, "law", lawAllowed(r.vocabulary), ": "+lawDoc)
		return
	}
	d.Law.Name, d.Law.Place = Polynomial, w.place()
}

// checkLaw holds the keys that only some laws take to those laws.
func (r *reader) checkLaw(d *draft) {
	law := d.Law.Name
	refuse := func(key, found, allowed, advice string) {
		if path := d.where.path + "." + key; r.ok(path) {
			r.faultAt(path, Fault{Found: found, Allowed: allowed, Advice: advice})
		}
	}
	with := " with the law " + law
	if law == Trigonometric {
		with = " with the law " + sharesForm
	}
	if !slices.Contains(r.vocabulary.ShareLaws, law) {
		if d.share && law != "" {
			refuse("constant_share", "constant_share"+with, "constant_share only with "+strings.Join(r.vocabulary.ShareLaws, ", "), "take it out")
		}
		d.Law.ConstantShare = 0
	}
	if d.Kind == Dwell || law == "" {
		return
	}
	speeds := d.stated()
	symmetric := law == Trigonometric || slices.Contains(r.vocabulary.SymmetricLaws, law)
	switch {
	case !d.inflection:
	case !symmetric:
		refuse("inflection", "inflection"+with,
			"inflection only with "+strings.Join(r.vocabulary.SymmetricLaws, ", ")+", "+sharesForm, "take it out")
	case len(speeds) > 0:
		refuse("inflection", "inflection with "+speeds[0], "inflection without from_velocity and to_velocity", "take one of them out")
	}
	_, half := r.vocabulary.half(law)
	switch {
	case len(speeds) == 0 || law == Polynomial || half && len(speeds) == 1:
	case half:
		refuse(speeds[1], strings.Join(speeds, " and ")+with, "one of them: half a law has its other end at rest",
			"take one out, or write law: polynomial, which takes both")
	default:
		refuse(speeds[0], speeds[0]+with, speeds[0]+" only with "+strings.Join(r.vocabulary.velocityLaws(), ", "),
			fmt.Sprintf("take out %s, or the law: without one it is a polynomial", speeds[0]))
	}
}

// stated names the velocity keys given, in the order of the event.
func (d *draft) stated() []string {
	var keys []string
	if d.from.given {
		keys = append(keys, "from_velocity")
	}
	if d.to.given {
		keys = append(keys, "to_velocity")
	}
	return keys
}
