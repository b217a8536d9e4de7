package misuse

import "meniscus.example/optics/unit"

// Dk is not Dk/t.
func misuse(dk unit.Permeability, thickness unit.Millimetre, limit unit.Transmissibility) {
	_ = dk < limit // want: mismatched types unit.Permeability and unit.Transmissibility
	// instead: _ = dk.Transmissibility(thickness) < limit
}
