package misuse

import (
	"meniscus.example/optics/tear"
	"meniscus.example/optics/unit"
)

// The apex gap of a tear layer is in millimetres.
func misuse(clearance unit.Micrometre) {
	_ = tear.Layer{Index: tear.DefaultIndex, Apex: clearance} // want: cannot use clearance ... as unit.Millimetre value
	// instead: _ = tear.Layer{Index: tear.DefaultIndex, Apex: clearance.Millimetres()}
}
