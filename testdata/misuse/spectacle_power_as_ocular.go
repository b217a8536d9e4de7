package misuse

import (
	"meniscus.example/optics/surface"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/vergence"
)

// Nor is the power of the spectacle lens, taken out of it.
func misuse(layer tear.Layer, refraction vergence.SpectacleRefraction, cornea, back surface.Curvature) {
	_, _ = layer.Required(refraction.Power(), cornea, back) // want: cannot use refraction.Power() ... as vergence.OcularRefraction value
	// instead: _, _ = layer.Required(refraction.Ocular(), cornea, back)
}
