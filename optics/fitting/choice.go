package fitting

import "meniscus.example/optics/unit"

// Choice is something that the input left open: the field, the rule that decided it, and where the rule comes
// from.
type Choice struct {
	Field, Rule, Source string
}

// The defaults of a lens.
//
// Source: the choices below name them.
const (
	usualIndex      unit.Index      = 1.45
	usualIris       unit.Millimetre = 11.8
	smallerThanIris unit.Millimetre = 2
	widerThanPupil  unit.Millimetre = 2
	usualPeriphery  unit.Millimetre = 1.4
	leastPeriphery  unit.Millimetre = 0.4
	shortOfCornea   unit.Dioptre    = 0.5
)

const bennett = "Bennett, Sorbara & Kojima, in Clinical Manual of Contact Lenses, 5th ed., 2020"

var (
	choiceApex = Choice{
		"plan.apex_clearance_um",
		"0 µm: the lens taken to touch at the apex, as in the usual reckoning; 15 µm would change the power by about 0.02 D",
		"common practice (tear lens as the difference of the curves)",
	}
	choiceRadius = Choice{
		"lens.back_surface.optic_zone_radius_mm",
		"offset from the flat corneal reading (plan.back_curve_offset_d, 0.00 D unless given), to the nearest available radius",
		"common practice; on flat K to 0.50 D flatter: " + bennett,
	}
	choiceSteepRadius = Choice{
		"lens.back_surface.steep_radius_mm",
		"back toricity two thirds of the corneal toricity, or 0.50 D short of it where that is more, to the nearest available radius",
		"least rotation with 2/3 to all of the corneal toricity: Edrington et al.; 0.50 D short for tear exchange: Pitts et al. 2001",
	}
	choiceFlatMeridian = Choice{
		"lens.back_surface.flat_meridian_deg",
		"the flat meridian of the cornea",
		"common practice",
	}
	choiceDiameterOfIris = Choice{
		"lens.total_diameter_mm",
		"visible iris diameter less 2 mm",
		bennett,
	}
	choiceDiameter = Choice{
		"lens.total_diameter_mm",
		"visible iris diameter less 2 mm, with a mean iris of 11.8 mm since none was given",
		bennett + "; mean iris diameter of adults 11.6 to 12.0 mm",
	}
	choiceZoneOfPupil = Choice{
		"lens.back_surface.optic_zone_diameter_mm",
		"pupil in dim light and 2 mm more, at least 0.4 mm less than the total diameter",
		bennett + "; the least periphery is common practice",
	}
	choiceZone = Choice{
		"lens.back_surface.optic_zone_diameter_mm",
		"total diameter less 1.4 mm",
		"common practice, from memory",
	}
	choiceThickness = Choice{
		"lens.centre_thickness_mm",
		"by power: 0.18 mm at 0.00 D, 0.01 mm less a dioptre of minus down to 0.12 mm, 0.03 mm more a dioptre of plus; " +
			"0.02 mm more a dioptre of corneal astigmatism; 1 mm at the most",
		"common practice, from memory",
	}
	choiceIndex = Choice{
		"lens.material.refractive_index",
		"1.45, a middling rigid gas-permeable material, since none was given",
		"common practice, from memory",
	}
	choicePower = Choice{
		"lens.power",
		"of the available powers the one with the least blur strength of the predicted over-refraction; of equals the more plus " +
			"sphere, then the smaller cylinder",
		"blur strength: Thibos, Wheeler & Horner 1997",
	}
	choiceToricity = Choice{
		"lens.toricity",
		"spherical, unless the cornea has 2.50 D of astigmatism or a spherical lens leaves more than 0.75 D; then the simplest kind " +
			"that leaves 0.50 D or less",
		"common practice; toric back from 2.00 D (Mandell) to 3.00 D (Bennett) of corneal toricity, 0.75 D of residual astigmatism may " +
			"reduce vision",
	}
	choiceToricityOfLens = Choice{
		"lens.toricity",
		"what the back radii and the power that were given make it",
		"definition",
	}
)

var choiceShape = Choice{
	"cornea_shape",
	"asphericity Q = -0.26, a mean of adults, since none was given",
	"Navarro's eye (7.72 mm, Q -0.26); populations -0.24 ± 0.10, n = 500, and -0.30 ± 0.12, n = 1052 (PMC10926314)",
}

// ChoiceOfToricity is the choice that Result.Compared belongs to.
//
// Source: it names its own.
func ChoiceOfToricity() *Choice { return &choiceToricity }

// ChoiceOfShape is the choice of a corneal shape where none was given.
//
// Source: it names its own.
func ChoiceOfShape() *Choice { return &choiceShape }

// AllChoices are the choices that an answer may hold. They are not to be changed.
//
// Source: each names its own.
func AllChoices() []*Choice {
	return []*Choice{
		&choiceApex, &choiceRadius, &choiceSteepRadius, &choiceFlatMeridian, &choiceDiameterOfIris, &choiceDiameter, &choiceZoneOfPupil, &choiceZone,
		&choiceThickness, &choiceIndex, &choicePower, &choiceToricity, &choiceToricityOfLens, &choiceShape,
	}
}
