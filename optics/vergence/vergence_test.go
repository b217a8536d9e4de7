package vergence_test

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

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

func rx(sphere, cylinder D, axis unit.Degree) vergence.SphereCylinder {
	return vergence.SphereCylinder{Sphere: sphere, Cylinder: cylinder, Axis: axis}
}

func refraction(t testing.TB, p vergence.SphereCylinder, vertex mm) vergence.SpectacleRefraction {
	t.Helper()
	s, faults := vergence.NewSpectacleRefraction(vergence.Prescription{
		Sphere: unit.Some(p.Sphere), Cylinder: unit.Some(p.Cylinder), Axis: unit.Some(p.Axis),
	}, unit.Some(vertex))
	if faults != nil {
		t.Fatalf("%v at %v: %v", p, vertex, faults)
	}
	return s
}

func TestEffectivityIsThePublishedOne(t *testing.T) {
	t.Parallel()
	for _, r := range published.Rows(t, "effectivity.csv") {
		p := rx(D(r.Number("sphere_d")), D(r.Number("cylinder_d")), unit.Degree(r.Number("axis_deg")))
		got := refraction(t, p, mm(r.Number("vertex_mm"))).Ocular().MinusCylinder()
		r.Within("sphere", float64(got.Sphere), r.Number("want_sphere_d"))
		r.Within("cylinder", float64(got.Cylinder), r.Number("want_cylinder_d"))
	}
}

func TestSumsAreThePublishedOnes(t *testing.T) {
	t.Parallel()
	parse := func(text string) vergence.PowerVector {
		var x [3]float64
		for i, part := range strings.Split(text, "/") {
			x[i], _ = strconv.ParseFloat(part, 64)
		}
		return rx(D(x[0]), D(x[1]), unit.Degree(x[2])).Vector()
	}
	for _, r := range published.Rows(t, "sums.csv") {
		got := parse(r.Text("first")).Add(parse(r.Text("second"))).MinusCylinder()
		r.Within("sphere", float64(got.Sphere), r.Number("want_sphere_d"))
		r.Within("cylinder", float64(got.Cylinder), r.Number("want_cylinder_d"))
		r.Within("axis", float64(got.Axis), r.Number("want_axis_deg"))
	}
	// The Indian Optician, May-June 2022: +2.00/+5.00x30 has +3.25 D along 180.
	if got := rx(2, 5, 30).Vector().Along(180); !within(got, 3.25, 1e-12) {
		t.Errorf("along 180: %v", got)
	}
}

func TestMislocatedCylinderLeavesThePublishedOverRefraction(t *testing.T) {
	t.Parallel()
	for _, r := range published.Rows(t, "mislocation.csv") {
		for _, axis := range []unit.Degree{180, 35, 90, 121} {
			// The eye needs a plus cylinder; the lens has it, turned.
			turn := unit.Degree(r.Number("turn_deg"))
			need := rx(0, D(r.Number("cylinder_d")), axis).Vector()
			over := need.Sub(need.Rotate(turn))
			got := over.MinusCylinder()
			r.Within("sphere", float64(got.Sphere), r.Number("want_sphere_d"))
			r.Within("cylinder", -float64(got.Cylinder), r.Number("want_cylinder_d"))
			// The minus axis lies 45° - turn/2 from the ocular axis, on the side away from the turn or 90° from
			// there by the sign of the cylinder: here the eye's is plus.
			plus := over.PlusCylinder()
			if away := axis.Between(plus.Axis); !(math.Abs(float64(away+45-turn/2)) <= 1e-9) {
				t.Errorf("cylinder x %v turned by %v: over-refraction's plus axis lies %v away", axis, turn, away)
			}
		}
	}
}

func TestPowerAcrossACylinder(t *testing.T) {
	t.Parallel()
	for _, r := range published.Rows(t, "obliquity.csv") {
		got := rx(0, 1, 180).Vector().Along(unit.Degree(r.Number("angle_deg")))
		r.Within("share", 100*float64(got), r.Number("want_percent"))
	}
}

// Gullstrand's schematic eye no. 1, relaxed: the published radii, gaps and indices give the published 58.64 D.
func TestGullstrandsEyeHasItsPower(t *testing.T) {
	t.Parallel()
	radii := []mm{7.7, 6.8, 10.0, 7.911, -5.760, -6.0}
	gaps := []mm{0.5, 3.1, 0.546, 2.419, 0.635}
	indices := []unit.Index{1, 1.376, 1.336, 1.386, 1.406, 1.386, 1.336}
	// Parallel light: the vergence after each surface; the equivalent power is the product of the first one's and the
	// ratios of the vergences before and after the gaps.
	var v vergence.PowerVector
	power := 1.0
	for i, r := range radii {
		before := v
		v = v.Add(vergence.Sphere(indices[i+1].Less(indices[i]).Power(r.Curvature())))
		if i == 0 {
			power = float64(v.M)
		} else {
			power *= float64(v.M / before.M)
		}
		if i < len(gaps) {
			var err error
			if v, err = v.Downstream(gaps[i], indices[i+1]); err != nil {
				t.Fatal(err)
			}
		}
	}
	if !(math.Abs(power-58.64) <= 0.005) {
		t.Errorf("power %v D, want 58.64", power)
	}
}

func power(t *rapid.T) vergence.SphereCylinder {
	return rx(D(rapid.Float64Range(-40, 30).Draw(t, "sphere")), D(rapid.Float64Range(-12, 12).Draw(t, "cylinder")),
		unit.Degree(rapid.Float64Range(0.01, 180).Draw(t, "axis")))
}

func TestTranspositionChangesNothing(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		p := power(t)
		v := p.Vector()
		for _, q := range []vergence.SphereCylinder{p.Transposed(), v.MinusCylinder(), v.PlusCylinder()} {
			if q.Cylinder == 0 {
				continue // rounded away
			}
			if !near(q.Vector(), v, 1e-12) {
				t.Fatalf("%v is %v, and %v is %v", p, v, q, q.Vector())
			}
		}
	})
}

func TestThereAndBackChangesNothing(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		v := power(t).Vector()
		d, n := mm(rapid.Float64Range(0, 20).Draw(t, "gap")), unit.Index(rapid.Float64Range(1, 1.7).Draw(t, "index"))
		there, err := v.Downstream(d, n)
		if err != nil {
			t.Fatal(err)
		}
		back, err := there.Upstream(d, n)
		if err != nil {
			t.Fatal(err)
		}
		if !near(back, v, 1e-10) {
			t.Fatalf("%v came back as %v", v, back)
		}
	})
}

// Each principal meridian travels by itself: L/(1 - qL). (Wikipedia, Vertex distance.)
func TestTravelActsOnThePrincipalMeridians(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		p := power(t)
		got, err := p.Vector().Downstream(12, 1)
		if err != nil {
			t.Fatal(err)
		}
		one := p.Sphere / (1 - 0.012*p.Sphere)
		other := (p.Sphere + p.Cylinder) / (1 - 0.012*(p.Sphere+p.Cylinder))
		want := rx(one, other-one, p.Axis).Vector()
		if !near(got, want, 1e-9) {
			t.Fatalf("%v: got %v, want %v", p, got, want)
		}
	})
}

func TestTravelAndTurnChangePlaces(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		v, turn := power(t).Vector(), unit.Degree(rapid.Float64Range(-180, 180).Draw(t, "turn"))
		one, err := v.Rotate(turn).Downstream(13, 1)
		if err != nil {
			t.Fatal(err)
		}
		other, _ := v.Downstream(13, 1)
		if !near(one, other.Rotate(turn), 1e-9) {
			t.Fatalf("%v turned by %v", v, turn)
		}
	})
}

func TestAFocusInTheGapIsAnError(t *testing.T) {
	t.Parallel()
	for _, v := range []vergence.PowerVector{{M: 50}, {M: 51}, {M: 49.9, J0: 1}, {M: 200}, {M: 30, J45: 300}} {
		if got, err := v.Downstream(20, 1); !errors.Is(err, vergence.ErrFocusInGap) {
			t.Errorf("%v: %v, %v", v, got, err)
		}
	}
	if _, err := (vergence.PowerVector{M: -60}).Upstream(20, 1); !errors.Is(err, vergence.ErrFocusInGap) {
		t.Errorf("upstream: %v", err)
	}
	if _, err := (vergence.PowerVector{M: 49.9}).Downstream(20, 1); err != nil {
		t.Error(err)
	}
	if _, err := (vergence.PowerVector{M: D(math.NaN())}).Downstream(20, 1); !errors.Is(err, vergence.ErrFocusInGap) {
		t.Errorf("NaN: %v", err)
	}
}

func TestASmallCylinderHasNoAxis(t *testing.T) {
	t.Parallel()
	for _, c := range []D{0, 0.0049, -0.0049} {
		if got := rx(-1, c, 30).Vector().MinusCylinder(); got.Axis != 0 || got.Cylinder != 0 || !within(got.Sphere, -1+c/2, 1e-15) {
			t.Errorf("%v: %v", c, got)
		}
	}
	if got := rx(-1, -0.0051, 30).Vector().MinusCylinder(); !within(D(got.Axis), 30, 1e-9) {
		t.Errorf("0.0051: %v", got)
	}
	negative := rx(D(math.Copysign(0, -1)), 0, 0).Vector().MinusCylinder()
	if math.Signbit(float64(negative.Sphere)) || math.Signbit(float64(negative.Cylinder)) {
		t.Errorf("a negative zero: %v", negative)
	}
}

func TestRefractionFaultsNameTheirFields(t *testing.T) {
	t.Parallel()
	some := unit.Some[D]
	nan, inf := D(math.NaN()), D(math.Inf(1))
	axis := unit.Some[unit.Degree]
	for _, c := range []struct {
		name   string
		p      vergence.Prescription
		vertex unit.Optional[mm]
		fields []string
	}{
		{"nothing", vergence.Prescription{}, unit.Some[mm](12), []string{"sphere_d"}},
		{"no axis", vergence.Prescription{Sphere: some(-1), Cylinder: some(-1)}, unit.Some[mm](12), []string{"axis_deg"}},
		{"NaN", vergence.Prescription{Sphere: some(nan), Cylinder: some(inf)}, unit.Some[mm](12), []string{"sphere_d", "cylinder_d", "axis_deg"}},
		{"axis 181", vergence.Prescription{Sphere: some(-1), Axis: axis(181)}, unit.Some[mm](12), []string{"axis_deg"}},
		{"axis -1", vergence.Prescription{Sphere: some(-1), Axis: axis(-1)}, unit.Some[mm](12), []string{"axis_deg"}},
		{"axis NaN", vergence.Prescription{Sphere: some(-1), Axis: axis(unit.Degree(math.NaN()))}, unit.Some[mm](12), []string{"axis_deg"}},
		{"vertex -1", vergence.Prescription{Sphere: some(-1)}, unit.Some[mm](-1), []string{"vertex_distance_mm"}},
		{"vertex Inf", vergence.Prescription{Sphere: some(-1)}, unit.Some(mm(math.Inf(1))), []string{"vertex_distance_mm"}},
		{"no vertex at 4.00", vergence.Prescription{Sphere: some(-4)}, unit.Optional[mm]{}, []string{"vertex_distance_mm"}},
		{"no vertex, 4.00 in one meridian", vergence.Prescription{Sphere: some(-2.5), Cylinder: some(-1.5), Axis: axis(90)}, unit.Optional[mm]{}, []string{"vertex_distance_mm"}},
		{"a focus before the eye", vergence.Prescription{Sphere: some(90)}, unit.Some[mm](12), []string{"vertex_distance_mm"}},
	} {
		_, faults := vergence.NewSpectacleRefraction(c.p, c.vertex)
		var got []string
		for _, err := range faults {
			var f *unit.FieldError
			if !errors.As(err, &f) {
				t.Fatalf("%s: %v is not a FieldError", c.name, err)
			}
			got = append(got, f.Field)
		}
		if fmt.Sprint(got) != fmt.Sprint(c.fields) {
			t.Errorf("%s: faults on %v, want %v", c.name, got, c.fields)
		}
	}
	s, faults := vergence.NewSpectacleRefraction(vergence.Prescription{Sphere: some(-3.99)}, unit.Optional[mm]{})
	if faults != nil || !s.VertexAssumed() || s.Vertex() != 12 {
		t.Errorf("below 4.00 D: %v, %v", s, faults)
	}
	if p, faults := vergence.NewSphereCylinder(vergence.Prescription{Sphere: some(1), Cylinder: some(-1), Axis: axis(0)}); faults != nil || p.Axis != 180 {
		t.Errorf("an axis of 0: %v, %v", p, faults)
	}
}

func TestTransferGoesThroughTheCornea(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		p := rx(D(rapid.Float64Range(-20, 15).Draw(t, "sphere")), D(rapid.Float64Range(-6, 0).Draw(t, "cylinder")), 30)
		from, to := mm(rapid.Float64Range(0, 16).Draw(t, "from")), mm(rapid.Float64Range(0, 16).Draw(t, "to"))
		s, faults := vergence.NewSpectacleRefraction(vergence.Prescription{
			Sphere: unit.Some(p.Sphere), Cylinder: unit.Some(p.Cylinder), Axis: unit.Some(p.Axis),
		}, unit.Some(from))
		if faults != nil {
			t.Fatal(faults)
		}
		direct, err := s.Transfer(to)
		if err != nil {
			t.Fatal(err)
		}
		around, err := s.Ocular().AtVertex(to)
		if err != nil {
			t.Fatal(err)
		}
		if !near(direct, around, 1e-9) {
			t.Fatalf("%v from %v to %v: %v and %v", p, from, to, direct, around)
		}
	})
}

// BCSC Clinical Optics, contact lens chapter: -7.00 D at 15 mm is -6.3 D at the cornea.
func ExampleSpectacleRefraction_Ocular() {
	s, _ := vergence.NewSpectacleRefraction(vergence.Prescription{Sphere: unit.Some[unit.Dioptre](-7)}, unit.Some[unit.Millimetre](15))
	fmt.Printf("%.1f D\n", float64(s.Ocular().M))
	// Output: -6.3 D
}

func BenchmarkVertexTransfer(b *testing.B) {
	v := rx(-7, -3, 175).Vector()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := v.Downstream(12, unit.Air); err != nil {
			b.Fatal(err)
		}
	}
}
