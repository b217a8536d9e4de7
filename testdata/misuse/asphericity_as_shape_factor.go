package misuse

import (
	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
)

// The asphericity Q is not the shape factor p.
func misuse(radius unit.Millimetre, q unit.Asphericity) {
	_ = surface.Conic{Radius: radius, Shape: q} // want: cannot use q ... as unit.ShapeFactor value
	// instead: _ = surface.Conic{Radius: radius, Shape: q.ShapeFactor()}
}
