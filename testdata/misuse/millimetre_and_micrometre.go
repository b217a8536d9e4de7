package misuse

import "meniscus.example/optics/unit"

// A thickness in millimetres and a clearance in micrometres do not add as they are.
func misuse(thickness unit.Millimetre, clearance unit.Micrometre) {
	_ = thickness + clearance // want: mismatched types unit.Millimetre and unit.Micrometre
	// instead: _ = thickness + clearance.Millimetres()
}
