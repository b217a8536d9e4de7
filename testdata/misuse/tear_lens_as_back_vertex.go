package misuse

import (
	"meniscus.example/optics/lens"
	"meniscus.example/optics/tear"
)

// The power of the tear lens is not the power of the lens.
func misuse(body lens.Body, tears tear.LensPower, power lens.BackVertexPower) {
	_, _ = body.FrontPower(tears) // want: cannot use tears ... as lens.BackVertexPower value
	// instead: _, _ = body.FrontPower(power)
}
