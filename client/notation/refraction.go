package notation

import (
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// ParseRefraction reads a refraction: the sphere, then optionally cylinder and axis, then optionally the vertex distance
// and the addition, each after its word and in either order.
//
//	-4.25 / -1.50 x 175, vertex 12
//	-4.25 -1.50 @ 175
//	plano / -0.75 x 90 add +2.00
//	+2.00 DS BVD 12 mm
//
// Between sphere and cylinder stands a slash, a comma or white space; before the axis x, ×, @, ax or axis. A power without a
// sign is plus, which UnsignedPowers reports. A cylinder keeps the sign that it was given. A missing axis is left absent, and
// numbers are not judged: -425 is -425. It fails with an *Error.
func ParseRefraction(text string) (*pb.Refraction, error) {
	s := &scanner{text: text}
	p, err := s.power("refraction.")
	if err != nil {
		return nil, err
	}
	b := pb.Refraction_builder{SphereD: p.sphere, CylinderD: p.cylinder, AxisDeg: p.axis}
	for !s.done() {
		s.mark(",", ";", "/")
		switch {
		case b.VertexDistanceMm == nil && s.word("vertex", "BVD", "VD"):
			x, err := s.number("refraction.vertex_distance_mm", "a vertex distance in mm, such as 12")
			if err != nil {
				return nil, err
			}
			s.word("mm")
			b.VertexDistanceMm = &x.value
		case b.AddD == nil && s.word("add"):
			x, err := s.number("refraction.add_d", "an addition in D, such as +2.00")
			if err != nil {
				return nil, err
			}
			s.word("D")
			b.AddD = &x.value
		case p.cylinder != nil && p.axis == nil:
			return nil, s.expected("refraction.axis_deg", "the axis after an x, such as x 175")
		default:
			return nil, s.expected("refraction", "the end, or \"vertex 12\", or \"add +2.00\", each once")
		}
	}
	return b.Build(), nil
}

// ParseSphereCylinder reads a power: as ParseRefraction does, without vertex distance and addition. It fails with an
// *Error.
func ParseSphereCylinder(text string) (*pb.SphereCylinder, error) {
	s := &scanner{text: text}
	p, err := s.power("power.")
	if err != nil {
		return nil, err
	}
	if !s.done() {
		if p.cylinder != nil && p.axis == nil {
			return nil, s.expected("power.axis_deg", "the axis after an x, such as x 175")
		}
		return nil, s.expected("power", "the end")
	}
	return pb.SphereCylinder_builder{SphereD: p.sphere, CylinderD: p.cylinder, AxisDeg: p.axis}.Build(), nil
}

// UnsignedPowers names the powers of a refraction that were written without a sign, and so were read as plus: "sphere",
// "cylinder" or both. A minus that was forgotten is the costliest slip of the pen, so whoever shows what was read
// does well to mention it. Zero needs no sign. The list is empty for a text that does not begin with a power.
func UnsignedPowers(text string) []string {
	s := &scanner{text: text}
	p, err := s.power("")
	if err != nil {
		return nil
	}
	return p.unsigned
}

// power is a sphere with a cylinder and an axis, where they were written.
type power struct {
	sphere, cylinder, axis *float64
	unsigned               []string
}

// note remembers a number that was written without a sign.
func (p *power) note(name string, n number) {
	if !n.signed && n.value != 0 {
		p.unsigned = append(p.unsigned, name)
	}
}

// power reads a power. The names of fields in errors begin with prefix.
func (s *scanner) power(prefix string) (power, error) {
	var p power
	if s.word("plano", "pl") {
		p.sphere = proto.Float64(0)
	} else {
		x, err := s.number(prefix+"sphere_d", "a sphere in D, such as -4.25 or plano")
		if err != nil {
			return p, err
		}
		p.sphere = &x.value
		p.note("sphere", x)
	}
	s.word("D")
	if s.word("DS", "sph", "sphere") {
		return p, nil
	}
	// A comma, or nothing at all, can also stand before a vertex distance or an addition.
	before := s.at
	slash := s.mark("/")
	if !slash {
		s.mark(",")
	}
	if !slash && !s.numberAhead() {
		s.at = before
		return p, nil
	}
	y, err := s.number(prefix+"cylinder_d", "a cylinder in D, such as -1.50")
	if err != nil {
		return p, err
	}
	p.cylinder = &y.value
	p.note("cylinder", y)
	s.word("D", "DC", "cyl")
	if !s.mark("×", "@") && !s.word("x", "axis", "ax") {
		return p, nil
	}
	z, err := s.angle(prefix+"axis_deg", "an axis in degrees, such as 175")
	if err != nil {
		return p, err
	}
	p.axis = &z.value
	return p, nil
}
