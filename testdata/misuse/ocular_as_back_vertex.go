package misuse

import (
	"meniscus.example/optics/lens"
	"meniscus.example/optics/vergence"
)

// A refraction is no back vertex power: the tears lie between.
func misuse(body lens.Body, k vergence.OcularRefraction, power lens.BackVertexPower) {
	_, _ = body.FrontPower(k) // want: cannot use k ... as lens.BackVertexPower value
	// instead: _, _ = body.FrontPower(power)
}
