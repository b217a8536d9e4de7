package lens_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"meniscus.example/optics/lens"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

func within(got, want, tol float64) bool { return math.Abs(got-want) <= tol }

// Thick-lens equations of a spherical lens: BVP = F1/(1 - (t/n)F1) + F2, FVP = F2/(1 - (t/n)F2) + F1 (Keating 2002, from memory).
func TestASphericalLensHasTheThickLensPowers(t *testing.T) {
	t.Parallel()
	b := lens.Body{Back: surface.Spherical(7.8), Index: 1.45, CentreThickness: 0.2}
	f1, f2, q := 450/7.5, -450/7.8, 0.0002/1.45
	bvp, err := b.OfFront(vergence.Sphere(unit.Dioptre(f1)))
	if err != nil || !within(float64(bvp.M), f1/(1-q*f1)+f2, 1e-11) {
		t.Errorf("back vertex power %v, %v", bvp, err)
	}
	fvp, err := b.FrontVertexPower(bvp)
	if err != nil || !within(float64(fvp.M), f2/(1-q*f2)+f1, 1e-11) {
		t.Errorf("front vertex power %v, %v", fvp, err)
	}
	if r := b.FrontCurvature(vergence.Sphere(unit.Dioptre(f1))).Radii(); !within(float64(r.Flat), 7.5, 1e-12) {
		t.Errorf("front radii %v", r)
	}
}

func TestFrontPowerAndBackVertexPowerUndoEachOther(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		b := lens.Body{
			Back: surface.Radii{Flat: 8, Steep: unit.Millimetre(rapid.Float64Range(6.5, 8).Draw(t, "steep")),
				FlatMeridian: unit.Degree(rapid.Float64Range(1, 180).Draw(t, "along"))}.Curvature(),
			Index:           unit.Index(rapid.Float64Range(1.4, 1.6).Draw(t, "index")),
			CentreThickness: unit.Millimetre(rapid.Float64Range(0, 1).Draw(t, "thickness")),
		}
		p := lens.BackVertexPower{PowerVector: vergence.SphereCylinder{
			Sphere:   unit.Dioptre(rapid.Float64Range(-25, 25).Draw(t, "sphere")),
			Cylinder: unit.Dioptre(rapid.Float64Range(-10, 0).Draw(t, "cylinder")),
			Axis:     unit.Degree(rapid.Float64Range(1, 180).Draw(t, "axis")),
		}.Vector()}
		f1, err := b.FrontPower(p)
		if err != nil {
			t.Fatal(err)
		}
		back, err := b.OfFront(f1)
		if err != nil {
			t.Fatal(err)
		}
		if d := back.Sub(p.PowerVector); !(d.Blur() <= 1e-10) {
			t.Fatalf("%v came back as %v", p, back)
		}
	})
}

// (n - 1)/0.3375, arithmetic: for 1.49 the cylinder in air is 1.45 times that of the curves in keratometer dioptres, and the
// cylinder in the tears 0.456 times: nearly 3 : 2 : 1.
func TestABackToricHasItsCylinderInAir(t *testing.T) {
	t.Parallel()
	r := surface.Radii{Flat: 8, Steep: 7.5, FlatMeridian: 180}
	curves := 337.5/7.5 - 337.5/8.0
	for _, c := range []struct{ index, air, tears float64 }{{1.44, 1.304, 0.308}, {1.49, 1.452, 0.456}} {
		b := lens.Body{Back: r.Curvature(), Index: unit.Index(c.index)}
		if ratio := 2 * float64(b.BackPower().J()) / curves; !within(ratio, c.air, 0.0005) {
			t.Errorf("index %v in air: %v", c.index, ratio)
		}
		inTears := r.Curvature().Power(unit.Index(1.336).Less(unit.Index(c.index)))
		if ratio := 2 * float64(inTears.J()) / curves; !within(ratio, c.tears, 0.0005) {
			t.Errorf("index %v in tears: %v", c.index, ratio)
		}
	}
}

func TestAPowerThatNoFrontCanGiveIsAnError(t *testing.T) {
	t.Parallel()
	b := lens.Body{Back: surface.Spherical(7.8), Index: 1.45, CentreThickness: 2}
	if _, err := b.FrontPower(lens.BackVertexPower{PowerVector: vergence.Sphere(-1000)}); !errors.Is(err, vergence.ErrFocusInGap) {
		t.Error(err)
	}
	if _, err := b.OfFront(vergence.Sphere(1000)); !errors.Is(err, vergence.ErrFocusInGap) {
		t.Error(err)
	}
	if _, err := b.FrontVertexPower(lens.BackVertexPower{PowerVector: vergence.Sphere(-1000)}); !errors.Is(err, vergence.ErrFocusInGap) {
		t.Error(err)
	}
}

func TestUsualThickness(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		power, astigmatism unit.Dioptre
		want               unit.Millimetre
	}{{0, 0, 0.18}, {-3, 0, 0.15}, {-6, 0, 0.12}, {-20, 0, 0.12}, {5, 0, 0.33}, {-3, 1, 0.17}, {-0.5, 2, 0.22}, {30, 0, 1}, {40, 20, 1}} {
		if got := lens.UsualCentreThickness(c.power, c.astigmatism); !within(float64(got), float64(c.want), 0.0051) {
			t.Errorf("%v, %v: %v, want %v", c.power, c.astigmatism, got, c.want)
		}
	}
}
