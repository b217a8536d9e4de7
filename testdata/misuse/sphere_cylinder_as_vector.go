package misuse

import "meniscus.example/optics/vergence"

// Sphere and cylinder do not add with another power: their power vectors do.
func misuse(written vergence.SphereCylinder, power vergence.PowerVector) {
	_ = power.Add(written) // want: cannot use written ... as vergence.PowerVector value
	// instead: _ = power.Add(written.Vector())
}
