package misuse

import "meniscus.example/optics/unit"

// What may be absent is no number before somebody says what it is then.
func misuse(sphere unit.Dioptre, cylinder unit.Optional[unit.Dioptre]) {
	_ = sphere + cylinder // want: mismatched types unit.Dioptre and unit.Optional[unit.Dioptre]
	// instead: _ = sphere + cylinder.Or(0)
}
