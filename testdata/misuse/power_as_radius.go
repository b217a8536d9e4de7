package misuse

import "meniscus.example/optics/unit"

// A keratometer power is no radius.
func misuse(power unit.Dioptre, radius unit.Millimetre, n unit.Index) {
	_ = unit.KeratometricPower(power, n) // want: cannot use power ... as unit.Millimetre value
	// instead: _ = unit.KeratometricPower(radius, n)
}
