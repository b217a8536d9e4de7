package notation

import (
	"math"
	"strconv"
	"strings"

	pb "meniscus.example/proto/meniscus/v1"
)

// Exact, in the place of a number of decimals, writes a number with all the digits that it has, and powers and radii with two
// at least: what is written so is read again as the same number.
const Exact = -1

// Power is what can be printed: SphereCylinder and Refraction.
type Power interface {
	HasSphereD() bool
	GetSphereD() float64
	HasCylinderD() bool
	GetCylinderD() float64
	HasAxisDeg() bool
	GetAxisDeg() float64
}

var (
	_ Power = (*pb.SphereCylinder)(nil)
	_ Power = (*pb.Refraction)(nil)
)

// FormatPower writes a power as -4.25 / -1.50 x 175, with the given number of decimals, or Exact. A sphere that rounds to
// zero is plano; a cylinder that rounds to zero is left out, and its axis with it (Exact leaves out only what is absent).
// The cylinder keeps its form, minus or plus. Sphere and cylinder are rounded apart, which is good for reading and wrong for
// choosing what to order.
func FormatPower(p Power, decimals int) string {
	text := "plano"
	switch {
	case !p.HasSphereD():
		text = "no sphere"
	case Round(p.GetSphereD(), decimals) != 0:
		text = Signed(p.GetSphereD(), decimals)
	}
	if !p.HasCylinderD() || decimals != Exact && Round(p.GetCylinderD(), decimals) == 0 {
		return text
	}
	text += " / " + Signed(p.GetCylinderD(), decimals)
	switch {
	case !p.HasAxisDeg():
	case decimals == Exact:
		text += " x " + plain(p.GetAxisDeg())
	default:
		text += " x " + Axis(p.GetAxisDeg())
	}
	return text
}

// FormatRefraction writes a refraction as -4.25 / -1.50 x 175, vertex 12 mm, add +2.00: the power as FormatPower does, then what
// else is there.
func FormatRefraction(r *pb.Refraction, decimals int) string {
	text := FormatPower(r, decimals)
	if r.HasVertexDistanceMm() {
		text += ", vertex " + plain(r.GetVertexDistanceMm()) + " mm"
	}
	if r.HasAddD() {
		text += ", add " + Signed(r.GetAddD(), decimals)
	}
	return text
}

// FormatKeratometry writes readings as 7.80 mm @ 180 / 7.60 mm @ 90, the flat one first. An auxiliary lens is written in
// parentheses after its reading, which ParseKeratometry does not read.
func FormatKeratometry(k *pb.Keratometry, decimals int) string {
	return formatReading(k.GetFlat(), decimals) + " / " + formatReading(k.GetSteep(), decimals)
}

func formatReading(m *pb.MeridianReading, decimals int) string {
	text := "no reading"
	switch m.WhichReading() {
	case pb.MeridianReading_RadiusMm_case:
		text = Decimal(m.GetRadiusMm(), decimals) + " mm"
	case pb.MeridianReading_PowerD_case:
		text = Decimal(m.GetPowerD(), decimals) + " D"
	}
	if m.HasAuxiliaryLensD() {
		text += " (auxiliary lens " + Signed(m.GetAuxiliaryLensD(), 2) + " D)"
	}
	switch {
	case !m.HasMeridianDeg():
	case decimals == Exact:
		text += " @ " + plain(m.GetMeridianDeg())
	default:
		text += " @ " + Axis(m.GetMeridianDeg())
	}
	return text
}

// Axis writes an axis or a meridian in (0, 180], without decimals where it is whole, else rounded to one; 0 is written
// 180.
func Axis(deg float64) string {
	x := Round(deg, 1)
	if x == 0 {
		x = 180
	}
	return plain(x)
}

// Signed writes a number with its sign and the given number of decimals, or Exact. Zero has no sign.
func Signed(x float64, decimals int) string {
	text := Decimal(x, decimals)
	if Round(x, decimals) > 0 {
		return "+" + text
	}
	return text
}

// Round rounds to a number of decimals in [0, 15]. A tie goes away from zero, and there is no negative zero. With Exact, and for a
// number so great that it has no decimals, it only removes the sign of a zero.
func Round(x float64, decimals int) float64 {
	const whole = 1 << 52 // from here on every float64 is a whole number
	if decimals == Exact || !(math.Abs(x) < whole) {
		return x + 0
	}
	scale := math.Pow10(decimals)
	return math.Round(x*scale)/scale + 0
}

// Decimal writes a number with the given number of decimals, or Exact. Only a minus is written; zero has none.
func Decimal(x float64, decimals int) string {
	text := strconv.FormatFloat(Round(x, decimals), 'f', decimals, 64)
	if decimals != Exact {
		return text
	}
	_, fraction, point := strings.Cut(text, ".")
	if !point {
		text += "."
	}
	return text + strings.Repeat("0", max(0, 2-len(fraction)))
}

// plain writes a number with the decimals that it has.
func plain(x float64) string { return strconv.FormatFloat(x+0, 'f', -1, 64) }
