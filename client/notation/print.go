package notation

import (
	"math"
	"strconv"

	pb "meniscus.example/proto/meniscus/v1"
)

// Power is what can be printed: SphereCylinder and Refraction.
type Power interface {
	GetSphereD() float64
	GetCylinderD() float64
	HasAxisDeg() bool
	GetAxisDeg() float64
}

var (
	_ Power = (*pb.SphereCylinder)(nil)
	_ Power = (*pb.Refraction)(nil)
)

// FormatPower writes a power as -4.25 / -1.50 x 175, with the given number of decimals. A sphere that rounds to zero before a cylinder
// is plano; a cylinder that rounds to zero is left out. The axis has decimals only where it is not whole.
func FormatPower(p Power, decimals int) string {
	sphere, cylinder := Signed(p.GetSphereD(), decimals), round(p.GetCylinderD(), decimals)
	if round(p.GetSphereD(), decimals) == 0 {
		sphere = "plano"
	}
	if cylinder == 0 {
		return sphere
	}
	text := sphere + " / " + Signed(cylinder, decimals)
	if p.HasAxisDeg() {
		text += " x " + Axis(p.GetAxisDeg())
	}
	return text
}

// Axis writes an axis or a meridian, in (0, 180], without decimals where it is whole, else with one.
func Axis(deg float64) string {
	x := round(deg, 1)
	if x == 0 {
		x = 180
	}
	return strconv.FormatFloat(x, 'f', -1, 64)
}

// Signed writes a number with its sign; zero has none.
func Signed(x float64, decimals int) string {
	x = round(x, decimals)
	text := strconv.FormatFloat(x, 'f', decimals, 64)
	if x > 0 {
		return "+" + text
	}
	return text
}

// round rounds to a number of decimals, half away from zero, without a negative zero.
func round(x float64, decimals int) float64 {
	scale := math.Pow10(decimals)
	return math.Round(x*scale)/scale + 0
}
