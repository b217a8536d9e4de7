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
	// The lens to order: Design, with its diameters.
	Design
	ZoneDiameter unit.Millimetre
	Diameter     unit.Millimetre

	// The eye.
	Spectacle vergence.SpectacleRefraction
	Ocular    vergence.OcularRefraction
	Cornea    cornea.Cornea

	// The chain from the cornea to the over-refraction, beside what the design has of it.
	Layer     tear.Layer
	TearLens  tear.LensPower
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

// Fit computes the lens to order for the case into r, whatever r held. It fails with an *unit.ImpossibleError, with paths in the words of
// the schema, where the values, each fine by itself, can make no lens.
//
// Source: the chain of tear.Layer and lens.Body; the choices name their own sources.
func (c *Case) Fit(r *Result) error {
	*r = Result{Spectacle: c.refraction, Ocular: c.refraction.Ocular(), Cornea: c.cornea, Layer: c.layer}
	if !c.apexGiven {
		r.choices.add(&choiceApex)
	}
	c.dimensions(r)
	if err := c.chooseDesign(r, c.flatRadius(r)); err != nil {
		return err
	}
	if r.Toricity.toricBack() && !c.lens.SteepRadius.Given() {
		r.choices.add(&choiceSteepRadius)
	}
	if r.Toricity.toricBack() && !c.lens.FlatMeridian.Given() {
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
	r.TearLens = c.layer.Lens(r.Body.Back, c.cornea.Curvature())

	var err error
	if r.OverWorn, err = r.Over.Power.Upstream(c.refraction.Vertex(), unit.Air); err != nil || unanswerable(r.OverWorn) || beyond(r.Over.Power) {
		return &unit.ImpossibleError{
			Fields:  []string{"lens.power"},
			Problem: fmt.Sprintf("is so far from the %+.2f D wanted that no correction before it could make up the difference", float64(r.Wanted.Power.M)),
			Remedy:  "leave the power out to have it computed",
		}
	}
	r.Blur = r.Over.Power.Blur()
	r.AcuityLog, r.Acuity = Acuity(r.Blur)
	r.caution()
	return nil
}

// The radii that a back optic zone can have.
//
// Source: definition (the limits of the schema, beyond any corneal lens).
const (
	shortestRadius unit.Millimetre = 4
	longestRadius  unit.Millimetre = 14
)

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

// Design is a lens of one toricity, completed. Radii are those of the back optic zone, Flat and Steep the same where it is
// spherical. Power is the back vertex power to order as it is written, PowerOrdered as it is computed with.
type Design struct {
	Toricity     Toricity
	Effect       Effect
	Radii        surface.Radii
	Body         lens.Body
	Wanted       tear.Wanted
	Power        vergence.SphereCylinder
	PowerOrdered lens.BackVertexPower
	Over         tear.OverRefraction
}

// residual is the cylinder that the lens leaves.
func (d *Design) residual() unit.Dioptre { return 2 * d.Over.Power.J() }

// chooseDesign completes a lens of the toricity that is decided, or of the simplest one that leaves little astigmatism.
func (c *Case) chooseDesign(r *Result, flat unit.Millimetre) error {
	if c.toricity != Undecided {
		return c.design(&r.Design, c.toricity, NoEffect, flat)
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
		return c.design(&r.Design, t, NoEffect, flat)
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
	var d Design
	for i, k := range kinds {
		if err := c.design(&d, k.toricity, k.effect, flat); err != nil {
			return err
		}
		residual := d.residual()
		r.compared.add(Candidate{k.toricity, d.Effect, residual})
		if k.toricity == Spherical && astigmatism >= toricBackFrom {
			continue // compared, but not stable on such a cornea
		}
		limit := acceptableResidual
		if k.toricity == Spherical {
			limit = sphericalLeaves
		}
		if i == 0 || r.Toricity == Undecided || residual < r.residual() || residual <= limit {
			r.Design = d
		}
		if residual <= limit {
			return nil
		}
	}
	return nil
}

// design completes a lens of one toricity: its body, the power that it would need, and the power to order.
func (c *Case) design(d *Design, t Toricity, effect Effect, flat unit.Millimetre) error {
	*d = Design{Toricity: t, Effect: effect}
	d.Radii = surface.Radii{Flat: flat, Steep: flat, FlatMeridian: c.lens.FlatMeridian.Or(c.cornea.Radii().FlatMeridian).Meridian()}
	d.Body = lens.Body{Back: surface.Spherical(flat), Index: c.lens.Index.Or(usualIndex)}
	if t.toricBack() {
		d.Radii.Steep = c.steepRadius(flat)
		d.Body.Back = d.Radii.Curvature()
		if d.Radii.Steep == d.Radii.Flat && !c.lens.SteepRadius.Given() {
			return &unit.ImpossibleError{
				Fields:  []string{"lens.toricity", "eye.keratometry"},
				Problem: fmt.Sprintf("a %v lens follows the corneal astigmatism, and this cornea has %.2f D", t, float64(c.cornea.Astigmatism())),
				Remedy:  "a spherical or a front toric lens, or back radii that are given, would work",
			}
		}
	}
	if d.Radii.Steep < shortestRadius || d.Radii.Flat > longestRadius {
		return &unit.ImpossibleError{
			Fields:  []string{"lens.back_surface", "eye.keratometry"},
			Problem: fmt.Sprintf("the back optic zone would have the radii %v and %v, outside [%v, %v]", d.Radii.Flat, d.Radii.Steep, shortestRadius, longestRadius),
			Remedy:  "check the readings, or give the back radii",
		}
	}
	var err error
	if d.Wanted, err = c.layer.Required(c.refraction.Ocular(), c.cornea.Curvature(), d.Body.Back); err != nil {
		return impossiblePower("plan.apex_clearance_um", "the light that the eye needs would come to a focus in the tears")
	}
	need := d.Wanted.Power
	if beyond(need.PowerVector) {
		return impossiblePower("eye.refraction.vertex_distance_mm",
			fmt.Sprintf("the lens would need a back vertex power of %+.2f D", float64(need.M)))
	}
	d.Body.CentreThickness = c.lens.CentreThickness.Or(lens.UsualCentreThickness(need.M, c.cornea.Astigmatism()))

	before, err := c.layer.Need(d.Wanted.Back, d.Body)
	if err != nil {
		return impossiblePower("lens.centre_thickness_mm", "the light that the eye needs would come to a focus in the lens")
	}
	s := search{body: d.Body, need: before, power: c.power, cylinder: c.cylinder}
	kept, isKept := c.kept.Get()
	switch inAir := d.Body.BackPower(); {
	case isKept:
		d.Power, d.PowerOrdered = kept, lens.BackVertexPower{PowerVector: kept.Vector()}
		if t == BackToric {
			if off := 2 * d.PowerOrdered.Sub(inAir).J(); off > roundedCylinder {
				made := vergence.PowerVector{J0: inAir.J0, J45: inAir.J45}.MinusCylinder()
				return &unit.ImpossibleError{
					Fields: []string{"lens.power.cylinder_d", "lens.toricity"},
					Problem: fmt.Sprintf("a back toric lens of these radii has in air the cylinder that its back makes, %+.2f x %.0f",
						float64(made.Cylinder), float64(made.Axis)),
					Remedy: "order a bitoric lens, or leave the power out to have it computed",
				}
			}
		}
		d.Over, err = before.Worn(d.Body, d.PowerOrdered)
		if err != nil {
			return impossiblePower("lens.power", "no front surface can give this power through this thickness")
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
				undo := d.Body.Back.Power(unit.Air.Less(c.layer.Index))
				s.spheres(s.fixedCylinder(2*undo.J(), d.Radii.FlatMeridian))
			} else {
				s.cylinders([2]unit.Degree{d.Radii.FlatMeridian, (d.Radii.FlatMeridian + 90).Meridian()})
			}
		}
		if !s.found {
			return impossiblePower("lens", "no front surface can give the power that the eye needs through this lens")
		}
		d.Power, d.PowerOrdered, d.Over = s.sphereCylinder(), s.ordered, s.over
	}
	if t == Bitoric {
		// In the tears, the cylinder that turns with the lens.
		inTears := d.PowerOrdered.Add(d.Body.Back.Power(c.layer.Index.Less(unit.Air)))
		d.Effect = CylinderPowerEffect
		if 2*inTears.J() <= roundedCylinder {
			d.Effect = SphericalPowerEffect
		}
	}
	return nil
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
