package cornea_test

import (
	"errors"
	"fmt"
	"math"
	"testing"

	"meniscus.example/optics/cornea"
	"meniscus.example/optics/unit"
)

func radius(mm float64) cornea.Reading { return cornea.Reading{Radius: unit.Some(unit.Millimetre(mm))} }
func power(d float64) cornea.Reading   { return cornea.Reading{Power: unit.Some(unit.Dioptre(d))} }
func at(r cornea.Reading, deg float64) cornea.Reading {
	r.Meridian = unit.Some(unit.Degree(deg))
	return r
}
func through(r cornea.Reading, d float64) cornea.Reading {
	r.Auxiliary = unit.Some(unit.Dioptre(d))
	return r
}

func fine(t *testing.T, flat, steep cornea.Reading) cornea.Cornea {
	t.Helper()
	c, faults := cornea.New(cornea.Readings{Flat: flat, Steep: steep}, unit.Optional[unit.ShapeFactor]{})
	if faults != nil {
		t.Fatal(faults)
	}
	return c
}

func within(got, want, tol float64) bool { return math.Abs(got-want) <= tol }

func TestPowersBecomeRadiiByTheInstrumentsIndex(t *testing.T) {
	t.Parallel()
	c := fine(t, at(power(45), 180), at(power(46), 90))
	if r := c.Radii(); !within(float64(r.Flat), 7.5, 1e-12) || !within(float64(c.Astigmatism()), 1, 1e-12) {
		t.Errorf("%v, astigmatism %v", r, c.Astigmatism())
	}
	c, _ = cornea.New(cornea.Readings{Flat: power(45), Steep: power(45), Index: unit.Some[unit.Index](1.332)}, unit.Optional[unit.ShapeFactor]{})
	if r := c.Radii(); !within(float64(r.Flat), 332.0/45, 1e-12) {
		t.Errorf("index 1.332: %v", r)
	}
	// Published range extension factors of a 36 to 52 D keratometer: 1.1659 and 0.8576.
	c = fine(t, at(through(power(47), 1.25), 180), at(through(power(48), 1.25), 90))
	if k := c.FlatK(); !within(float64(k), 47*1.1659, 1e-9) || !c.Extended() {
		t.Errorf("through +1.25 D: %v", k)
	}
	c = fine(t, at(through(power(37), -1), 180), at(power(38), 90))
	if k := c.FlatK(); !within(float64(k), 37*0.8576, 1e-9) || !c.Extended() {
		t.Errorf("through -1.00 D: %v", k)
	}
}

func TestMeridiansBecomePerpendicular(t *testing.T) {
	t.Parallel()
	for _, c := range []struct{ flat, steep, want, skew float64 }{
		{180, 90, 180, 0}, {180, 100, 5, 10}, {180, 80, 175, -10}, {5, 85, 0 + 180, -10}, {20, 120, 25, 10}, {170, 60, 160, -20}, {0, 90, 180, 0},
	} {
		k := fine(t, at(radius(7.8), c.flat), at(radius(7.5), c.steep))
		if !within(float64(k.Radii().FlatMeridian), c.want, 1e-12) || !within(float64(k.Skew()), c.skew, 1e-12) {
			t.Errorf("%v and %v: flat along %v, skew %v", c.flat, c.steep, k.Radii().FlatMeridian, k.Skew())
		}
	}
	if k := fine(t, at(radius(7.8), 30), radius(7.5)); k.Radii().FlatMeridian != 30 || k.Skew() != 0 {
		t.Errorf("flat meridian alone: %v", k.Radii())
	}
	if k := fine(t, radius(7.8), at(radius(7.5), 30)); k.Radii().FlatMeridian != 120 {
		t.Errorf("steep meridian alone: %v", k.Radii())
	}
	if k := fine(t, radius(7.8), radius(7.8)); k.Astigmatism() != 0 || k.Curvature().J0 != 0 {
		t.Errorf("one radius: %v", k.Radii())
	}
}

func TestReadingFaultsNameTheirFields(t *testing.T) {
	t.Parallel()
	nan := math.NaN()
	for _, c := range []struct {
		name        string
		flat, steep cornea.Reading
		want        string
	}{
		{"nothing", cornea.Reading{}, cornea.Reading{}, "[flat steep]"},
		{"both kinds", cornea.Reading{Radius: unit.Some[unit.Millimetre](7.8), Power: unit.Some[unit.Dioptre](43)}, radius(7.5), "[flat]"},
		{"dioptres as millimetres", radius(43), radius(44), "[flat.radius_mm steep.radius_mm]"},
		{"millimetres as dioptres", power(7.8), power(7.6), "[flat.power_d steep.power_d]"},
		{"exchanged radii", at(radius(7.5), 180), at(radius(7.8), 90), "[flat.radius_mm]"},
		{"exchanged powers", at(power(45), 180), at(power(43), 90), "[flat.power_d]"},
		{"no meridian", radius(7.8), radius(7.5), "[flat.meridian_deg]"},
		{"meridian 181", at(radius(7.8), 181), at(radius(7.5), -1), "[flat.meridian_deg steep.meridian_deg]"},
		{"meridian NaN", at(radius(7.8), nan), at(radius(7.5), 90), "[flat.meridian_deg]"},
		{"one meridian twice", at(radius(7.8), 90), at(radius(7.5), 95), "[steep.meridian_deg]"},
		{"NaN", radius(nan), power(math.Inf(1)), "[flat.radius_mm steep.power_d]"},
		{"zero", radius(0), power(0), "[flat.radius_mm steep.power_d]"},
		{"auxiliary with a radius", through(radius(7.8), 1.25), radius(7.8), "[flat.auxiliary_lens_d]"},
		{"another auxiliary", through(power(45), 1), power(46), "[flat.auxiliary_lens_d]"},
	} {
		_, faults := cornea.New(cornea.Readings{Flat: c.flat, Steep: c.steep}, unit.Optional[unit.ShapeFactor]{})
		var got []string
		for _, err := range faults {
			var f *unit.FieldError
			if !errors.As(err, &f) {
				t.Fatal(err)
			}
			got = append(got, f.Field)
		}
		if fmt.Sprint(got) != c.want {
			t.Errorf("%s: faults on %v, want %v: %v", c.name, got, c.want, faults)
		}
	}
	if _, faults := cornea.New(cornea.Readings{Flat: radius(7.8), Steep: radius(7.8), Index: unit.Some[unit.Index](1)}, unit.Some(unit.ShapeFactor(nan))); len(faults) != 2 {
		t.Error(faults)
	}
}

func TestACorneaDescribesItself(t *testing.T) {
	t.Parallel()
	c := fine(t, at(radius(8), 20), at(radius(7.5), 110))
	// (1.376 - 1)/r along each meridian; the minus cylinder that corrects it has the flat meridian as its axis.
	if p := c.FrontPower(); !within(float64(p.Along(20)), 376/8.0, 1e-10) || !within(float64(p.Along(110)), 376/7.5, 1e-10) {
		t.Errorf("front power %v", p)
	}
	if p := c.Correcting(); !within(float64(p.Cylinder), -(45-42.1875), 1e-12) || p.Axis != 20 || p.Sphere != 0 {
		t.Errorf("correcting %v", p)
	}
	if !c.ShapeAssumed() || c.Shape() != 0.74 {
		t.Errorf("shape %v", c.Shape())
	}
	flat, steep, err := c.Sags(9)
	if err != nil || !(flat > 1.2 && flat < steep && steep < 1.7) {
		t.Errorf("sags %v, %v, %v", flat, steep, err)
	}
	sphere, _ := cornea.New(cornea.Readings{Flat: radius(5), Steep: radius(5)}, unit.Some[unit.ShapeFactor](1))
	if flat, steep, err := sphere.Sags(6); err != nil || flat != 1 || steep != 1 {
		t.Errorf("a sphere of 5 mm over 6 mm: %v, %v, %v", flat, steep, err)
	}
	if _, _, err := sphere.Sags(10.1); err == nil {
		t.Error("a sphere of 5 mm reaches 10.1 mm")
	}
	if p := fine(t, radius(7.8), radius(7.8)).Correcting(); p.Axis != 0 || p.Cylinder != 0 {
		t.Errorf("no astigmatism: %v", p)
	}
}
