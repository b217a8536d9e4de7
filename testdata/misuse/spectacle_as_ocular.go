package misuse

import (
	"meniscus.example/optics/surface"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/vergence"
)

// The refraction at the spectacle plane is not the one at the cornea.
func misuse(layer tear.Layer, refraction vergence.SpectacleRefraction, cornea, back surface.Curvature) {
	_, _ = layer.Required(refraction, cornea, back) // want: cannot use refraction ... as vergence.OcularRefraction value
	// instead: _, _ = layer.Required(refraction.Ocular(), cornea, back)
}
