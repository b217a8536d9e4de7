package fitting

import (
	"fmt"
	"math"

	"meniscus.example/optics/cornea"
	"meniscus.example/optics/lens"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// Effect tells the two kinds of bitoric lens apart.
type Effect uint8

// The effects.
const (
	NoEffect             Effect = iota // not a bitoric lens
	SphericalPowerEffect               // the cylinder of the power undoes that of the back in the tears: rotation changes nothing
	CylinderPowerEffect                // a cylinder remains in the tears, which turns with the lens
)

// String is the trade's word.
//
// Source: definition.
func (e Effect) String() string {
	return [...]string{"", "spherical power effect", "cylinder power effect"}[min(int(e), 2)]
}

// Candidate is a lens that was compared before one was chosen.
type Candidate struct {
	Toricity Toricity
	Effect   Effect
	// Residual is the cylinder of the over-refraction that it leaves, 0 or more.
	Residual unit.Dioptre
}

// Result is a fit.
type Result struct {
	// The lens to order. Radii are those of the back optic zone, Flat and Steep the same where it is spherical.
	Toricity     Toricity
	Effect       Effect
	Radii        surface.Radii
	ZoneDiameter unit.Millimetre
	Diameter     unit.Millimetre
	Body         lens.Body
	// Power is the back vertex power to order, as written and as it is computed with.
	Power        vergence.SphereCylinder
	PowerOrdered lens.BackVertexPower

	// The eye.
	Spectacle vergence.SpectacleRefraction
	Ocular    vergence.OcularRefraction
	Cornea    cornea.Cornea

	// The chain from the cornea to the over-refraction.
	Layer     tear.Layer
	TearLens  tear.LensPower
	Wanted    tear.Wanted
	Over      tear.OverRefraction
	OverWorn  vergence.PowerVector // the over-refraction at the eye's own vertex distance
	Blur      unit.Dioptre         // the blur strength of Over.Power
	AcuityLog float64              // the predicted loss of acuity in logMAR, dimensionless
	Acuity    float64              // the predicted decimal acuity, dimensionless

	choices  list[*Choice]
	compared list[Candidate]
	cautions Cautions
}

// Choices are what the input left open and how it was decided: some of AllChoices, not to be changed.
//
// Source: definition.
func (r *Result) Choices() []*Choice { return r.choices.all() }

// Compared are the lenses that were compared where the toricity was chosen.
//
// Source: definition.
func (r *Result) Compared() []Candidate { return r.compared.all() }

// Cautions are what to know before using the answer, the most severe first; never empty.
//
// Source: definition.
func (r *Result) Cautions() []Caution { return r.cautions.All() }

// list is a short list that needs no allocation.
type list[T any] struct {
	items [12]T
	n     int
}

func (l *list[T]) add(x T) {
	l.items[l.n] = x
	l.n++
}

func (l *list[T]) all() []T { return l.items[:l.n] }

// The thresholds of the choice of a toricity.
//
// Source: common practice for the numbers; toric backs from 2.00 D of corneal toricity (Mandell), essential from 3.00 D
// (Bennett), and 0.75 D of residual astigmatism, which may reduce vision (IACLE; residual is refractive minus corneal).
const (
	toricBackFrom      unit.Dioptre = 2.50
	sphericalLeaves    unit.Dioptre = 0.75
	acceptableResidual unit.Dioptre = 0.50
)

// The greatest power in any meridian, and the greatest cylinder, that are answered.
//
// Source: definition (far beyond any lens).
const (
	strongest         unit.Dioptre = 100
	strongestCylinder unit.Dioptre = 50
)

// Fit computes the lens to order for the case. It fails with an *unit.ImpossibleError, with paths in the words of the schema, where the values,
// each fine by itself, can make no lens.
//
// Source: the chain of tear.Layer and lens.Body; the choices name their own sources.
func (c *Case) Fit() (Result, error) {
	r := Result{Spectacle: c.refraction, Ocular: c.refraction.Ocular(), Cornea: c.cornea, Layer: c.layer}
	if !c.apexGiven {
		r.choices.add(&choiceApex)
	}
	c.dimensions(&r)
	flat := c.flatRadius(&r)
	d, err := c.chooseDesign(&r, flat)
	if err != nil {
		return Result{}, err
	}
	if d.toricity.toricBack() && !c.lens.SteepRadius.Given() {
		r.choices.add(&choiceSteepRadius)
	}
	if d.toricity.toricBack() && !c.lens.FlatMeridian.Given() {
		r.choices.add(&choiceFlatMeridian)
	}
	if !c.lens.CentreThickness.Given() {
		r.choices.add(&choiceThickness)
	}
	if !c.lens.Index.Given() {
		r.choices.add(&choiceIndex)
	}
	if !c.lens.Power.Given() {
		r.choices.add(&choicePower)
	}
	r.Toricity, r.Effect, r.Radii, r.Body = d.toricity, d.effect, d.radii, d.body
	r.Wanted, r.Over = d.wanted, d.over
	r.Power, r.PowerOrdered = d.power, d.ordered
	r.TearLens = c.layer.Lens(d.body.Back, c.cornea.Curvature())

	if r.OverWorn, err = r.Over.Power.Upstream(c.refraction.Vertex(), unit.Air); err != nil || unanswerable(r.OverWorn) || beyond(r.Over.Power) {
		return Result{}, &unit.ImpossibleError{
			Fields:  []string{"lens.power"},
			Problem: fmt.Sprintf("is so far from the %+.2f D wanted that no correction before it could make up the difference", float64(r.Wanted.Power.M)),
			Remedy:  "leave the power out to have it computed",
		}
	}
	r.Blur = r.Over.Power.Blur()
	r.AcuityLog, r.Acuity = Acuity(r.Blur)
	r.caution()
	return r, nil
}

// unanswerable reports an over-refraction outside what a refraction can be.
func unanswerable(v vergence.PowerVector) bool {
	j := v.J()
	return v.M+j > 30 || v.M-j < -40 || 2*j > 12
}

// dimensions decides the diameters.
func (c *Case) dimensions(r *Result) {
	var given bool
	if r.Diameter, given = c.lens.Diameter.Get(); !given {
		iris, known := c.iris.Get()
		if known {
			r.choices.add(&choiceDiameterOfIris)
		} else {
			iris = usualIris
			r.choices.add(&choiceDiameter)
		}
		r.Diameter = unit.Millimetre(math.Round(float64(min(iris-smallerThanIris, WidestRigid))*10) / 10)
	}
	if r.ZoneDiameter, given = c.lens.ZoneDiameter.Get(); !given {
		widest := r.Diameter - leastPeriphery
		if pupil, known := c.pupil.Get(); known {
			r.ZoneDiameter = min(pupil+widerThanPupil, widest)
			r.choices.add(&choiceZoneOfPupil)
		} else {
			r.ZoneDiameter = min(r.Diameter-usualPeriphery, widest)
			r.choices.add(&choiceZone)
		}
		r.ZoneDiameter = unit.Millimetre(math.Round(float64(r.ZoneDiameter)*10) / 10)
	}
}

// flatRadius decides the back optic zone radius of the flat meridian: the fixed offset from the flat reading.
func (c *Case) flatRadius(r *Result) unit.Millimetre {
	if flat, given := c.lens.BackRadius.Get(); given {
		return flat
	}
	r.choices.add(&choiceRadius)
	flat := c.radius.Round(unit.KeratometricRadius(c.cornea.FlatK()+c.offset, cornea.KeratometricIndex))
	if steep, given := c.lens.SteepRadius.Get(); given {
		flat = max(flat, steep)
	}
	return flat
}

// steepRadius decides the back optic zone radius of the steep meridian of a toric back: a toricity of two thirds of the corneal, or
// of 0.50 D less than the corneal where that is more.
func (c *Case) steepRadius(flat unit.Millimetre) unit.Millimetre {
	if steep, given := c.lens.SteepRadius.Get(); given {
		return steep
	}
	k := c.cornea.Astigmatism()
	toricity := max(2*k/3, k-shortOfCornea)
	return c.radius.Round(unit.KeratometricRadius(unit.KeratometricPower(flat, cornea.KeratometricIndex)+toricity, cornea.KeratometricIndex))
}

// design is a lens of one toricity, completed.
type design struct {
	toricity Toricity
	effect   Effect
	radii    surface.Radii
	body     lens.Body
	wanted   tear.Wanted
	power    vergence.SphereCylinder
	ordered  lens.BackVertexPower
	over     tear.OverRefraction
}

// residual is the cylinder that the lens leaves.
func (d *design) residual() unit.Dioptre { return 2 * d.over.Power.J() }

// chooseDesign completes a lens of the toricity that is decided, or of the simplest one that leaves little astigmatism.
func (c *Case) chooseDesign(r *Result, flat unit.Millimetre) (design, error) {
	if c.toricity != Undecided {
		return c.design(r, c.toricity, NoEffect, flat)
	}
	if kept, given := c.kept.Get(); given {
		t := Spherical
		switch {
		case c.lens.SteepRadius.Given():
			t = Bitoric
		case kept.Cylinder != 0:
			t = FrontToric
		}
		r.choices.add(&choiceToricityOfLens)
		return c.design(r, t, NoEffect, flat)
	}

	type kind struct {
		toricity Toricity
		effect   Effect
	}
	var kinds []kind
	astigmatism := c.cornea.Astigmatism()
	switch {
	case c.lens.SteepRadius.Given():
		kinds = []kind{{BackToric, NoEffect}, {Bitoric, SphericalPowerEffect}, {Bitoric, CylinderPowerEffect}}
	case astigmatism >= toricBackFrom:
		kinds = []kind{{Spherical, NoEffect}, {BackToric, NoEffect}, {Bitoric, SphericalPowerEffect}, {Bitoric, CylinderPowerEffect}}
	case astigmatism > 0:
		kinds = []kind{{Spherical, NoEffect}, {FrontToric, NoEffect}, {Bitoric, CylinderPowerEffect}}
	default:
		kinds = []kind{{Spherical, NoEffect}, {FrontToric, NoEffect}}
	}
	r.choices.add(&choiceToricity)
	var best design
	for i, k := range kinds {
		d, err := c.design(r, k.toricity, k.effect, flat)
		if err != nil {
			return design{}, err
		}
		residual := d.residual()
		r.compared.add(Candidate{k.toricity, d.effect, residual})
		switch {
		case k.toricity == Spherical && astigmatism < toricBackFrom && residual <= sphericalLeaves:
			return d, nil
		case k.toricity == Spherical && astigmatism >= toricBackFrom:
			// Compared, but not stable on such a cornea.
			continue
		case k.toricity != Spherical && residual <= acceptableResidual:
			return d, nil
		}
		if best.toricity == Undecided || residual < best.residual() || i == 0 {
			best = d
		}
	}
	return best, nil
}

// design completes a lens of one toricity: its body, the power that it would need, and the power to order.
func (c *Case) design(r *Result, t Toricity, effect Effect, flat unit.Millimetre) (design, error) {
	d := design{toricity: t, effect: effect}
	d.radii = surface.Radii{Flat: flat, Steep: flat, FlatMeridian: c.lens.FlatMeridian.Or(c.cornea.Radii().FlatMeridian).Meridian()}
	d.body = lens.Body{Back: surface.Spherical(flat), Index: c.lens.Index.Or(usualIndex)}
	if t.toricBack() {
		d.radii.Steep = c.steepRadius(flat)
		d.body.Back = d.radii.Curvature()
		if d.radii.Steep == d.radii.Flat && !c.lens.SteepRadius.Given() {
			return design{}, &unit.ImpossibleError{
				Fields:  []string{"lens.toricity", "eye.keratometry"},
				Problem: fmt.Sprintf("a %v lens follows the corneal astigmatism, and this cornea has %.2f D", t, float64(c.cornea.Astigmatism())),
				Remedy:  "a spherical or a front toric lens, or back radii that are given, would work",
			}
		}
	}
	var err error
	if d.wanted, err = c.layer.Required(c.refraction.Ocular(), c.cornea.Curvature(), d.body.Back); err != nil {
		return design{}, impossiblePower("plan.apex_clearance_um", "the light that the eye needs would come to a focus in the tears")
	}
	need := d.wanted.Power
	if beyond(need.PowerVector) {
		return design{}, impossiblePower("eye.refraction.vertex_distance_mm",
			fmt.Sprintf("the lens would need a back vertex power of %+.2f D", float64(need.M)))
	}
	d.body.CentreThickness = c.lens.CentreThickness.Or(lens.UsualCentreThickness(need.M, c.cornea.Astigmatism()))

	before, err := c.layer.Need(d.wanted.Back, d.body)
	if err != nil {
		return design{}, impossiblePower("lens.centre_thickness_mm", "the light that the eye needs would come to a focus in the lens")
	}
	s := search{body: d.body, need: before, power: c.power, cylinder: c.cylinder}
	kept, isKept := c.kept.Get()
	switch inAir := d.body.BackPower(); {
	case isKept:
		d.power, d.ordered = kept, lens.BackVertexPower{PowerVector: kept.Vector()}
		if t == BackToric {
			if off := 2 * d.ordered.Sub(inAir).J(); off > roundedCylinder {
				made := vergence.PowerVector{J0: inAir.J0, J45: inAir.J45}.MinusCylinder()
				return design{}, &unit.ImpossibleError{
					Fields: []string{"lens.power.cylinder_d", "lens.toricity"},
					Problem: fmt.Sprintf("a back toric lens of these radii has in air the cylinder that its back makes, %+.2f x %.0f",
						float64(made.Cylinder), float64(made.Axis)),
					Remedy: "order a bitoric lens, or leave the power out to have it computed",
				}
			}
		}
		d.over, err = before.Worn(d.body, d.ordered)
		if err != nil {
			return design{}, impossiblePower("lens.power", "no front surface can give this power through this thickness")
		}
	default:
		switch t {
		case Spherical:
			s.spheres(vergence.PowerVector{}, 0)
		case BackToric:
			s.spheres(vergence.PowerVector{J0: inAir.J0, J45: inAir.J45}, 0)
		case FrontToric:
			s.anyAxis(c.axis)
		case Bitoric:
			if effect == SphericalPowerEffect {
				undo := d.body.Back.Power(unit.Air.Less(c.layer.Index))
				s.spheres(s.fixedCylinder(2*undo.J(), d.radii.FlatMeridian))
			} else {
				s.cylinders([2]unit.Degree{d.radii.FlatMeridian, (d.radii.FlatMeridian + 90).Meridian()})
			}
		}
		if !s.found {
			return design{}, impossiblePower("lens", "no front surface can give the power that the eye needs through this lens")
		}
		d.power, d.ordered, d.over = s.sphereCylinder(), s.ordered, s.over
	}
	if t == Bitoric {
		// In the tears, the cylinder that turns with the lens.
		inTears := d.ordered.Add(d.body.Back.Power(c.layer.Index.Less(unit.Air)))
		d.effect = CylinderPowerEffect
		if 2*inTears.J() <= roundedCylinder {
			d.effect = SphericalPowerEffect
		}
	}
	return d, nil
}

// roundedCylinder is how far a cylinder that was written in steps may lie from the one that is made.
//
// Source: definition (the usual cylinder step).
const roundedCylinder unit.Dioptre = 0.25

func impossiblePower(field, problem string) error {
	return &unit.ImpossibleError{
		Fields:  []string{field},
		Problem: problem,
		Remedy:  "check the refraction and its vertex distance",
	}
}
