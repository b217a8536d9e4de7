package misuse

import (
	"meniscus.example/optics/fitting"
	"meniscus.example/optics/unit"
)

// A value that may be absent keeps its unit: the apex clearance of a plan is in micrometres.
func misuse(wanted unit.Millimetre) {
	_ = fitting.Plan{ApexClearance: unit.Some(wanted)} // want: cannot use unit.Some(wanted) ... as unit.Optional[unit.Micrometre] value
	// instead: _ = fitting.Plan{ApexClearance: unit.Some(wanted.Micrometres())}
}
