package misuse

import "meniscus.example/optics/unit"

// A radius is no keratometer power.
func misuse(power unit.Dioptre, radius unit.Millimetre, n unit.Index) {
	_ = unit.KeratometricRadius(radius, n) // want: cannot use radius ... as unit.Dioptre value
	// instead: _ = unit.KeratometricRadius(power, n)
}
