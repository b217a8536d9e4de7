package misuse

import (
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// An axis does not go into the place of the cylinder.
func misuse(sphere, cylinder unit.Dioptre, axis unit.Degree) {
	_ = vergence.SphereCylinder{Sphere: sphere, Cylinder: axis} // want: cannot use axis ... as unit.Dioptre value
	// instead: _ = vergence.SphereCylinder{Sphere: sphere, Cylinder: cylinder, Axis: axis}
}
