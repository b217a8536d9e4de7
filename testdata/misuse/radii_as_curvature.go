package misuse

import (
	"meniscus.example/optics/surface"
	"meniscus.example/optics/tear"
)

// Two principal radii and a meridian are no curvature before they are made one.
func misuse(layer tear.Layer, back surface.Radii, cornea surface.Curvature) {
	_ = layer.Lens(back, cornea) // want: cannot use back ... as surface.Curvature value
	// instead: _ = layer.Lens(back.Curvature(), cornea)
}
