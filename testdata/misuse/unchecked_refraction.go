package misuse

import (
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// A refraction is made by its constructor, which checks it.
func misuse(written vergence.Prescription, vertex unit.Optional[unit.Millimetre]) {
	_ = vergence.SpectacleRefraction{vertex: 12} // want: unexported field vertex
	// instead: _, _ = vergence.NewSpectacleRefraction(written, vertex)
}
