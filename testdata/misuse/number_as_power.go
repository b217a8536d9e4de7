package misuse

import (
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// A number without a unit is no power.
func misuse(sphere float64, stated unit.Dioptre) {
	_ = vergence.Sphere(sphere) // want: cannot use sphere ... as unit.Dioptre value
	// instead: _ = vergence.Sphere(stated)
}
