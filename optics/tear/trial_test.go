package tear_test

import (
	"errors"
	"testing"

	"pgregory.net/rapid"

	"meniscus.example/optics/lens"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/tear"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// What a trial lens leaves tells what is wanted behind it, and with that the lens that keratometry and refraction require.
func TestATrialLensTellsWhatTheEyeRequires(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		s := draw(t)
		trial := lens.BackVertexPower{PowerVector: power(t, "trial")}
		turn := unit.Degree(rapid.Float64Range(-60, 60).Draw(t, "turn"))
		body, worn := s.body.Rotate(turn), lens.BackVertexPower{PowerVector: trial.Rotate(turn)}
		w, err := s.layer.Required(s.k, s.cornea, body.Back)
		if err != nil {
			t.Fatal(err)
		}
		o, err := s.layer.Over(w.Back, body, worn)
		if err != nil {
			t.Fatal(err)
		}
		behind, err := s.layer.Behind(o.Power, body, worn)
		if err != nil {
			t.Fatal(err)
		}
		other := toric(t, "ordered back")
		want, err := s.layer.Required(s.k, s.cornea, other)
		if err != nil {
			t.Fatal(err)
		}
		if got := s.layer.Order(behind, other); !near(got.PowerVector, want.Power.PowerVector, 1e-9) {
			t.Fatalf("the trial asks for %v, the eye for %v", got, want.Power)
		}
		// As thin as the lens is, so near is the thin way.
		body.CentreThickness = 0
		o, err = s.layer.Over(w.Back, body, worn)
		if err != nil {
			t.Fatal(err)
		}
		if thin := s.layer.BehindThin(o.Power, body.Back, worn); !near(thin, w.Back, 1e-9) {
			t.Fatalf("thin: %v, want %v", thin, w.Back)
		}
	})
}

// Left add, right subtract (common practice; the base mark as the examiner sees it, a clock hour is 30°): a lens that turned to the examiner's
// left, clockwise, by 10° is ordered with its axis 10° higher.
func TestLeftAddRightSubtract(t *testing.T) {
	t.Parallel()
	wanted := vergence.SphereCylinder{Sphere: -3, Cylinder: -2, Axis: 20}.Vector()
	for turned, axis := range map[unit.Degree]unit.Degree{-10: 30, 10: 10, -30: 50, 30: 170} {
		order := wanted.Rotate(-turned)
		if got := order.MinusCylinder().Axis; !within(unit.Dioptre(got), unit.Dioptre(axis), 1e-9) {
			t.Errorf("turned by %v: ordered at %v, want %v", turned, got, axis)
		}
		if worn := order.Rotate(turned); !near(worn, wanted, 1e-12) {
			t.Errorf("turned by %v: worn %v, want %v", turned, worn, wanted)
		}
	}
}

func TestATrialThatCannotBeIsAnError(t *testing.T) {
	t.Parallel()
	layer := tear.Layer{Index: tear.DefaultIndex}
	body := lens.Body{Back: surface.Spherical(7.8), Index: 1.45, CentreThickness: 2}
	if _, err := layer.Behind(vergence.PowerVector{}, body, lens.BackVertexPower{PowerVector: vergence.Sphere(-1000)}); !errors.Is(err, vergence.ErrFocusInGap) {
		t.Error(err)
	}
	if _, err := layer.Behind(vergence.Sphere(1000), body, lens.BackVertexPower{}); !errors.Is(err, vergence.ErrFocusInGap) {
		t.Error(err)
	}
}
