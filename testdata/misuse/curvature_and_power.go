package misuse

import "meniscus.example/optics/unit"

// A curvature is no power before an index difference multiplies it.
func misuse(power unit.Dioptre, radius unit.Millimetre, step unit.IndexDifference) {
	_ = power + radius.Curvature() // want: mismatched types unit.Dioptre and unit.PerMetre
	// instead: _ = power + step.Power(radius.Curvature())
}
