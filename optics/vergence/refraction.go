package vergence

import (
	"fmt"
	"math"

	"meniscus.example/optics/unit"
)

// Prescription is a power as somebody wrote it, before anything is known to be right with it.
type Prescription struct {
	Sphere, Cylinder unit.Optional[unit.Dioptre]
	Axis             unit.Optional[unit.Degree]
}

// AssumedVertex is the vertex distance taken where none is given and none is needed.
//
// Source: common practice (refractions are made at 12 to 14 mm).
const AssumedVertex unit.Millimetre = 12

// VertexMatters is the power, in any meridian, from which a vertex distance must be given.
//
// Source: Wikipedia, Vertex distance (it matters beyond 4.00 D).
const VertexMatters unit.Dioptre = 4

// NewSphereCylinder checks a power as it was written: the sphere must be there; a cylinder other than 0
// needs an axis in [0, 180], and 0 is read as 180. It returns every fault, each a *unit.FieldError
// on sphere_d, cylinder_d or axis_deg, and nil where there is none.
//
// Source: ISO 8429 (axes).
func NewSphereCylinder(p Prescription) (SphereCylinder, []error) {
	var faults []error
	fault := func(field, problem, looksLike string) {
		faults = append(faults, &unit.FieldError{Field: field, Problem: problem, LooksLike: looksLike})
	}
	sphere, ok := p.Sphere.Get()
	switch {
	case !ok:
		fault("sphere_d", "is missing; a power of zero is written 0", "")
	case !unit.Finite(sphere):
		fault("sphere_d", "is not a finite number", "")
	}
	cylinder := p.Cylinder.Or(0)
	if !unit.Finite(cylinder) {
		fault("cylinder_d", "is not a finite number", "")
	}
	axis, ok := p.Axis.Get()
	switch {
	case !ok && cylinder != 0:
		fault("axis_deg", fmt.Sprintf("is missing, and the cylinder is %v", cylinder), "")
	case ok && !(axis >= 0 && axis <= 180):
		fault("axis_deg", fmt.Sprintf("is %v, outside [0°, 180°]", axis), "")
	}
	if faults != nil {
		return SphereCylinder{}, faults
	}
	if cylinder == 0 {
		return SphereCylinder{Sphere: sphere + 0}, nil
	}
	return SphereCylinder{Sphere: sphere + 0, Cylinder: cylinder, Axis: axis.Meridian()}, nil
}

// SpectacleRefraction is a correction at a distance from the eye: the power of a lens whose back vertex
// stands that far before the cornea. It is not the refraction at the cornea, and does not convert to it
// but by Ocular.
type SpectacleRefraction struct {
	written SphereCylinder
	power   PowerVector
	vertex  unit.Millimetre
	ocular  PowerVector
	// assumed is true where no vertex distance was given.
	assumed bool
}

// OcularRefraction is the refraction at the corneal plane: the vergence of light that the eye brings to a focus
// on its retina.
type OcularRefraction struct{ PowerVector }

// NewSpectacleRefraction checks a refraction and its vertex distance (in [0, +Inf)). Without a vertex
// distance AssumedVertex is taken while every meridian is weaker than VertexMatters; otherwise that is
// a fault, and so is a focus between the lens and the eye. It returns every fault, each a *unit.FieldError on sphere_d,
// cylinder_d, axis_deg or vertex_distance_mm.
//
// Source: Wikipedia, Vertex distance (when it matters); effectivity as PowerVector.Downstream.
func NewSpectacleRefraction(p Prescription, vertex unit.Optional[unit.Millimetre]) (SpectacleRefraction, []error) {
	sc, faults := NewSphereCylinder(p)
	d, given := vertex.Get()
	if given && !(d >= 0 && unit.Finite(d)) {
		return SpectacleRefraction{}, append(faults, &unit.FieldError{
			Field:   "vertex_distance_mm",
			Problem: "is not a finite distance of 0 mm or more",
		})
	}
	if faults != nil {
		return SpectacleRefraction{}, faults
	}
	if !given {
		strongest := sc.Sphere
		if other := sc.Sphere + sc.Cylinder; math.Abs(float64(other)) > math.Abs(float64(strongest)) {
			strongest = other
		}
		if !(math.Abs(float64(strongest)) < float64(VertexMatters)) {
			return SpectacleRefraction{}, []error{&unit.FieldError{
				Field: "vertex_distance_mm",
				Problem: fmt.Sprintf("is missing, and a meridian of %+.2f D is at or beyond 4.00 D, where the distance "+
					"changes the lens; measure it (usually 12 to 14 mm), or give 0 for a refraction at the cornea",
					float64(strongest)),
			}}
		}
		d = AssumedVertex
	}
	s := SpectacleRefraction{written: sc, power: sc.Vector(), vertex: d + 0, assumed: !given}
	var err error
	if s.ocular, err = s.power.Downstream(s.vertex, unit.Air); err != nil {
		return SpectacleRefraction{}, []error{&unit.FieldError{
			Field: "vertex_distance_mm",
			Problem: fmt.Sprintf("is %v, and a lens of %+.2f D there comes to a focus before the eye",
				s.vertex, float64(s.power.M+s.power.J())),
		}}
	}
	return s, nil
}

// Written is the power as it was written, with an axis of 0 as 180.
//
// Source: definition.
func (s SpectacleRefraction) Written() SphereCylinder { return s.written }

// Power is the power at the spectacle plane.
//
// Source: definition.
func (s SpectacleRefraction) Power() PowerVector { return s.power }

// Vertex is the vertex distance, given or assumed.
//
// Source: definition.
func (s SpectacleRefraction) Vertex() unit.Millimetre { return s.vertex }

// VertexAssumed reports that no vertex distance was given.
//
// Source: definition.
func (s SpectacleRefraction) VertexAssumed() bool { return s.assumed }

// Ocular is the refraction at the cornea, K = (I - dF)⁻¹ F.
//
// Source: Wikipedia, Vertex distance, Fc = F/(1 - xF); in matrix form as PowerVector.Downstream.
func (s SpectacleRefraction) Ocular() OcularRefraction { return OcularRefraction{s.ocular} }

// AtVertex is the correction of the same eye at another distance from it, in [0, +Inf). It fails with
// ErrFocusInGap where light would come to a focus in between.
//
// Source: Wikipedia, Vertex distance; in matrix form as PowerVector.Upstream.
func (k OcularRefraction) AtVertex(d unit.Millimetre) (PowerVector, error) {
	return k.Upstream(d, unit.Air)
}

// Gap is the distance from the plane of the refraction to another plane before the eye, at to from the
// cornea, and whether that plane lies upstream, further from the eye.
//
// Source: definition.
func (s SpectacleRefraction) Gap(to unit.Millimetre) (d unit.Millimetre, upstream bool) {
	if to > s.vertex {
		return to - s.vertex, true
	}
	return s.vertex - to, false
}

// Transfer is the correction of the same eye at another distance from it, in [0, +Inf), in one move from the plane
// of the refraction. It fails with ErrFocusInGap where light would come to a focus in between.
//
// Source: Wikipedia, Vertex distance; in matrix form as PowerVector.Downstream.
func (s SpectacleRefraction) Transfer(to unit.Millimetre) (PowerVector, error) {
	if gap, upstream := s.Gap(to); upstream {
		return s.power.Upstream(gap, unit.Air)
	} else {
		return s.power.Downstream(gap, unit.Air)
	}
}
