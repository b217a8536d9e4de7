package fitting

import (
	"fmt"
	"math"
	"slices"

	"meniscus.example/optics/cornea"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// Severity says how much a caution matters; the greater, the more.
type Severity uint8

// The severities.
const (
	Note    Severity = iota + 1 // worth knowing
	Advice                      // to consider before ordering
	Warning                     // to resolve before ordering
)

// CautionCode names what a caution is about. The numbers are those of the schema.
type CautionCode uint8

// The cautions.
const (
	StartingPoint             CautionCode = 1
	VertexAssumed             CautionCode = 2
	CorneaSteep               CautionCode = 3
	CorneaFlat                CautionCode = 4
	CornealAstigmatismHigh    CautionCode = 5
	ResidualAstigmatism       CautionCode = 6
	MeridiansNotPerpendicular CautionCode = 7
	PowerUncommon             CautionCode = 8
	KeratometryExtended       CautionCode = 9
	StabilisationNeeded       CautionCode = 10
	ResidualSphere            CautionCode = 11
)

// The UCUM codes of the units that cautions and derivations use.
const (
	ucumDioptre    = "[diop]"
	ucumMillimetre = "mm"
	ucumDegree     = "deg"
	ucumOne        = "1"
)

// Rule is a caution in general: what raises it, from which limit, and what the trade does next. Where there is
// a SevereFrom, a value from there on raises a warning.
type Rule struct {
	Code     CautionCode
	Severity Severity
	// Meaning says what raises the caution.
	Meaning string
	// Limit and SevereFrom are in Unit, a UCUM code, which is empty where no number raises it.
	Limit, SevereFrom unit.Optional[float64]
	Unit              string
	Action            string
	Source            string
	// says gives the message for a value and the limit that it passed.
	says func(c Caution) string
}

// Caution is a caution raised, with the number that raised it. Value and Limit are in Unit, a UCUM code, which is empty where no number
// raised it. Field is the path in the words of the schema, from the eye or the lens on; it may be empty.
type Caution struct {
	Code         CautionCode
	Severity     Severity
	Value, Limit float64
	Unit         string
	Field        string
}

func some(x float64) unit.Optional[float64] { return unit.Some(x) }

// rules are the cautions by code; rules[0] is not used.
var rules = [...]Rule{
	StartingPoint: {
		Code: StartingPoint, Severity: Note,
		Meaning: "always: the answer is calculated",
		Action:  "confirm it on the eye",
		Source:  "definition",
		says: func(Caution) string {
			return "This is a calculated starting point, to be confirmed on the eye by a licensed practitioner under local rules."
		},
	},
	VertexAssumed: {
		Code: VertexAssumed, Severity: Advice,
		Meaning: "the vertex distance was not given; 12 mm is assumed while every meridian is weaker than 4.00 D",
		Limit:   some(float64(vergence.VertexMatters)), Unit: ucumDioptre,
		Action: "measure the vertex distance and give it",
		Source: "it matters beyond 4.00 D: Wikipedia, Vertex distance; 12 mm is common practice",
		says: func(c Caution) string {
			return fmt.Sprintf("No vertex distance was given: 12 mm is assumed. The strongest meridian is %+.2f D.", c.Value)
		},
	},
	CorneaSteep: {
		Code: CorneaSteep, Severity: Advice,
		Meaning: "the mean corneal reading is above 47.2 D; above 48.7 D it is a warning",
		Limit:   some(47.2), SevereFrom: some(48.7), Unit: ucumDioptre,
		Action: "look at the corneal topography before fitting",
		Source: "screening limits of central corneal power, PMC7853137, table 1a (a reason to look, not a diagnosis)",
		says: func(c Caution) string {
			return fmt.Sprintf("The cornea is steep: mean reading %.2f D, above %.1f D.", c.Value, c.Limit)
		},
	},
	CorneaFlat: {
		Code: CorneaFlat, Severity: Advice,
		Meaning: "the flat corneal reading is below 38.8 D, three standard deviations below the mean of adults",
		Limit:   some(38.8), Unit: ucumDioptre,
		Action: "ask for earlier corneal surgery or lens wear, and look at the corneal topography",
		Source: "43.16 ± 1.45 D, n = 3468: Xu et al. 2012, PLoS ONE 7:e39313",
		says: func(c Caution) string {
			return fmt.Sprintf("The cornea is flat: flat reading %.2f D, below %.1f D.", c.Value, c.Limit)
		},
	},
	CornealAstigmatismHigh: {
		Code: CornealAstigmatismHigh, Severity: Advice,
		Meaning: "the corneal astigmatism is 2.00 D or more; from 3.00 D it is a warning where the back of the lens is spherical",
		Limit:   some(2), SevereFrom: some(3), Unit: ucumDioptre,
		Action: "a toric back surface is the usual answer; watch movement, flexure and where the lens bears",
		Source: "toric back from 2.00 D: Mandell; essential from 3.00 D: Bennett",
		says: func(c Caution) string {
			if c.Severity == Warning {
				return fmt.Sprintf("The corneal astigmatism is %.2f D, from %.2f D of which a toric back surface is held to be essential, and the back of this lens is spherical.",
					c.Value, c.Limit)
			}
			return fmt.Sprintf("The corneal astigmatism is %.2f D; from %.2f D a toric back surface is usual.", c.Value, c.Limit)
		},
	},
	ResidualAstigmatism: {
		Code: ResidualAstigmatism, Severity: Advice,
		Meaning: "the predicted over-refraction has a cylinder of 0.75 D or more; from 1.50 D it is a warning",
		Limit:   some(0.75), SevereFrom: some(1.5), Unit: ucumDioptre,
		Action: "check with an over-refraction; consider another toricity, or a front cylinder at the axis of the required power",
		Source: "0.75 D and more may reduce vision (contact lens teaching literature; residual is refractive at the cornea minus corneal); " +
			"1.50 D is common practice",
		says: func(c Caution) string {
			return fmt.Sprintf("The lens is predicted to leave %.2f D of astigmatism; 0.75 D and more may reduce vision.", c.Value)
		},
	},
	MeridiansNotPerpendicular: {
		Code: MeridiansNotPerpendicular, Severity: Advice,
		Meaning: "the principal meridians were read more than 10° away from perpendicular; above 21° it is a warning",
		Limit:   some(10), SevereFrom: some(21), Unit: ucumDegree,
		Action: "repeat the reading; if it stays, look at the corneal topography",
		Source: "10° is common practice; skewed axes above 21°: PMC7853137, table 1a",
		says: func(c Caution) string {
			return fmt.Sprintf("The corneal meridians were read %.0f° away from perpendicular, more than %.0f°; the perpendicular pair closest to both was used.",
				math.Abs(c.Value), c.Limit)
		},
	},
	PowerUncommon: {
		Code: PowerUncommon, Severity: Advice,
		Meaning: "the back vertex power has a meridian beyond 20.00 D",
		Limit:   some(20), Unit: ucumDioptre,
		Action: "check the refraction and its vertex distance, and ask the laboratory",
		Source: "common practice",
		says: func(c Caution) string {
			return fmt.Sprintf("The back vertex power reaches %+.2f D in a meridian, beyond %.0f D in which lenses are commonly supplied.", c.Value, c.Limit)
		},
	},
	KeratometryExtended: {
		Code: KeratometryExtended, Severity: Note,
		Meaning: "a keratometer reading was made through an auxiliary lens and converted by a published factor",
		Action:  "measure the cornea by another method where it can be had",
		Source:  "published range extension factors of a 36 to 52 D keratometer: 1.1659 for +1.25 D, 0.8576 for -1.00 D",
		says: func(Caution) string {
			return "A keratometer reading was made through an auxiliary lens and converted by a published factor."
		},
	},
	StabilisationNeeded: {
		Code: StabilisationNeeded, Severity: Advice,
		Meaning: "the lens is front toric with a spherical back, and nothing but a ballast holds its cylinder in place",
		Action:  "order a prism ballast or another stabilisation, and observe the rotation on the eye",
		Source:  "common practice",
		says: func(Caution) string {
			return "A front toric lens turns on the eye unless it is stabilised; the prism of a ballast is not part of this answer."
		},
	},
	ResidualSphere: {
		Code: ResidualSphere, Severity: Advice,
		Meaning: "the predicted over-refraction has a spherical equivalent of 0.50 D or more",
		Limit:   some(0.5), Unit: ucumDioptre,
		Action: "check the power that was given, or leave it out to have it computed",
		Source: "common practice (two of the usual steps)",
		says: func(c Caution) string {
			return fmt.Sprintf("The lens is predicted to leave a spherical equivalent of %+.2f D; %.2f D and more blurs, or asks for accommodation.", c.Value, c.Limit)
		},
	},
}

// Rules are the cautions that an answer may carry, by code.
//
// Source: each names its own.
func Rules() []Rule { return slices.Clone(rules[1:]) }

// RuleOf is the rule of a code, one of the constants above.
//
// Source: each names its own.
func RuleOf(code CautionCode) Rule { return rules[code] }

// Message says the caution in a sentence, with its numbers and units.
//
// Source: definition.
func (c Caution) Message() string { return rules[c.Code].says(c) }

// Cautions are the cautions of one answer. The zero value has none yet.
type Cautions struct {
	list   [len(rules)]Caution
	n      int
	sorted bool
}

// All are the cautions, the most severe first, in each severity in the order in which they were raised.
//
// Source: definition.
func (c *Cautions) All() []Caution {
	all := c.list[:c.n]
	if !c.sorted {
		slices.SortStableFunc(all, func(a, b Caution) int { return int(b.Severity) - int(a.Severity) })
		c.sorted = true
	}
	return all
}

func (c *Cautions) add(x Caution) {
	c.list[c.n] = x
	c.n++
	c.sorted = false
}

// raise adds a caution that has no number.
func (c *Cautions) raise(code CautionCode, field string) {
	c.add(Caution{Code: code, Severity: rules[code].Severity, Field: field})
}

// from adds a caution where the value's magnitude is at or beyond the rule's limit (beyond only, with past).
func (c *Cautions) from(code CautionCode, value float64, past bool, field string) {
	r := &rules[code]
	limit, size := r.Limit.Or(0), math.Abs(value)
	if !(size > limit || size == limit && !past) {
		return
	}
	severity := r.Severity
	if severe, has := r.SevereFrom.Get(); has && (size > severe || size == severe && !past) {
		severity, limit = Warning, severe
	}
	c.add(Caution{Code: code, Severity: severity, Value: value + 0, Limit: limit, Unit: r.Unit, Field: field})
}

// StartingPoint raises the caution that every answer carries.
//
// Source: definition.
func (c *Cautions) StartingPoint() { c.raise(StartingPoint, "") }

// Refraction raises the cautions of a refraction whose path is field.
//
// Source: the rules name their own.
func (c *Cautions) Refraction(s vergence.SpectacleRefraction, field string) {
	if s.VertexAssumed() {
		p := s.Power()
		strongest := p.M + p.J()
		if p.M < 0 {
			strongest = p.M - p.J()
		}
		c.add(Caution{
			Code: VertexAssumed, Severity: rules[VertexAssumed].Severity,
			Value: float64(strongest), Limit: rules[VertexAssumed].Limit.Or(0), Unit: ucumDioptre, Field: field,
		})
	}
}

// Cornea raises the cautions of a cornea whose readings have the path field. Under a lens with a spherical back much
// astigmatism is a warning; under a toric back, or without a lens, it is advice.
//
// Source: the rules name their own.
func (c *Cautions) Cornea(k cornea.Cornea, field string, sphericalBack bool) {
	c.from(CorneaSteep, float64(k.FlatK()+k.SteepK())/2, true, field)
	if flat := float64(k.FlatK()); flat < rules[CorneaFlat].Limit.Or(0) {
		c.add(Caution{
			Code: CorneaFlat, Severity: rules[CorneaFlat].Severity,
			Value: flat, Limit: rules[CorneaFlat].Limit.Or(0), Unit: ucumDioptre, Field: field,
		})
	}
	before := c.n
	c.from(CornealAstigmatismHigh, float64(k.Astigmatism()), false, field)
	if !sphericalBack && c.n > before && c.list[before].Severity == Warning {
		c.list[before].Severity, c.list[before].Limit = rules[CornealAstigmatismHigh].Severity, rules[CornealAstigmatismHigh].Limit.Or(0)
	}
	c.from(MeridiansNotPerpendicular, float64(k.Skew()), true, field)
	if k.Extended() {
		c.raise(KeratometryExtended, field)
	}
}

// caution raises the cautions of a fit.
func (r *Result) caution() {
	c := &r.cautions
	c.Refraction(r.Spectacle, "eye.refraction.vertex_distance_mm")
	c.Cornea(r.Cornea, "eye.keratometry", !r.Toricity.toricBack())
	over := r.Over.Power
	c.from(ResidualAstigmatism, float64(2*over.J()), false, "over_refraction.cylinder_d")
	c.from(ResidualSphere, float64(over.M), false, "over_refraction.sphere_d")
	power := r.PowerOrdered.M + r.PowerOrdered.J()
	if r.PowerOrdered.M < 0 {
		power = r.PowerOrdered.M - r.PowerOrdered.J()
	}
	c.from(PowerUncommon, float64(power), true, "lens.power")
	if r.Toricity == FrontToric {
		c.raise(StabilisationNeeded, "lens.toricity")
	}
	c.StartingPoint()
}
