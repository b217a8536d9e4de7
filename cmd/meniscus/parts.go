package main

import (
	"fmt"
	"slices"
	"strings"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

// answer is what every calculated answer has.
type answer interface {
	GetCautions() []*pb.Caution
	GetDerivation() []*pb.DerivationStep
	GetProvenance() *pb.Provenance
}

// end writes what ends every answer: cautions, derivation where it was asked for, and the notice.
func (p *page) end(res answer) {
	p.cautions(res.GetCautions())
	p.derivation(res.GetDerivation())
	p.notice(res.GetProvenance())
}

// given is the row of a refraction as it was read, to its last digit.
func given(r *pb.Refraction) []string {
	at := "no vertex distance given"
	if r.HasVertexDistanceMm() {
		at = distance(r.GetVertexDistanceMm())
	}
	return []string{"refraction given", power(r, notation.Exact), at}
}

// vector is the row of a power vector.
func vector(v *pb.PowerVector) []string {
	return []string{"power vector", fmt.Sprintf("M %s, J0 %s, J45 %s",
		dioptres(v.GetMeanD(), 3), dioptres(v.GetJ0D(), 3), dioptres(v.GetJ45D(), 3))}
}

// choices lists what was left open, and the flag that would have decided it.
func (p *page) choices(list []*pb.Choice) {
	if len(list) == 0 {
		return
	}
	p.title("Chosen, since it was not given")
	for _, c := range list {
		text := p.label(c.GetField()) + ": " + c.GetRule()
		if p.sources {
			text += " [" + c.GetSource() + "]"
		}
		p.item(text)
	}
}

// labels are the trade's words for fields of the schema.
func label(field string) string {
	switch field {
	case "lens.toricity":
		return "kind"
	case "lens.power":
		return "back vertex power"
	case "lens.total_diameter_mm":
		return "total diameter"
	case "lens.centre_thickness_mm":
		return "centre thickness"
	case "lens.back_surface.optic_zone_radius_mm":
		return "back optic zone radius"
	case "lens.back_surface.steep_radius_mm":
		return "back optic zone radius, steep"
	case "lens.back_surface.flat_meridian_deg":
		return "flat meridian of the back"
	case "lens.back_surface.optic_zone_diameter_mm":
		return "back optic zone diameter"
	case "lens.material.refractive_index":
		return "refractive index"
	case "plan.apex_clearance_um":
		return "tears at the apex"
	case "cornea_shape", "eye.cornea_shape":
		return "corneal shape"
	}
	return field
}

// label names a field in the words of the trade, where it has some, with the flag that gives it.
func (p *page) label(field string) string {
	for _, path := range []string{field, field + ".asphericity_q"} {
		if flag := p.flags.of(path); flag != "" {
			return label(field) + " (" + flag + ")"
		}
	}
	return label(field)
}

// cautions lists cautions, the most severe first.
func (p *page) cautions(list []*pb.Caution) {
	p.title("Cautions")
	list = slices.Clone(list)
	slices.SortStableFunc(list, func(a, b *pb.Caution) int { return int(b.GetSeverity()) - int(a.GetSeverity()) })
	told := 0
	for _, c := range list {
		if c.GetCode() == pb.CautionCode_CAUTION_CODE_STARTING_POINT {
			continue // The notice says it.
		}
		told++
		p.caution(c)
	}
	if told == 0 {
		p.item("none but the notice below")
	}
}

// caution writes one caution: severity, name, message, the numbers that raised it, and what the trade does next.
func (p *page) caution(c *pb.Caution) {
	p.item(fmt.Sprintf("%s, %s: %s", severityName(c.GetSeverity()), cautionName(c.GetCode()), c.GetMessage()))
	further := func(text string) { p.wrap("    ", "    ", text) }
	if c.HasValue() {
		text := "Value " + twoDecimals(c.GetValue(), c.GetUnit())
		if c.HasLimit() {
			text += ", limit " + twoDecimals(c.GetLimit(), c.GetUnit())
		}
		further(text + ".")
	}
	if c.GetAction() != "" {
		further("Next: " + c.GetAction() + ".")
	}
	if p.sources && c.GetSource() != "" {
		further("Source: " + c.GetSource() + ".")
	}
}

// severityName is a severity as a word; the one that is to be resolved before ordering stands out.
func severityName(s pb.Severity) string {
	if s == pb.Severity_SEVERITY_WARNING {
		return "WARNING"
	}
	return plainEnum(s.String(), "SEVERITY_")
}

func cautionName(c pb.CautionCode) string { return plainEnum(c.String(), "CAUTION_CODE_") }

// twoDecimals writes the number of a caution with its unit. Limits are of what a number is without its sign.
func twoDecimals(x float64, ucum string) string {
	switch unit := symbol(ucum); unit {
	case "":
		return notation.Decimal(x, 2)
	case "°":
		return notation.Decimal(x, 1) + unit
	default:
		return notation.Decimal(x, 2) + noBreak + unit
	}
}

// derivation writes the steps of a calculation, numbered, and then the sources to which they refer.
func (p *page) derivation(steps []*pb.DerivationStep) {
	if len(steps) == 0 {
		return
	}
	p.title("Derivation")
	var sources []string
	for i, s := range steps {
		cite := ""
		if source := s.GetSource(); source != "" {
			n := slices.Index(sources, source)
			if n < 0 {
				n = len(sources)
				sources = append(sources, source)
			}
			cite = fmt.Sprintf(" [%d]", n+1)
		}
		result := s.GetResult()
		p.wrap(fmt.Sprintf("  %2d. ", i+1), "      ", fmt.Sprintf("%s: %s = %s = %s",
			s.GetName(), result.GetName(), s.GetFormula(), quantity(result.GetValue(), result.GetUnit())))
		inputs := make([]string, len(s.GetInputs()))
		for j, in := range s.GetInputs() {
			inputs[j] = in.GetName() + noBreak + "=" + noBreak + quantity(in.GetValue(), in.GetUnit())
		}
		p.wrap("      ", "      ", "with "+strings.Join(inputs, ", ")+cite)
	}
	p.title("Sources of the derivation")
	for i, source := range sources {
		p.wrap(fmt.Sprintf("  [%d] ", i+1), "      ", source)
	}
}

// notice writes what the answer is and is not.
func (p *page) notice(from *pb.Provenance) {
	p.title("Notice")
	text := from.GetNotice()
	if text == "" {
		text = safety
	}
	p.wrap("  ", "  ", text)
	if from.HasEngineVersion() {
		p.wrap("  ", "  ", "(engine "+from.GetEngineVersion()+", schema "+from.GetSchemaVersion()+")")
	}
}
