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

// cylinders tries every cylinder that could be the best at each of two axes.
func (s *search) cylinders(axes [2]unit.Degree) {
	wanted, err := s.body.OfFront(s.need.Front)
	if err != nil {
		return
	}
	for _, axis := range axes {
		s.atAxis(axis, wanted.PowerVector)
	}
}

// anyAxis tries every cylinder that could be the best at every axis of a grid: from the axes on either side of the wanted one
// outwards, until the part of the wanted cylinder across the axis alone leaves more than the best power found.
func (s *search) anyAxis(step unit.Step[unit.Degree]) {
	wanted, err := s.body.OfFront(s.need.Front)
	if err != nil {
		return
	}
	count := step.FloorIndex(180)
	if step.At(count) < 180 {
		count++ // the axes are 0 (which is 180) and count - 1 more
	}
	below := step.FloorIndex(wanted.Axis())
	for i := range (count + 1) / 2 {
		one := s.atAxis(step.At((below-i+count)%count).Meridian(), wanted.PowerVector)
		other := s.atAxis(step.At((below+1+i)%count).Meridian(), wanted.PowerVector)
		if !one && !other {
			return
		}
	}
}

// atAxis tries the cylinders at one axis, each with the spheres around its best. From the cylinder that would leave the least
// there it goes both ways, until the cylinder alone leaves more than the best power found. It reports whether there was one worth
// trying.
func (s *search) atAxis(axis unit.Degree, wanted vergence.PowerVector) bool {
	// The parts of the wanted cross-cylinder along and across the axis.
	sin, cos := (2 * axis).SinCos()
	x, y := float64(wanted.J0), float64(wanted.J45)
	along, across := float64(x*cos)+float64(y*sin), float64(y*cos)-float64(x*sin)
	best := unit.Dioptre(max(0, 2*along))
	if along < 0 {
		across = math.Sqrt(float64(along*along) + float64(across*across))
	}
	start := s.cylinder.RoundIndex(best)
	if s.found && !s.worthTrying(start, best, across) {
		return false
	}
	s.tryCylinder(start, axis, sin, cos, wanted.M)
	for k := start + 1; s.worthTrying(k, best, across); k++ {
		s.tryCylinder(k, axis, sin, cos, wanted.M)
	}
	for k := start - 1; k >= 0 && s.worthTrying(k, best, across); k-- {
		s.tryCylinder(k, axis, sin, cos, wanted.M)
	}
	return true
}

// worthTrying reports whether a cylinder of k steps could leave less than the best power found, the best cylinder at
// that axis and what is left across it being given. The cylinder leaves half its error in J; the effectivity of a lens changes that by some
// per cent, for which it is let off a third. Nothing is worth it while no front surface gave any power. While no power was found it is not: no front surface gives any.
func (s *search) worthTrying(k int, best unit.Dioptre, across float64) bool {
	off := float64(s.cylinder.At(k)-best) / 2
	least := math.Sqrt(float64(off*off)+float64(across*across)) * (2.0 / 3)
	return s.found && least <= float64(s.blur)
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
