package notation

import (
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// ParseRefraction reads a refraction: sphere, then optionally cylinder and axis, then optionally the vertex distance and
// the addition, each named by its word.
//
//	-4.25 / -1.50 x 175, vertex 12
//	-4.25 -1.50 @ 175
//	plano / -0.75 x 90 add +2.00
//	+2.00 DS BVD 12 mm
//
// A number without a sign is plus. The sign may be a typographic minus; x, × and @ stand before an axis; a slash, a comma or a
// space between the parts. It fails with an *Error.
func ParseRefraction(text string) (*pb.Refraction, error) {
	b := pb.Refraction_builder{}
	s := &scanner{text: text}
	var err *Error
	if b.SphereD, b.CylinderD, b.AxisDeg, err = s.power(); err != nil {
		return nil, err
	}
	for !s.done() {
		s.mark(",", ";", "/")
		switch {
		case s.word("vertex", "BVD", "VD"):
			x, ok := s.number()
			if !ok {
				return nil, s.expected("vertex_distance_mm", "a vertex distance in millimetres")
			}
			s.word("mm")
			b.VertexDistanceMm = proto.Float64(x)
		case s.word("add"):
			x, ok := s.number()
			if !ok {
				return nil, s.expected("add_d", "an addition in dioptres")
			}
			s.word("D")
			b.AddD = proto.Float64(x)
		default:
			return nil, s.expected("vertex_distance_mm", "the end, or vertex 12, or add +2.00")
		}
	}
	return b.Build(), nil
}

// ParseSphereCylinder reads a power: as ParseRefraction, without vertex distance and addition.
func ParseSphereCylinder(text string) (*pb.SphereCylinder, error) {
	b := pb.SphereCylinder_builder{}
	s := &scanner{text: text}
	var err *Error
	if b.SphereD, b.CylinderD, b.AxisDeg, err = s.power(); err != nil {
		return nil, err
	}
	if !s.done() {
		return nil, s.expected("axis_deg", "the end")
	}
	return b.Build(), nil
}

// power reads sphere, and cylinder and axis where they are there.
func (s *scanner) power() (sphere, cylinder, axis *float64, err *Error) {
	x, ok := s.number()
	if !ok {
		if !s.word("plano", "pl") {
			return nil, nil, nil, s.expected("sphere_d", "a sphere, such as -4.25 or plano,")
		}
		x = 0
	}
	sphere = proto.Float64(x)
	if s.word("DS", "sph", "sphere") {
		return sphere, nil, nil, nil
	}
	s.word("D")
	// What follows is a cylinder only where a number stands: it can also be a vertex distance or an addition.
	before := s.at
	slash := s.mark("/")
	y, ok := s.number()
	if !ok {
		if slash {
			return nil, nil, nil, s.expected("cylinder_d", "a cylinder, such as -1.50,")
		}
		s.at = before
		return sphere, nil, nil, nil
	}
	cylinder = proto.Float64(y)
	s.word("D", "DC", "cyl")
	if !s.mark("×", "@") && !s.word("x", "axis", "ax") {
		// Without an axis: the service says that it is missing.
		return sphere, cylinder, nil, nil
	}
	z, ok := s.number()
	if !ok {
		return nil, nil, nil, s.expected("axis_deg", "an axis in degrees")
	}
	s.mark("°")
	return sphere, cylinder, proto.Float64(z), nil
}
