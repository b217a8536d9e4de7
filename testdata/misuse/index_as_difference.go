package misuse

import (
	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
)

// An index has no power: the difference of two has.
func misuse(back surface.Curvature, n unit.Index) {
	_ = back.Power(n) // want: cannot use n ... as unit.IndexDifference value
	// instead: _ = back.Power(n.Less(unit.Air))
}
