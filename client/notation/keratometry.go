package notation

import (
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// Without a unit a number below the first is a corneal radius in millimetres, and one from the second on a corneal power in
// dioptres. No cornea lies between.
const (
	radiusBelow = 15
	powerFrom   = 25
)

// ParseKeratometry reads the two principal readings, both radii in millimetres or both powers in dioptres, each with its
// meridian:
//
//	7.80 @ 180 / 7.60 @ 90
//	43.25 @ 180, 44.50 @ 90
//	7.80 mm x 180 / 7.60
//	43.25 sph
//
// Without a unit a number below 15 is a radius and one of 25 or more a power; between the two the unit is needed. A meridian
// that is not written stays absent. One reading stands for both, unless it has a meridian: then the other was forgotten, or
// sph was.
//
// The readings may come in either order: the longer radius or the lower power is the flat one. (In a message they are named,
// and there an exchange is an error.) It fails with an *Error.
func ParseKeratometry(text string) (*pb.Keratometry, error) {
	s := &scanner{text: text}
	flat, err := s.reading("the first reading")
	if err != nil {
		return nil, err
	}
	steep, err := s.otherReading(flat)
	if err != nil {
		return nil, err
	}
	if !s.done() {
		return nil, s.expected("keratometry", "the end")
	}
	if flat.HasRadiusMm() && flat.GetRadiusMm() < steep.GetRadiusMm() || flat.HasPowerD() && flat.GetPowerD() > steep.GetPowerD() {
		flat, steep = steep, flat
	}
	return pb.Keratometry_builder{Flat: flat, Steep: steep}.Build(), nil
}

// otherReading reads the second reading, of the kind of the first; or the first stands for it.
func (s *scanner) otherReading(first *pb.MeridianReading) (*pb.MeridianReading, error) {
	same := proto.CloneOf(first)
	same.ClearMeridianDeg()
	if s.word("DS", "sph", "sphere") {
		return same, nil
	}
	if s.done() {
		if first.HasMeridianDeg() {
			return nil, s.expected("keratometry", "a second reading, or \"sph\" where there is none")
		}
		return same, nil
	}
	if !s.mark("/", ",", ";") && !s.numberAhead() {
		return nil, s.expected("keratometry", "a meridian such as \"@ 180\", or \"/\" and the second reading")
	}
	s.space()
	begin := s.at
	second, err := s.reading("the second reading")
	if err == nil && first.HasRadiusMm() != second.HasRadiusMm() {
		s.at = begin
		return nil, s.expected("keratometry", "the second reading to be in the unit of the first: both radii in mm, or both powers in D")
	}
	return second, err
}

// reading reads one reading and, where it is there, its meridian.
func (s *scanner) reading(name string) (*pb.MeridianReading, error) {
	s.space()
	begin := s.at
	x, err := s.number("keratometry", name+", a radius in mm or a power in D, such as 7.80 or 43.25")
	if err != nil {
		return nil, err
	}
	m := &pb.MeridianReading{}
	switch {
	case s.word("mm"):
		m.SetRadiusMm(x.value)
	case s.word("D"):
		m.SetPowerD(x.value)
	case x.value < radiusBelow:
		m.SetRadiusMm(x.value)
	case x.value >= powerFrom:
		m.SetPowerD(x.value)
	default:
		s.at = begin
		return nil, s.expected("keratometry", name+", a radius (below 15 mm) or a power (25 D or more); what lies between is neither")
	}
	if s.mark("@", "×") || s.word("x", "at", "along") {
		along, err := s.angle("keratometry", "the meridian of "+name+" in degrees, such as 180")
		if err != nil {
			return nil, err
		}
		m.SetMeridianDeg(along.value)
	}
	return m, nil
}
