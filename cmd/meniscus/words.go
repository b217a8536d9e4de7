package main

import (
	"fmt"
	"strconv"
	"strings"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

// keratometric is the number that turns millimetres into a keratometer's dioptres, at the index 1.3375.
const keratometric = 337.5

// sideName names an eye, or is empty.
func sideName(s pb.Side) string {
	switch s {
	case pb.Side_SIDE_RIGHT:
		return "right eye (OD)"
	case pb.Side_SIDE_LEFT:
		return "left eye (OS)"
	}
	return ""
}

// kindName names a lens: what it is, and which of its surfaces are toric.
func kindName(l *pb.Lens) string {
	return plainEnum(l.GetKind().String(), "LENS_KIND_") + ", " + toricityName(l.GetToricity())
}

func toricityName(t pb.Toricity) string {
	switch t {
	case pb.Toricity_TORICITY_FRONT:
		return "front toric"
	case pb.Toricity_TORICITY_BACK:
		return "back toric"
	}
	return plainEnum(t.String(), "TORICITY_")
}

// plainEnum makes words of the name of an enum's value. A value that this program does not know has a number for a name.
func plainEnum(name, prefix string) string {
	if _, err := strconv.Atoi(name); err == nil {
		return "number " + name
	}
	return strings.ReplaceAll(strings.ToLower(strings.TrimPrefix(name, prefix)), "_", " ")
}

// mm writes a length with at least so many decimals, and up to three where it has them.
func mm(x float64, least int) string {
	text := upTo(3, x)
	if _, fraction, _ := strings.Cut(text, "."); len(fraction) < least {
		text = notation.Decimal(x, least)
	}
	return text + " mm"
}

// upTo writes a number with the decimals that it has, but not more than so many.
func upTo(decimals int, x float64) string {
	return strconv.FormatFloat(notation.Round(x, decimals), 'f', -1, 64)
}

// distance writes a vertex distance.
func distance(x float64) string {
	if x == 0 {
		return "at the cornea"
	}
	return "at vertex " + mm(x, 0)
}

// curve writes a radius, and what a keratometer would call it.
func curve(r float64) string {
	return fmt.Sprintf("%s (%s D at 1.3375)", mm(r, 2), notation.Decimal(keratometric/r, 2))
}

// along writes a meridian.
func along(deg float64) string { return "along " + notation.Axis(deg) + "°" }

// power writes a power with its units.
func power(p notation.Power, decimals int) string {
	text := notation.FormatPower(p, decimals)
	if sphere, axis, ok := strings.Cut(text, " x "); ok {
		return sphere + " D x " + axis + "°"
	}
	if text == "plano" {
		return text
	}
	return text + " D"
}

// order writes a power that is to be ordered, with every digit that it has.
func order(p *pb.SphereCylinder) string {
	const decimals = 4 // What is left beyond are the rounding errors of binary numbers.
	q := &pb.SphereCylinder{}
	q.SetSphereD(notation.Round(p.GetSphereD(), decimals))
	if c := notation.Round(p.GetCylinderD(), decimals); c != 0 {
		q.SetCylinderD(c)
		if p.HasAxisDeg() {
			q.SetAxisDeg(notation.Round(p.GetAxisDeg(), decimals))
		}
	}
	return power(q, notation.Exact)
}

// dioptres writes a power of one number.
func dioptres(x float64, decimals int) string { return notation.Signed(x, decimals) + " D" }

// quantity writes a number with its unit, to six digits. A power has its sign.
func quantity(x float64, ucum string) string {
	text := strconv.FormatFloat(x, 'g', 6, 64)
	if ucum == "[diop]" && x > 0 {
		text = "+" + text
	}
	switch unit := symbol(ucum); {
	case unit == "":
		return text
	case unit == "°":
		return text + unit
	default:
		return text + noBreak + unit
	}
}

// reading writes a keratometer reading as it was read, to its last digit.
func reading(m *pb.MeridianReading) string {
	text := "absent"
	switch m.WhichReading() {
	case pb.MeridianReading_RadiusMm_case:
		text = notation.Decimal(m.GetRadiusMm(), notation.Exact) + " mm"
	case pb.MeridianReading_PowerD_case:
		text = notation.Decimal(m.GetPowerD(), notation.Exact) + " D"
	}
	if m.HasAuxiliaryLensD() {
		text += " with " + dioptres(m.GetAuxiliaryLensD(), 2)
	}
	if m.HasMeridianDeg() {
		text += " " + along(m.GetMeridianDeg())
	}
	return text
}

// readings writes a pair of readings.
func readings(k *pb.Keratometry) string {
	return "flat " + reading(k.GetFlat()) + ", steep " + reading(k.GetSteep())
}
