package fitting

import (
	"fmt"

	"meniscus.example/optics/cornea"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// Toricity says which optic surfaces of a lens are toric. The zero value is not decided.
type Toricity uint8

// The toricities.
const (
	Undecided  Toricity = iota
	Spherical           // neither surface
	FrontToric          // the front, held in its orientation by a ballast
	BackToric           // the back, with a spherical front
	Bitoric             // both
)

// String is the trade's word.
//
// Source: definition.
func (t Toricity) String() string {
	return [...]string{"undecided", "spherical", "front toric", "back toric", "bitoric"}[min(int(t), 4)]
}

func (t Toricity) toricBack() bool { return t == BackToric || t == Bitoric }

// LensInput is what is decided of a rigid lens. What is absent is chosen.
type LensInput struct {
	Toricity                Toricity
	BackRadius, SteepRadius unit.Optional[unit.Millimetre]
	FlatMeridian            unit.Optional[unit.Degree]
	ZoneDiameter, Diameter  unit.Optional[unit.Millimetre]
	CentreThickness         unit.Optional[unit.Millimetre]
	Index                   unit.Optional[unit.Index]
	Power                   unit.Optional[vergence.Prescription]
}

// Plan is how to choose what is open. What is absent has a default.
type Plan struct {
	Toricity                Toricity
	Offset                  unit.Optional[unit.Dioptre]
	PowerStep, CylinderStep unit.Optional[unit.Dioptre]
	AxisStep                unit.Optional[unit.Degree]
	RadiusStep              unit.Optional[unit.Millimetre]
	TearIndex               unit.Optional[unit.Index]
	ApexClearance           unit.Optional[unit.Micrometre]
}

// Input is one eye, what is decided of its lens, and how to choose the rest.
type Input struct {
	Refraction  vergence.Prescription
	Vertex      unit.Optional[unit.Millimetre]
	Keratometry cornea.Readings
	Shape       unit.Optional[unit.ShapeFactor]
	Iris, Pupil unit.Optional[unit.Millimetre]
	Lens        LensInput
	Plan        Plan
}

// Case is an Input that makes sense. Only NewCase and Parse make one.
type Case struct {
	refraction  vergence.SpectacleRefraction
	cornea      cornea.Cornea
	iris, pupil unit.Optional[unit.Millimetre]
	lens        LensInput
	kept        unit.Optional[vergence.SphereCylinder]
	toricity    Toricity
	layer       tear.Layer
	apexGiven   bool
	offset      unit.Dioptre
	power       unit.Step[unit.Dioptre]
	cylinder    unit.Step[unit.Dioptre]
	axis        unit.Step[unit.Degree]
	radius      unit.Step[unit.Millimetre]
}

// The defaults of a plan.
//
// Source: common practice (the steps that most labs supply).
const (
	usualPowerStep    unit.Dioptre    = 0.25
	usualCylinderStep unit.Dioptre    = 0.25
	usualAxisStep     unit.Degree     = 5
	usualRadiusStep   unit.Millimetre = 0.05
)

// WidestRigid is the greatest total diameter of a rigid corneal lens.
//
// Source: common practice (it must be smaller than the visible iris, of which 15 mm is beyond any, less the movement).
const WidestRigid unit.Millimetre = 13

// NewCase checks an input: Parse of a new case.
//
// Source: definition.
func NewCase(in Input) (Case, []error) {
	var c Case
	faults := c.Parse(&in)
	return c, faults
}

// Parse checks an input, and makes c the case of it, whatever c was. It returns every fault, each a *unit.FieldError with a path in the words of the schema that begins
// at eye, lens or plan.
//
// Source: definition.
func (c *Case) Parse(in *Input) []error {
	var faults []error
	fault := func(field, problem, looksLike string) {
		faults = append(faults, &unit.FieldError{Field: field, Problem: problem, LooksLike: looksLike})
	}
	within := func(prefix string, errs []error) {
		for _, err := range errs {
			faults = append(faults, unit.Within(prefix, err))
		}
	}
	*c = Case{
		lens:     in.Lens,
		iris:     in.Iris,
		pupil:    in.Pupil,
		layer:    tear.Layer{Index: in.Plan.TearIndex.Or(tear.DefaultIndex), Apex: in.Plan.ApexClearance.Or(0).Millimetres()},
		offset:   in.Plan.Offset.Or(0),
		power:    unit.NewStep(in.Plan.PowerStep.Or(usualPowerStep)),
		cylinder: unit.NewStep(in.Plan.CylinderStep.Or(usualCylinderStep)),
		axis:     unit.NewStep(in.Plan.AxisStep.Or(usualAxisStep)),
		radius:   unit.NewStep(in.Plan.RadiusStep.Or(usualRadiusStep)),
	}
	c.apexGiven = in.Plan.ApexClearance.Given()

	var errs []error
	c.refraction, errs = vergence.NewSpectacleRefraction(in.Refraction, in.Vertex)
	within("eye.refraction", errs)
	c.cornea, errs = cornea.New(in.Keratometry, in.Shape)
	corneaFine := errs == nil
	within("eye.keratometry", errs)

	// The numbers that have to be there for a formula to hold.
	positive(fault, "plan.power_step_d", in.Plan.PowerStep)
	positive(fault, "plan.cylinder_step_d", in.Plan.CylinderStep)
	positive(fault, "plan.axis_step_deg", in.Plan.AxisStep)
	positive(fault, "plan.radius_step_mm", in.Plan.RadiusStep)
	positive(fault, "eye.iris_diameter_mm", in.Iris)
	positive(fault, "eye.pupil_diameter_mm", in.Pupil)
	positive(fault, "lens.back_surface.optic_zone_radius_mm", in.Lens.BackRadius)
	positive(fault, "lens.back_surface.steep_radius_mm", in.Lens.SteepRadius)
	positive(fault, "lens.back_surface.optic_zone_diameter_mm", in.Lens.ZoneDiameter)
	positive(fault, "lens.total_diameter_mm", in.Lens.Diameter)
	positive(fault, "lens.centre_thickness_mm", in.Lens.CentreThickness)
	if !(c.layer.Index > 1 && unit.Finite(c.layer.Index)) {
		fault("plan.tear_index", "is not an index above 1", "")
	}
	if !(c.layer.Apex >= 0 && unit.Finite(c.layer.Apex)) {
		fault("plan.apex_clearance_um", "is not a thickness of 0 µm or more", "a lens that cuts into the cornea")
	}
	if !unit.Finite(c.offset) {
		fault("plan.back_curve_offset_d", "is not a finite number", "")
	}
	if n := in.Lens.Index.Or(usualIndex); !(n > c.layer.Index && unit.Finite(n)) {
		fault("lens.material.refractive_index", fmt.Sprintf("is %v, not above that of the tears, %v", n, c.layer.Index), "")
	}
	if m := in.Lens.FlatMeridian.Or(180); !(m >= 0 && m <= 180) {
		fault("lens.back_surface.flat_meridian_deg", fmt.Sprintf("is %v, outside [0°, 180°]", m), "")
	}
	if d := in.Lens.Diameter.Or(0); d > WidestRigid {
		fault("lens.total_diameter_mm", fmt.Sprintf("is %v; a rigid corneal lens is at most %v wide", d, WidestRigid),
			"a soft or a scleral lens")
	}
	if zone, given := in.Lens.ZoneDiameter.Get(); given && in.Lens.Diameter.Given() && zone > in.Lens.Diameter.Or(0) {
		fault("lens.back_surface.optic_zone_diameter_mm", fmt.Sprintf("is %v, wider than the lens, %v", zone, in.Lens.Diameter.Or(0)),
			"the zone and the total diameter exchanged")
	}
	if flat, steep := in.Lens.BackRadius.Or(0), in.Lens.SteepRadius.Or(0); flat > 0 && steep > flat {
		fault("lens.back_surface.steep_radius_mm", fmt.Sprintf("is %v, longer than the flat one, %v", steep, flat),
			"the flat and steep radii exchanged")
	}

	c.toricity = in.Lens.Toricity
	switch wanted := in.Plan.Toricity; {
	case c.toricity == Undecided:
		c.toricity = wanted
	case wanted != Undecided && wanted != c.toricity:
		fault("plan.toricity", fmt.Sprintf("asks for a %v lens, and lens.toricity says %v", wanted, c.toricity), "")
	}
	if in.Lens.SteepRadius.Given() && (c.toricity == Spherical || c.toricity == FrontToric) {
		fault("lens.back_surface.steep_radius_mm", fmt.Sprintf("is given, and a %v lens has a spherical back", c.toricity), "")
	}
	if corneaFine && c.cornea.Astigmatism() == 0 && !in.Lens.FlatMeridian.Given() && (c.toricity.toricBack() || in.Lens.SteepRadius.Given()) {
		fault("lens.back_surface.flat_meridian_deg", "is missing, and the cornea has no flat meridian that the lens could follow", "")
	}
	if p, given := in.Lens.Power.Get(); given {
		toric := c.toricity != Undecided && c.toricity != Spherical || in.Lens.SteepRadius.Given()
		if toric && !p.Cylinder.Given() {
			fault("lens.power.cylinder_d", "is missing, and the lens is toric; write 0 for no cylinder", "")
		}
		sc, errs := vergence.NewSphereCylinder(p)
		within("lens.power", errs)
		if c.toricity == Spherical && sc.Cylinder != 0 {
			fault("lens.power.cylinder_d", fmt.Sprintf("is %v, and a spherical lens has none", sc.Cylinder), "")
		}
		c.kept = unit.Some(sc)
	}
	if faults != nil {
		*c = Case{}
	}
	return faults
}

// positive reports a number that is there and is not above 0 and finite.
func positive[T ~float64](fault func(field, problem, looksLike string), field string, x unit.Optional[T]) {
	if v, given := x.Get(); given && !(v > 0 && unit.Finite(v)) {
		fault(field, fmt.Sprintf("is %v, not a finite number above 0", v), "")
	}
}
