package fitting

import (
	"math"

	"meniscus.example/optics/unit"
)

// AcuityModel names the model by which Acuity follows from blur.
const AcuityModel = "smallest resolved angle grows as 1 + B², B the blur strength in dioptres (Blendowske, Optom Vis Sci 2015); " +
	"without accommodation, from an eye that has 1.0"

// Acuity predicts what a blur strength in [0, +Inf) does to an eye that resolves one minute of arc without it: the
// loss in logMAR, log10(1 + B²), and the decimal acuity, 1/(1 + B²), both dimensionless.
//
// Source: Blendowske, Optom Vis Sci 2015 (the minimum angle of resolution grows in proportion to 1 + b²).
func Acuity(blur unit.Dioptre) (lossLogMAR, decimal float64) {
	mar := 1 + float64(float64(blur)*float64(blur))
	return math.Log10(mar), 1 / mar
}
