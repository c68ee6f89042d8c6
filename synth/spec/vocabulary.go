package spec

// Vocabulary is what the rest of the program can do, handed in by name: this
// package checks names and never knows what a law or a kind does.
type Vocabulary struct {
	Laws      []string // plain names of motion laws
	ShareLaws []string // those of Laws that take constant_share

	// SymmetricLaws are those of Laws that take inflection; Trigonometric does as well.
	SymmetricLaws []string
	// HalfLaws are those of Laws that can be run by half, between rest and speed.
	HalfLaws []HalfLaw

	Followers []string // available follower.kind
	Cams      []string // available cam.kind
	Processes []string // available operation processes: of "mill", "grind" and "wire"

	// EndSpeeds returns the velocity of a law at its two ends, per unit of lift
	// and unit of angle: 0, 0 for a law that starts and ends at rest, 1, 1 for
	// constant velocity. When nil, jumps in velocity are not looked for.
	EndSpeeds func(Law) (start, end float64)
}

// HalfLaw is a law that can be run by half: from rest to Speed, in units of lift over
// angle, or back.
type HalfLaw struct {
	Name  string
	Speed float64
}

// Polynomial is the Law.Name of the polynomial of least degree that has the event's
// velocities at its ends, and no acceleration there.
const Polynomial = "polynomial"

// Trigonometric is the Law.Name of a law given by its shares {sine, constant, cosine}.
const Trigonometric = "trigonometric"

// defaultConstantShare is the share of constant velocity when constant_share is left out.
const defaultConstantShare = 0.5

// Names of the format that a version may lack: found in a spec they are
// answered with "not available in this version", and never ignored.

func everyFollower() []string {
	return []string{"translating-roller", "translating-knife", "translating-mushroom",
		"translating-flat", "swinging-roller", "swinging-flat"}
}

func everyCam() []string { return []string{"plate", "groove", "barrel"} }

func everyProcess() []string { return []string{"mill", "grind", "wire"} }

func everyAxes() []string { return []string{"xy", "polar", "cylinder"} }

// half returns the speed of the law's half, in units of lift over angle; false when it
// cannot be run by half.
func (v Vocabulary) half(law string) (speed float64, ok bool) {
	for _, h := range v.HalfLaws {
		if h.Name == law {
			return h.Speed, true
		}
	}
	return 0, false
}

// velocityLaws are the laws that take from_velocity and to_velocity.
func (v Vocabulary) velocityLaws() []string {
	laws := []string{Polynomial}
	for _, h := range v.HalfLaws {
		laws = append(laws, h.Name)
	}
	return laws
}

// restLaws are the plain laws that start and end at rest, for advice.
func (v Vocabulary) restLaws() []string {
	var rest []string
	for _, name := range v.Laws {
		start, end := v.EndSpeeds(Law{Name: name, ConstantShare: defaultConstantShare})
		if start == 0 && end == 0 {
			rest = append(rest, name)
		}
	}
	return rest
}
