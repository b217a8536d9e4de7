package fitting

import (
	"testing"

	"pgregory.net/rapid"

	"meniscus.example/optics/lens"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// The power found is never worse than the best of every power within reach, tried one by one.
func TestTheSearchFindsTheBestPower(t *testing.T) {
	t.Parallel()
	steps := []struct {
		power, cylinder unit.Dioptre
		axis            unit.Degree
	}{{0.25, 0.25, 5}, {0.25, 0.5, 10}, {0.125, 0.25, 1}, {1, 0.05, 45}, {0.5, 0.75, 7}, {0.05, 1, 90}}
	rapid.Check(t, func(t *rapid.T) {
		step := rapid.SampledFrom(steps).Draw(t, "steps")
		body := lens.Body{
			Back: surface.Radii{
				Flat: 8.2, Steep: unit.Millimetre(rapid.Float64Range(7.2, 8.2).Draw(t, "steep")),
				FlatMeridian: unit.Degree(rapid.Float64Range(1, 180).Draw(t, "along")),
			}.Curvature(),
			Index: 1.45, CentreThickness: unit.Millimetre(rapid.Float64Range(0.1, 0.6).Draw(t, "thickness")),
		}
		wanted := vergence.SphereCylinder{
			Sphere:   unit.Dioptre(rapid.Float64Range(-12, 14).Draw(t, "sphere")),
			Cylinder: unit.Dioptre(rapid.Float64Range(-4, 0).Draw(t, "cylinder")),
			Axis:     unit.Degree(rapid.Float64Range(0.1, 180).Draw(t, "axis")),
		}.Vector()
		layer := tear.Layer{Index: tear.DefaultIndex}
		need, err := layer.Need(wanted.Add(body.Back.Power(layer.Index.Less(unit.Air))), body)
		if err != nil {
			t.Fatal(err)
		}
		fresh := func() search {
			return search{body: body, need: need, power: unit.NewStep(step.power), cylinder: unit.NewStep(step.cylinder)}
		}
		s := fresh()
		s.anyAxis(unit.NewStep(step.axis))

		all := fresh()
		axes, spheres := unit.NewStep(step.axis), int(20/step.power)
		for a := range axes.FloorIndex(179.999) + 1 {
			axis := axes.At(a).Meridian()
			sin, cos := (2 * axis).SinCos()
			for k := range int(6/step.cylinder) + 1 {
				// Every sphere around the wanted one, far beyond what the search looks at.
				around := all.power.RoundIndex(wanted.M + all.cylinder.At(k)/2)
				for i := max(-spheres, around-4); i <= min(spheres, around+4); i++ {
					size := all.cylinder.At(k)
					half := unit.Dioptre(float64(size) / 2)
					sphere := all.power.At(i)
					all.try(vergence.SphereCylinder{Sphere: sphere, Cylinder: -size, Axis: axis}, vergence.PowerVector{
						M: sphere - half, J0: half * unit.Dioptre(cos), J45: half * unit.Dioptre(sin),
					})
				}
			}
		}
		if !(s.found && s.blur <= all.blur+2*tie) {
			t.Fatalf("found %v, which leaves %v; %v leaves %v", s.written, s.blur, all.written, all.blur)
		}

		only, every := fresh(), fresh()
		only.spheres(vergence.PowerVector{}, 0)
		for i := -spheres; i <= spheres; i++ {
			every.try(vergence.SphereCylinder{Sphere: every.power.At(i)}, vergence.Sphere(every.power.At(i)))
		}
		if only.written != every.written {
			t.Fatalf("spheres: found %v, which leaves %v; %v leaves %v", only.written, only.blur, every.written, every.blur)
		}
	})
}

func TestTiesGoToTheMorePlusSphereThenTheSmallerCylinder(t *testing.T) {
	t.Parallel()
	body := lens.Body{Back: surface.Spherical(7.8), Index: 1.45}
	need := func(v vergence.PowerVector) tear.OverRefraction {
		layer := tear.Layer{Index: tear.DefaultIndex}
		o, err := layer.Need(v.Add(body.Back.Power(layer.Index.Less(unit.Air))), body)
		if err != nil {
			t.Fatal(err)
		}
		return o
	}
	quarter := unit.NewStep[unit.Dioptre](0.25)
	s := search{body: body, need: need(vergence.Sphere(-3.125)), power: quarter, cylinder: quarter}
	s.spheres(vergence.PowerVector{}, 0)
	if s.written.Sphere != -3 {
		t.Errorf("between -3.00 and -3.25: %v", s.written)
	}
	// Cylinders of 0.50 and 0.75 leave the same beside 0.625, and so do their spheres.
	s = search{body: body, need: need(vergence.SphereCylinder{Sphere: -3, Cylinder: -0.625, Axis: 180}.Vector()), power: quarter, cylinder: quarter}
	s.cylinders([2]unit.Degree{180, 180})
	if s.written != (vergence.SphereCylinder{Sphere: -3, Cylinder: -0.5, Axis: 180}) {
		t.Errorf("between cylinders of 0.50 and 0.75: %v", s.written)
	}
}
