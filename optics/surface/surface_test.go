package surface_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
)

func TestRadiiComeBackFromTheirCurvature(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		r := surface.Radii{
			Steep:        unit.Millimetre(rapid.Float64Range(5, 9).Draw(t, "steep")),
			FlatMeridian: unit.Degree(rapid.Float64Range(0.1, 180).Draw(t, "meridian")),
		}
		r.Flat = r.Steep + unit.Millimetre(rapid.Float64Range(0.01, 2).Draw(t, "longer"))
		turn := unit.Degree(rapid.Float64Range(-90, 90).Draw(t, "turn"))
		got := r.Curvature().Rotate(turn).Radii()
		if !(math.Abs(float64(got.Flat-r.Flat)) <= 1e-12 && math.Abs(float64(got.Steep-r.Steep)) <= 1e-12) {
			t.Fatalf("%v: %v", r, got)
		}
		if off := (r.FlatMeridian + turn).Between(got.FlatMeridian); !(math.Abs(float64(off)) <= 1e-9) {
			t.Fatalf("%v turned by %v: %v", r, turn, got)
		}
	})
}

func TestPowerLiesAcrossTheFlatMeridian(t *testing.T) {
	t.Parallel()
	r := surface.Radii{Flat: 8, Steep: 7.5, FlatMeridian: 30}
	p := r.Curvature().Power(unit.Index(1.3375).Less(1))
	if flat, steep := p.Along(30), p.Along(120); !(math.Abs(float64(flat)-337.5/8) <= 1e-12 && math.Abs(float64(steep)-337.5/7.5) <= 1e-12) {
		t.Errorf("along flat %v, along steep %v", flat, steep)
	}
	if c := surface.OfPower(p, unit.Index(1.3375).Less(1)).Radii(); !(math.Abs(float64(c.Flat)-8) <= 1e-12) {
		t.Errorf("back from the power: %v", c)
	}
	if r.Mean() != 7.75 {
		t.Error(r.Mean())
	}
	if d := r.Curvature().Sub(r.Curvature()); d != (surface.Curvature{}) {
		t.Error(d)
	}
}

// A conic's equation: y² = 2 r s - p s² (Baker 1943).
func TestSagSolvesTheConic(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		c := surface.Conic{
			Radius: unit.Millimetre(rapid.Float64Range(4, 12).Draw(t, "radius")),
			Shape:  unit.ShapeFactor(rapid.Float64Range(0, 2).Draw(t, "p")),
		}
		y := rapid.Float64Range(0, 2.8).Draw(t, "y")
		sag, err := c.Sag(unit.Millimetre(y))
		if err != nil {
			t.Fatal(err)
		}
		s := float64(sag)
		if got := 2*float64(c.Radius)*s - float64(c.Shape)*s*s; !(math.Abs(got-y*y) <= 1e-12) {
			t.Fatalf("%v at %v: sag %v, y² %v", c, y, s, got)
		}
	})
	// A sphere: r - sqrt(r² - y²).
	if s, _ := (surface.Conic{Radius: 5, Shape: 1}).Sag(3); s != 1 {
		t.Errorf("sphere of 5 at 3: %v", s)
	}
}

func TestAConicEndsSomewhere(t *testing.T) {
	t.Parallel()
	for _, c := range []surface.Conic{{5, 1}, {math.MaxFloat64, 1}, {unit.Millimetre(math.NaN()), 1}} {
		y := c.Radius * 1.001
		s, err := c.Sag(y)
		var impossible *unit.ImpossibleError
		if !errors.As(err, &impossible) || s != 0 {
			t.Errorf("%v at %v: %v, %v", c, y, s, err)
		}
	}
}
