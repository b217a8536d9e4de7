package unit_test

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"testing"

	"pgregory.net/rapid"

	"meniscus.example/optics/unit"
	"meniscus.example/testdata/published"
)

func TestKeratometricPowersAreThePublishedOnes(t *testing.T) {
	t.Parallel()
	for _, r := range published.Rows(t, "keratometry.csv") {
		radius, n := unit.Millimetre(r.Number("radius_mm")), unit.Index(r.Number("index"))
		p := unit.KeratometricPower(radius, n)
		r.Within("power", float64(p), r.Number("want_d"))
		if back := unit.KeratometricRadius(p, n); !(math.Abs(float64(back-radius)) <= 1e-14) {
			t.Errorf("%v came back as %v", radius, back)
		}
	}
	// AJO 02-320: the true front surface power is 1.1173 times K, with the index 1.3771.
	ratio := unit.Index(1.3771).Less(1).Power(unit.Millimetre(7.5).Curvature()) / unit.KeratometricPower(7.5, 1.3375)
	if !(math.Abs(float64(ratio)-1.1173) <= 0.00005) {
		t.Errorf("front surface power / K = %v, want 1.1173", ratio)
	}
}

func TestSurfacePowersAreThePublishedOnes(t *testing.T) {
	t.Parallel()
	for _, r := range published.Rows(t, "surfaces.csv") {
		got := unit.Index(r.Number("index")).Less(unit.Air).Power(unit.Millimetre(r.Number("radius_mm")).Curvature())
		r.Within("power", float64(got), r.Number("want_d"))
	}
}

// Arithmetic from Dk/t = Dk/(10 t): 100 over 0.10 mm is 100, 18 over 0.06 mm is 30.
func TestTransmissibility(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		dk   unit.Permeability
		t    unit.Millimetre
		want unit.Transmissibility
	}{{100, 0.10, 100}, {18, 0.06, 30}, {0, 0.1, 0}} {
		if got := c.dk.Transmissibility(c.t); !(math.Abs(float64(got-c.want)) <= 1e-12) {
			t.Errorf("%v over %v: %v, want %v", c.dk, c.t, got, c.want)
		}
	}
}

func TestSinesAreExactWhereTheyAreRational(t *testing.T) {
	t.Parallel()
	exact := map[unit.Degree][2]float64{
		0: {0, 1}, 30: {0.5, math.Sqrt(0.75)}, 45: {math.Sqrt(0.5), math.Sqrt(0.5)}, 60: {math.Sqrt(0.75), 0.5}, 90: {1, 0},
		120: {math.Sqrt(0.75), -0.5}, 150: {0.5, -math.Sqrt(0.75)}, 180: {0, -1}, 270: {-1, 0}, 360: {0, 1},
		-30: {-0.5, math.Sqrt(0.75)}, -90: {-1, 0}, -180: {0, -1}, 315: {-math.Sqrt(0.5), math.Sqrt(0.5)}, 720: {0, 1},
	}
	for a, want := range exact {
		if s, c := a.SinCos(); s != want[0] || c != want[1] {
			t.Errorf("%v: %v, %v, want %v", a, s, c, want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		a := rapid.Float64Range(-720, 720).Draw(t, "angle")
		s, c := unit.Degree(a).SinCos()
		ws, wc := math.Sincos(a * math.Pi / 180)
		if !(math.Abs(s-ws) <= 4e-15 && math.Abs(c-wc) <= 4e-15) {
			t.Fatalf("%v°: %v, %v, want %v, %v", a, s, c, ws, wc)
		}
	})
}

func TestMeridiansAreInTheirHalfTurn(t *testing.T) {
	t.Parallel()
	for a, want := range map[unit.Degree]unit.Degree{0: 180, 180: 180, 360: 180, -180: 180, 1: 1, 181: 1, -1: 179, -181: 179, 90: 90, 270: 90} {
		if got := a.Meridian(); got != want {
			t.Errorf("%v: %v, want %v", a, got, want)
		}
	}
	for _, c := range [][3]unit.Degree{{10, 20, 10}, {20, 10, -10}, {175, 5, 10}, {5, 175, -10}, {0, 90, 90}, {90, 0, 90}, {180, 180, 0}} {
		if got := c[0].Between(c[1]); got != c[2] && !(c[2] == 0 && got == 0) {
			t.Errorf("from %v to %v: %v, want %v", c[0], c[1], got, c[2])
		}
	}
}

// What people type is what a grid gives: k steps of 0.05 is the double nearest to the decimal.
func TestGridValuesAreTheDecimals(t *testing.T) {
	t.Parallel()
	for _, step := range []struct {
		size     unit.Millimetre
		decimals int
	}{{0.05, 2}, {0.25, 2}, {0.01, 2}, {0.125, 3}, {0.1, 1}, {0.5, 1}, {1, 0}} {
		s := unit.NewStep(step.size)
		for k := -400; k <= 400; k++ {
			text := strconv.FormatFloat(float64(k)*float64(step.size), 'f', step.decimals, 64)
			want, _ := strconv.ParseFloat(text, 64)
			if got := s.At(k); float64(got) != want {
				t.Fatalf("%d steps of %v: %v, want %v", k, step.size, got, want)
			}
			if got := s.RoundIndex(s.At(k)); got != k {
				t.Fatalf("%v is %d steps of %v, not %d", s.At(k), got, step.size, k)
			}
			if got := s.FloorIndex(s.At(k)); got != k {
				t.Fatalf("floor of %v is %d steps of %v, not %d", s.At(k), got, step.size, k)
			}
		}
	}
	quarter := unit.NewStep[unit.Dioptre](0.25)
	for x, want := range map[unit.Dioptre]unit.Dioptre{0.125: 0.25, -0.125: -0.25, 0.1249: 0, -0.1249: 0, 1.38: 1.5, -4.37: -4.25} {
		if got := quarter.Round(x); got != want || math.Signbit(float64(got)) != math.Signbit(float64(want)) {
			t.Errorf("%v rounds to %v, want %v", x, got, want)
		}
	}
	if got := unit.NewStep[unit.Degree](7).At(3); got != 21 {
		t.Errorf("3 steps of 7°: %v", got)
	}
}

func TestNumbersPrintTheirUnits(t *testing.T) {
	t.Parallel()
	for want, got := range map[string]fmt.Stringer{
		"-4.25 D": unit.Dioptre(-4.25), "7.8 mm": unit.Millimetre(7.8), "15 µm": unit.Micrometre(15), "175°": unit.Degree(175), "0.012 m": unit.Millimetre(12).Reduced(1),
		"1.3375": unit.Index(1.3375), "0.3375": unit.IndexDifference(0.3375), "125 1/m": unit.PerMetre(125), "0.74": unit.ShapeFactor(0.74),
		"0 D": unit.Dioptre(math.Copysign(0, -1)), "absent": unit.Optional[unit.Dioptre]{}, "1 D": unit.Some[unit.Dioptre](1),
		"100·10⁻¹¹ (cm²/s)(mL O2/(mL·mmHg))": unit.Permeability(100),
		"30·10⁻⁹ (cm/s)(mL O2/(mL·mmHg))":    unit.Transmissibility(30),
	} {
		if got.String() != want {
			t.Errorf("got %s, want %s", got, want)
		}
	}
}

func TestAbsentAndZeroDiffer(t *testing.T) {
	t.Parallel()
	var absent unit.Optional[unit.Dioptre]
	if _, ok := absent.Get(); ok || absent.Given() || absent.Or(3) != 3 {
		t.Error("absent is there")
	}
	zero := unit.Some[unit.Dioptre](0)
	if v, ok := zero.Get(); !ok || v != 0 || !zero.Given() || zero.Or(3) != 0 {
		t.Error("zero is absent")
	}
}

func TestShapesAreOneInThreeScales(t *testing.T) {
	t.Parallel()
	if p := unit.Asphericity(-0.26).ShapeFactor(); !(math.Abs(float64(p)-0.74) <= 1e-15) {
		t.Error(p)
	}
	if p := unit.Eccentricity(0.5).ShapeFactor(); p != 0.75 || p.Asphericity() != -0.25 {
		t.Error(p)
	}
}

func TestFaultsNameTheirFields(t *testing.T) {
	t.Parallel()
	f := &unit.FieldError{Field: "flat.radius_mm", Problem: "is 43", LooksLike: "a power"}
	if got := unit.Within("eye.keratometry", f).Error(); got != "eye.keratometry.flat.radius_mm: is 43; looks like a power" {
		t.Error(got)
	}
	if f.Field != "flat.radius_mm" {
		t.Error("the fault itself was changed")
	}
	i := &unit.ImpossibleError{Fields: []string{"a", "b"}, Problem: "cannot be", Remedy: "try c"}
	if got := unit.Within("x", i).Error(); got != "x.a, x.b: cannot be; try c" {
		t.Error(got)
	}
	if got := unit.At("y", i).Error(); got != "y: cannot be; try c" {
		t.Error(got)
	}
	other := errors.New("other")
	if unit.Within("x", other) != other || unit.At("x", other) != other {
		t.Error("another error was changed")
	}
	if got := unit.Within("x", &unit.FieldError{Problem: "is missing"}).Error(); got != "x: is missing" {
		t.Error(got)
	}
}

func TestFinite(t *testing.T) {
	t.Parallel()
	for _, x := range []float64{0, math.Copysign(0, -1), 5e-324, 1e308} {
		if !unit.Finite(x) {
			t.Errorf("%v is a number", x)
		}
	}
	for _, x := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		if unit.Finite(x) {
			t.Errorf("%v is no number", x)
		}
	}
}
