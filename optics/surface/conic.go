package surface

import (
	"fmt"
	"math"

	"meniscus.example/optics/unit"
)

// Conic is a conic of revolution, or one meridian of a toric conic: apical radius and shape factor.
//
// Source: Baker, Ocular surface equations, 1943 (y² = 2 r s - p s², from memory); ISO 18369-1 (shape factor).
type Conic struct {
	Radius unit.Millimetre
	Shape  unit.ShapeFactor
}

// Sag is the depth of the surface below its apex at the semi-chord y in [0, +Inf):
// s = y²/(r + sqrt(r² - p y²)). It fails with an *unit.ImpossibleError where the conic does not reach
// that far out, p y² > r².
//
// Source: Baker 1943, solved for s in the form without cancellation.
func (c Conic) Sag(y unit.Millimetre) (unit.Millimetre, error) {
	r, h := float64(c.Radius), float64(y)
	root := float64(r*r) - float64(float64(c.Shape)*float64(h*h))
	if !(root >= 0) {
		return 0, &unit.ImpossibleError{
			Problem: fmt.Sprintf("a conic of radius %v and shape factor %v does not reach a semi-chord of %v", c.Radius, c.Shape, y),
			Remedy:  fmt.Sprintf("it ends at %.2f mm", r/math.Sqrt(float64(c.Shape))),
		}
	}
	return unit.Millimetre(float64(h*h) / (r + math.Sqrt(root))), nil
}
