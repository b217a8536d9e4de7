package misuse

import "meniscus.example/optics/lens"

// The front vertex power of a lens is not its back vertex power.
func misuse(body lens.Body, front lens.FrontVertexPower, back lens.BackVertexPower) {
	_, _ = body.FrontPower(front) // want: cannot use front ... as lens.BackVertexPower value
	// instead: _, _ = body.FrontPower(back)
}
