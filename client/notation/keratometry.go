package notation

import (
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// Between these two a number is neither a corneal radius in millimetres nor a corneal power in dioptres.
const (
	greatestRadius = 15
	leastPower     = 25
)

// ParseKeratometry reads the two principal readings, radii in millimetres or powers in dioptres, each with its
// meridian:
//
//	7.80 @ 180 / 7.60 @ 90
//	43.25 @ 180, 44.50 @ 90
//	7.80 mm @ 180 / 7.60
//	43.25 sph
//
// A number below 15 is a radius, one of 25 or more a power. One reading alone stands for both. The readings may come in either order: the
// longer radius, or the lower power, is the flat one. (In a message they are named, and an exchange is an error.) It fails with an
// *Error.
func ParseKeratometry(text string) (*pb.Keratometry, error) {
	s := &scanner{text: text}
	first, err := s.reading("flat")
	if err != nil {
		return nil, err
	}
	second := proto.CloneOf(first)
	second.ClearMeridianDeg()
	if s.word("sph", "sphere", "DS"); !s.done() {
		s.mark("/", ",", ";")
		if second, err = s.reading("steep"); err != nil {
			return nil, err
		}
	}
	if !s.done() {
		return nil, s.expected("steep", "the end")
	}
	if first.HasRadiusMm() != second.HasRadiusMm() {
		return nil, &Error{Field: "steep", Text: text, Expected: "two radii in millimetres, or two powers in dioptres,"}
	}
	if first.HasRadiusMm() && first.GetRadiusMm() < second.GetRadiusMm() || first.HasPowerD() && first.GetPowerD() > second.GetPowerD() {
		first, second = second, first
	}
	return pb.Keratometry_builder{Flat: first, Steep: second}.Build(), nil
}

// reading reads one reading and, where it is there, its meridian.
func (s *scanner) reading(name string) (*pb.MeridianReading, error) {
	begin := s.at
	x, ok := s.number()
	if !ok {
		return nil, s.expected(name, "a radius in mm or a power in D, such as 7.80 or 43.25,")
	}
	m := &pb.MeridianReading{}
	switch {
	case s.word("mm"):
		m.SetRadiusMm(x)
	case s.word("D"):
		m.SetPowerD(x)
	case x < greatestRadius:
		m.SetRadiusMm(x)
	case x >= leastPower:
		m.SetPowerD(x)
	default:
		s.at = begin
		return nil, s.expected(name, "a radius (below 15 mm) or a power (25 D or more)")
	}
	if s.mark("@", "×") || s.word("x", "at", "along") {
		along, ok := s.number()
		if !ok {
			return nil, s.expected(name+".meridian_deg", "a meridian in degrees")
		}
		s.mark("°")
		m.SetMeridianDeg(along)
	}
	return m, nil
}
