package cornea

import (
	"fmt"
	"math"

	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// KeratometricIndex is the index by which 7.50 mm is 45.00 D: the default of instruments, and the index in which
// corneal astigmatism and curves in dioptres are stated here.
//
// Source: AJO 02-320, author's comments on keratometric indices (337.5/r).
const KeratometricIndex unit.Index = 1.3375

// PhysicalIndex is the refractive index of the cornea.
//
// Source: Gullstrand's schematic eye no. 1.
const PhysicalIndex unit.Index = 1.376

// MeanShape is the shape taken where none is given: Q = -0.26.
//
// Source: Navarro's eye, 7.72 mm and Q -0.26; within the populations of n = 500 (-0.24 ± 0.10) and n = 1052
// (-0.30 ± 0.12, PMC10926314).
const MeanShape unit.ShapeFactor = 0.74

// The radii that a cornea can have at all; beyond them a reading is a mistake.
const (
	leastRadius    unit.Millimetre = 4
	greatestRadius unit.Millimetre = 12
)

// Factors by which a keratometer reading through an auxiliary lens is multiplied.
//
// Source: published range extension factors of a 36 to 52 D keratometer (teaching notes; the factors).
const (
	plusAuxiliary  unit.Dioptre = 1.25
	plusFactor                  = 1.1659
	minusAuxiliary unit.Dioptre = -1
	minusFactor                 = 0.8576
)

// Reading is a keratometer reading of one principal meridian: a radius, or a power in the
// instrument's keratometric index, one of them.
type Reading struct {
	Radius    unit.Optional[unit.Millimetre]
	Power     unit.Optional[unit.Dioptre]
	Meridian  unit.Optional[unit.Degree]
	Auxiliary unit.Optional[unit.Dioptre]
}

// Readings are the two principal readings, as the instrument gave them. Index is the instrument's
// keratometric index; absent, KeratometricIndex.
type Readings struct {
	Flat, Steep Reading
	Index       unit.Optional[unit.Index]
}

// Cornea is the front surface of a cornea: its principal radii, meridians perpendicular to each other,
// and how it flattens outwards. Only New makes one.
type Cornea struct {
	radii     surface.Radii
	curvature surface.Curvature
	skew      unit.Degree
	shape     unit.ShapeFactor
	shapeMean bool
	extended  bool
}

// New makes a cornea of readings and a shape (absent: MeanShape).
//
// Powers are turned into radii with the instrument's own index before anything else. Meridians that are
// not perpendicular are replaced by the perpendicular pair closest to both, each moved by the same angle;
// one that is absent is perpendicular to the other. It returns every fault, each a *unit.FieldError with a path
// that begins at flat, steep or keratometric_index.
//
// Source: definition (337.5/r: AJO 02-320); the closest pair is the least-squares one.
func New(in Readings, shape unit.Optional[unit.ShapeFactor]) (Cornea, []error) {
	var faults []error
	fault := func(field, problem, looksLike string) {
		faults = append(faults, &unit.FieldError{Field: field, Problem: problem, LooksLike: looksLike})
	}
	index := in.Index.Or(KeratometricIndex)
	if !(index > 1 && unit.Finite(index)) {
		fault("keratometric_index", "is not an index above 1", "")
		index = KeratometricIndex
	}
	flat, flatFaults := in.Flat.radius("flat", index)
	steep, steepFaults := in.Steep.radius("steep", index)
	faults = append(append(faults, flatFaults...), steepFaults...)
	if flatFaults == nil && steepFaults == nil && flat < steep {
		fault(in.Flat.field("flat"), fmt.Sprintf("gives a radius of %.3f mm, shorter than the steep one of %.3f mm; the flat "+
			"meridian has the longer radius and the lower power", float64(flat), float64(steep)),
			"the flat and steep readings exchanged")
	}
	p := shape.Or(MeanShape)
	if !unit.Finite(p) {
		fault("shape_factor_p", "is not a finite number", "")
	}

	c := Cornea{
		radii:     surface.Radii{Flat: flat, Steep: steep, FlatMeridian: 180},
		shape:     p,
		shapeMean: !shape.Given(),
		extended:  in.Flat.Auxiliary.Given() || in.Steep.Auxiliary.Given(),
	}
	along, flatGiven := in.Flat.Meridian.Get()
	across, steepGiven := in.Steep.Meridian.Get()
	for _, m := range []struct {
		field string
		value unit.Degree
	}{{"flat.meridian_deg", along}, {"steep.meridian_deg", across}} {
		if !(m.value >= 0 && m.value <= 180) {
			fault(m.field, fmt.Sprintf("is %v, outside [0°, 180°]", m.value), "")
		}
	}
	if faults != nil {
		return Cornea{}, faults
	}
	if flat == steep {
		c.curvature = surface.Spherical(flat)
		return c, nil
	}
	switch {
	case flatGiven && steepGiven:
		// How far the steep meridian lies counter-clockwise of where it belongs.
		c.skew = (along + 90).Between(across)
		if math.Abs(float64(c.skew)) > 45 {
			fault("steep.meridian_deg", fmt.Sprintf("is %v, only %v from the flat one; principal meridians are about 90° apart",
				across.Meridian(), unit.Degree(90-math.Abs(float64(c.skew)))), "one meridian entered twice")
			return Cornea{}, faults
		}
		c.radii.FlatMeridian = (along + unit.Degree(float64(float64(c.skew)/2))).Meridian()
	case flatGiven:
		c.radii.FlatMeridian = along.Meridian()
	case steepGiven:
		c.radii.FlatMeridian = (across + 90).Meridian()
	default:
		fault("flat.meridian_deg", "is missing, and the two readings differ", "")
		return Cornea{}, faults
	}
	c.curvature = c.radii.Curvature()
	return c, nil
}

// field is the path of the number that was given.
func (r Reading) field(name string) string {
	if r.Power.Given() {
		return name + ".power_d"
	}
	return name + ".radius_mm"
}

func (r Reading) radius(name string, index unit.Index) (unit.Millimetre, []error) {
	fault := func(field, problem, looksLike string) []error {
		return []error{&unit.FieldError{Field: field, Problem: problem, LooksLike: looksLike}}
	}
	radius, isRadius := r.Radius.Get()
	power, isPower := r.Power.Get()
	auxiliary, extended := r.Auxiliary.Get()
	switch {
	case isRadius == isPower:
		return 0, fault(name, "needs a reading: radius_mm or power_d", "")
	case extended && !isPower:
		return 0, fault(name+".auxiliary_lens_d", "goes with power_d only, the reading as the instrument shows it", "")
	case extended && auxiliary == plusAuxiliary:
		power = unit.Dioptre(float64(power) * plusFactor)
	case extended && auxiliary == minusAuxiliary:
		power = unit.Dioptre(float64(power) * minusFactor)
	case extended:
		return 0, fault(name+".auxiliary_lens_d", fmt.Sprintf("is %v; a factor is published for +1.25 D and -1.00 D only", auxiliary), "")
	}
	if isPower {
		radius = unit.KeratometricRadius(power, index)
	}
	if !(radius >= leastRadius && radius <= greatestRadius) {
		problem := fmt.Sprintf("gives a radius of %v, outside [%v, %v]", radius, leastRadius, greatestRadius)
		switch {
		case isRadius && radius >= 25 && radius <= 90:
			return 0, fault(name+".radius_mm", problem, "a keratometer power in dioptres: give it in power_d")
		case isPower && power >= unit.Dioptre(leastRadius) && power <= unit.Dioptre(greatestRadius):
			return 0, fault(name+".power_d", problem, "a radius in millimetres: give it in radius_mm")
		}
		return 0, fault(r.field(name), problem, "")
	}
	return radius, nil
}

// Radii are the principal radii; the flat meridian is 180 where they are the same.
//
// Source: definition.
func (c Cornea) Radii() surface.Radii { return c.radii }

// Curvature is the curvature matrix at the apex.
//
// Source: definition.
func (c Cornea) Curvature() surface.Curvature { return c.curvature }

// Skew is how far from perpendicular the meridians were read, in [-45, 45]: the steep one
// counter-clockwise of the perpendicular to the flat one where positive. 0 where one was not given.
//
// Source: definition.
func (c Cornea) Skew() unit.Degree { return c.skew }

// Shape is the shape factor, given or the mean.
//
// Source: definition.
func (c Cornea) Shape() unit.ShapeFactor { return c.shape }

// ShapeAssumed reports that no shape was given.
//
// Source: definition.
func (c Cornea) ShapeAssumed() bool { return c.shapeMean }

// Extended reports that a reading was made through an auxiliary lens.
//
// Source: definition.
func (c Cornea) Extended() bool { return c.extended }

// FlatK is the power of the flat meridian at KeratometricIndex.
//
// Source: AJO 02-320 (337.5/r).
func (c Cornea) FlatK() unit.Dioptre { return unit.KeratometricPower(c.radii.Flat, KeratometricIndex) }

// SteepK is the power of the steep meridian at KeratometricIndex.
//
// Source: AJO 02-320 (337.5/r).
func (c Cornea) SteepK() unit.Dioptre {
	return unit.KeratometricPower(c.radii.Steep, KeratometricIndex)
}

// Astigmatism is the corneal astigmatism, SteepK - FlatK; never negative.
//
// Source: definition.
func (c Cornea) Astigmatism() unit.Dioptre { return c.SteepK() - c.FlatK() }

// Sags are the depths of the cornea over a chord in (0, +Inf), along the flat and the steep meridian, each a conic with the
// cornea's shape. It fails with an *unit.ImpossibleError where a meridian does not reach that far out. A corneal conic
// ends at the limbus, a chord of about 11.5 mm: the caller sees to that.
//
// Source: Baker 1943, as surface.Conic.Sag.
func (c Cornea) Sags(chord unit.Millimetre) (flat, steep unit.Millimetre, err error) {
	if flat, err = (surface.Conic{Radius: c.radii.Flat, Shape: c.shape}).Sag(chord / 2); err != nil {
		return 0, 0, err
	}
	steep, err = (surface.Conic{Radius: c.radii.Steep, Shape: c.shape}).Sag(chord / 2)
	return flat, steep, err
}

// FrontPower is the power of the front surface in air, with PhysicalIndex.
//
// Source: Gullstrand's schematic eye no. 1; (n' - n) C.
func (c Cornea) FrontPower() vergence.PowerVector {
	return c.curvature.Power(PhysicalIndex.Less(unit.Air))
}

// Correcting is the minus cylinder that corrects the corneal astigmatism at the cornea, with no sphere: its axis is the flat
// meridian.
//
// Source: definition.
func (c Cornea) Correcting() vergence.SphereCylinder {
	if c.Astigmatism() < vergence.NoCylinder {
		return vergence.SphereCylinder{}
	}
	return vergence.SphereCylinder{Cylinder: -c.Astigmatism(), Axis: c.radii.FlatMeridian}
}
