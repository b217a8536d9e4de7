package fitting

import (
	"math"

	"meniscus.example/optics/lens"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// tie is the difference of blur strengths below which two powers are equally good.
//
// Source: definition (a millionth of the least step).
const tie unit.Dioptre = 1e-8

// search looks for the power, among those that can be ordered, whose predicted over-refraction has the least blur
// strength. Sphere and cylinder are looked for together, because they trade: rounding each apart is wrong. Of equally
// good powers the one with the more plus sphere wins, then the one with the smaller cylinder.
type search struct {
	body     lens.Body
	need     tear.OverRefraction
	power    unit.Step[unit.Dioptre]
	cylinder unit.Step[unit.Dioptre]

	found   bool
	blur    unit.Dioptre
	written vergence.SphereCylinder
	ordered lens.BackVertexPower
	over    tear.OverRefraction
}

// try weighs one power: a sphere, and what the cylinder adds to it as a power vector.
func (s *search) try(written vergence.SphereCylinder, v vergence.PowerVector) {
	bvp := lens.BackVertexPower{PowerVector: v}
	over, err := s.need.Worn(s.body, bvp)
	if err != nil {
		return
	}
	blur := over.Power.Blur()
	if s.found {
		switch {
		case blur > s.blur+tie:
			return
		case blur < s.blur-tie:
		case written.Sphere < s.written.Sphere:
			return
		case written.Sphere == s.written.Sphere && written.Cylinder <= s.written.Cylinder:
			// Minus cylinders: the greater number is the smaller cylinder.
			return
		}
	}
	s.found, s.blur, s.written, s.ordered, s.over = true, blur, written, bvp, over
}

// wantedMean is the spherical equivalent that the back vertex power should have.
func (s *search) wantedMean() unit.Dioptre {
	behind, err := s.body.OfFront(s.need.Front)
	if err != nil {
		return 0
	}
	return behind.M
}

// spheres tries the spheres around the best one, with a cross-cylinder that is fixed: J0 and J45 of cross, of a minus cylinder
// of that size (0: of what cross holds) at its axis.
func (s *search) spheres(cross vergence.PowerVector, axis unit.Degree) {
	j := cross.J()
	if axis == 0 {
		axis = cross.Axis()
	}
	k := s.power.RoundIndex(s.wantedMean() + j) // S = M + J
	for i := k - 1; i <= k+1; i++ {
		sphere := s.power.At(i)
		written := vergence.SphereCylinder{Sphere: sphere, Cylinder: -2 * j, Axis: axis}
		if j == 0 {
			written = vergence.SphereCylinder{Sphere: sphere}
		}
		s.try(written, vergence.PowerVector{M: sphere - j, J0: cross.J0, J45: cross.J45})
	}
}

// fixedCylinder is the cross-cylinder of a minus cylinder at an axis, of the available size nearest to the one given.
func (s *search) fixedCylinder(size unit.Dioptre, axis unit.Degree) (vergence.PowerVector, unit.Degree) {
	v := vergence.SphereCylinder{Cylinder: -s.cylinder.Round(size), Axis: axis}.Vector()
	v.M = 0
	return v, axis
}

// cylinders tries every cylinder that could be the best at each of two axes, each with the spheres around its best. From the
// cylinder that would leave the least at that axis it goes both ways, until the cylinder alone leaves more than the best power found.
func (s *search) cylinders(axes [2]unit.Degree) {
	behind, err := s.body.OfFront(s.need.Front)
	if err != nil {
		return
	}
	for i, axis := range axes {
		if i > 0 && axis == axes[0] {
			break
		}
		// The part of the wanted cross-cylinder that lies along the axis.
		sin, cos := (2 * axis).SinCos()
		along := unit.Dioptre(float64(float64(behind.J0)*cos) + float64(float64(behind.J45)*sin))
		best := max(0, 2*along)
		start := s.cylinder.RoundIndex(best)
		for k := start; s.worthTrying(k, best); k++ {
			s.tryCylinder(k, axis, sin, cos, behind.M)
		}
		for k := start - 1; k >= 0 && s.worthTrying(k, best); k-- {
			s.tryCylinder(k, axis, sin, cos, behind.M)
		}
	}
}

// worthTrying reports whether a cylinder of k steps could leave less than the best power found, the best cylinder at
// that axis being given. The cylinder leaves half its error in J; the effectivity of a lens changes that by a few per cent, for which
// it is let off a third.
func (s *search) worthTrying(k int, best unit.Dioptre) bool {
	off := math.Abs(float64(s.cylinder.At(k)-best)) / 3
	return !s.found || off <= float64(s.blur)
}

func (s *search) tryCylinder(k int, axis unit.Degree, sin, cos float64, mean unit.Dioptre) {
	size := s.cylinder.At(k)
	half := float64(float64(size) / 2)
	m := s.power.RoundIndex(mean + unit.Dioptre(half)) // S = M + J
	for i := m - 1; i <= m+1; i++ {
		sphere := s.power.At(i)
		written := vergence.SphereCylinder{Sphere: sphere, Cylinder: -size, Axis: axis}
		if k == 0 {
			written = vergence.SphereCylinder{Sphere: sphere}
		}
		s.try(written, vergence.PowerVector{
			M:   sphere - unit.Dioptre(half),
			J0:  unit.Dioptre(half * cos),
			J45: unit.Dioptre(half * sin),
		})
	}
}

// sphereCylinder is the power found, as it is written, in minus form. A back that makes its own cylinder has it in full.
func (s *search) sphereCylinder() vergence.SphereCylinder {
	w := s.written
	w.Sphere, w.Cylinder = w.Sphere+0, w.Cylinder+0
	return w
}

// nearestAxes are the two axes that can be ordered on either side of the wanted one.
func nearestAxes(wanted unit.Degree, step unit.Step[unit.Degree]) [2]unit.Degree {
	below := step.FloorIndex(wanted)
	last := step.FloorIndex(180)
	above := below + 1
	if above > last {
		above = 0 // past the last one comes 0, which is 180
	}
	return [2]unit.Degree{step.At(below).Meridian(), step.At(above).Meridian()}
}
