package lens

import (
	"math"

	"meniscus.example/optics/unit"
)

// The rule of thumb for the centre thickness of a rigid lens.
//
// Source: common practice, from memory: 0.18 mm without power, 0.01 mm less a dioptre of minus down to 0.12 mm,
// 0.03 mm more a dioptre of plus, 0.02 mm more a dioptre of corneal astigmatism against flexure, and 1 mm at the most.
const (
	planoThickness     unit.Millimetre = 0.18
	leastThickness     unit.Millimetre = 0.12
	greatestThickness  unit.Millimetre = 1
	lessPerMinus                       = 0.01
	morePerPlus                        = 0.03
	morePerAstigmatism                 = 0.02
)

// UsualCentreThickness is a starting point for the centre thickness of a rigid lens of the given spherical
// equivalent, on a cornea of the given astigmatism (0 or more), in steps of 0.01 mm.
//
// Source: common practice, from memory.
func UsualCentreThickness(power, astigmatism unit.Dioptre) unit.Millimetre {
	t := planoThickness
	if power < 0 {
		t = max(leastThickness, t+unit.Millimetre(lessPerMinus*float64(power)))
	} else {
		t += unit.Millimetre(morePerPlus * float64(power))
	}
	t += unit.Millimetre(morePerAstigmatism * float64(astigmatism))
	return min(greatestThickness, unit.Millimetre(math.Round(float64(t)*100)/100))
}
