package tear_test

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"

	"meniscus.example/optics/lens"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
	"meniscus.example/testdata/published"
)

type (
	D  = unit.Dioptre
	mm = unit.Millimetre
)

func within(got, want, tol D) bool { return math.Abs(float64(got-want)) <= float64(tol) }

func near(v, w vergence.PowerVector, tol D) bool {
	return within(v.M, w.M, tol) && within(v.J0, w.J0, tol) && within(v.J45, w.J45, tol)
}

// Schornack et al. 2014: the power of a tear lens under a lens that vaults. Radii are 337.5/K, the index of the tears 1.336; the power
// is the vergence at the back of the tears, less 336/r of the cornea, less the power of the lens.
func TestThickTearLensIsThePublishedOne(t *testing.T) {
	t.Parallel()
	for _, r := range published.Rows(t, "thick_tears.csv") {
		n := unit.Index(r.Number("tear_index"))
		step := n.Less(unit.Air)
		cornea := surface.Spherical(mm(337.5 / r.Number("k_d")))
		back := surface.Spherical(mm(337.5 / (r.Number("k_d") - r.Number("flatter_d"))))
		worn := vergence.Sphere(D(r.Number("lens_d")))
		gap := unit.Micrometre(r.Number("gap_um")).Millimetres()
		front := worn.Add(back.Power(step))
		behind, err := front.Downstream(gap, n)
		if err != nil {
			t.Fatal(err)
		}
		got := behind.Sub(cornea.Power(step)).Sub(worn)
		r.Within("tear power", float64(got.M), r.Number("want_tear_d"))

		// The same through Layer: the eye that this lens and these tears correct requires this lens.
		k := vergence.OcularRefraction{PowerVector: behind.Sub(cornea.Power(step))}
		wanted, err := tear.Layer{Index: n, Apex: gap}.Required(k, cornea, back)
		if err != nil || !near(wanted.Power.PowerVector, worn, 1e-10) {
			t.Errorf("requires %v (%v), want %v", wanted.Power, err, worn)
		}
	}
}

func toric(t *rapid.T, name string) surface.Curvature {
	steep := mm(rapid.Float64Range(6, 8.5).Draw(t, name+" steep"))
	return surface.Radii{
		Flat: steep + mm(rapid.Float64Range(0, 1).Draw(t, name+" longer")), Steep: steep,
		FlatMeridian: unit.Degree(rapid.Float64Range(0.1, 180).Draw(t, name+" along")),
	}.Curvature()
}

func power(t *rapid.T, name string) vergence.PowerVector {
	return vergence.SphereCylinder{
		Sphere:   D(rapid.Float64Range(-25, 18).Draw(t, name+" sphere")),
		Cylinder: D(rapid.Float64Range(-8, 0).Draw(t, name+" cylinder")),
		Axis:     unit.Degree(rapid.Float64Range(0.1, 180).Draw(t, name+" axis")),
	}.Vector()
}

type scene struct {
	k            vergence.OcularRefraction
	cornea, back surface.Curvature
	layer        tear.Layer
	body         lens.Body
}

func draw(t *rapid.T) scene {
	s := scene{
		k:      vergence.OcularRefraction{PowerVector: power(t, "eye")},
		cornea: toric(t, "cornea"), back: toric(t, "back"),
		layer: tear.Layer{
			Index: unit.Index(rapid.SampledFrom([]float64{1.3375, 1.336}).Draw(t, "tears")),
			Apex:  mm(rapid.Float64Range(0, 0.5).Draw(t, "gap")),
		},
	}
	s.body = lens.Body{
		Back: s.back, Index: unit.Index(rapid.Float64Range(1.4, 1.6).Draw(t, "index")),
		CentreThickness: mm(rapid.Float64Range(0.05, 0.8).Draw(t, "thickness")),
	}
	return s
}

func TestWithoutAGapTheTearLensIsWhatTheLensLacks(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		s := draw(t)
		s.layer.Apex = 0
		w, err := s.layer.Required(s.k, s.cornea, s.back)
		if err != nil {
			t.Fatal(err)
		}
		if want := s.k.Sub(s.layer.Lens(s.back, s.cornea).PowerVector); !near(w.Power.PowerVector, want, 1e-11) {
			t.Fatalf("%v, want %v", w.Power, want)
		}
	})
}

func TestALensOfTheRequiredPowerLeavesNothing(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		s := draw(t)
		w, err := s.layer.Required(s.k, s.cornea, s.back)
		if err != nil {
			t.Fatal(err)
		}
		o, err := s.layer.Over(w.Back, s.body, w.Power)
		if err != nil {
			t.Fatal(err)
		}
		if !near(o.Power, vergence.PowerVector{}, 1e-10) {
			t.Fatalf("leaves %v", o.Power)
		}
	})
}

func TestTurningEverythingTurnsTheAnswer(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		s := draw(t)
		worn := lens.BackVertexPower{PowerVector: power(t, "lens")}
		turn := unit.Degree(rapid.Float64Range(-180, 180).Draw(t, "turn"))
		over := func(turn unit.Degree) vergence.PowerVector {
			k := vergence.OcularRefraction{PowerVector: s.k.Rotate(turn)}
			body := s.body.Rotate(turn)
			w, err := s.layer.Required(k, s.cornea.Rotate(turn), body.Back)
			if err != nil {
				t.Fatal(err)
			}
			o, err := s.layer.Over(w.Back, body, lens.BackVertexPower{PowerVector: worn.Rotate(turn)})
			if err != nil {
				t.Fatal(err)
			}
			return o.Power
		}
		if one, other := over(turn), over(0).Rotate(turn); !near(one, other, 1e-9) {
			t.Fatalf("%v and %v", one, other)
		}
	})
}

// A bitoric lens of spherical power effect: its power has in air the toricity that its back has in the tears, and turning
// it changes nothing.
func TestSphericalPowerEffectDoesNotTurn(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		s := draw(t)
		s.layer.Apex = 0
		undo := s.back.Power(unit.Air.Less(s.layer.Index))
		worn := lens.BackVertexPower{PowerVector: vergence.PowerVector{M: -3, J0: undo.J0, J45: undo.J45}}
		s.body.CentreThickness = 0 // through a thick lens the effect is spherical to first order only
		first := over(t, s, worn, 0)
		turn := unit.Degree(rapid.Float64Range(-90, 90).Draw(t, "turn"))
		if turned := over(t, s, worn, turn); !near(turned, first, 1e-9) {
			t.Fatalf("%v, turned by %v: %v", first, turn, turned)
		}
	})
}

// over is what a lens leaves that turns on an eye that stays.
func over(t *rapid.T, s scene, worn lens.BackVertexPower, turn unit.Degree) vergence.PowerVector {
	body := s.body.Rotate(turn)
	w, err := s.layer.Required(s.k, s.cornea, body.Back)
	if err != nil {
		t.Fatal(err)
	}
	o, err := s.layer.Over(w.Back, body, lens.BackVertexPower{PowerVector: worn.Rotate(turn)})
	if err != nil {
		t.Fatal(err)
	}
	return o.Power
}

// Common practice: 0.05 mm of back radius is about 0.25 D, and steeper adds minus.
func TestSteeperAddsMinus(t *testing.T) {
	t.Parallel()
	layer := tear.Layer{Index: tear.DefaultIndex}
	cornea := surface.Spherical(7.8)
	on, _ := layer.Required(vergence.OcularRefraction{}, cornea, surface.Spherical(7.8))
	steeper, _ := layer.Required(vergence.OcularRefraction{}, cornea, surface.Spherical(7.75))
	if change := steeper.Power.M - on.Power.M; !(change < -0.24 && change > -0.32) {
		t.Errorf("0.05 mm steeper changes the power by %v", change)
	}
}

// The tear lens of a lens 0.05 mm steeper than a cornea of 7.80 mm.
func ExampleLayer_Lens() {
	f := tear.Layer{Index: tear.DefaultIndex}.Lens(surface.Spherical(7.75), surface.Spherical(7.80))
	fmt.Printf("%+.2f D\n", float64(f.M))
	// Output: +0.28 D
}

func BenchmarkTearLens(b *testing.B) {
	layer := tear.Layer{Index: tear.DefaultIndex, Apex: 0.015}
	cornea := surface.Radii{Flat: 7.8, Steep: 7.6, FlatMeridian: 175}.Curvature()
	back := surface.Spherical(7.8)
	k := vergence.OcularRefraction{PowerVector: vergence.PowerVector{M: -4, J0: 0.5}}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := layer.Required(k, cornea, back); err != nil {
			b.Fatal(err)
		}
	}
}
