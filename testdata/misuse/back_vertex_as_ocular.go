package misuse

import (
	"meniscus.example/optics/lens"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/vergence"
)

// The back vertex power of a lens is no refraction.
func misuse(layer tear.Layer, power lens.BackVertexPower, k vergence.OcularRefraction, cornea, back surface.Curvature) {
	_, _ = layer.Required(power, cornea, back) // want: cannot use power ... as vergence.OcularRefraction value
	// instead: _, _ = layer.Required(k, cornea, back)
}
