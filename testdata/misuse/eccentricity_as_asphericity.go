package misuse

import "meniscus.example/optics/unit"

// The eccentricity e is not the asphericity Q.
func misuse(e unit.Eccentricity, q unit.Asphericity) {
	q = e // want: cannot use e ... as unit.Asphericity value
	// instead: q = e.ShapeFactor().Asphericity()
}
