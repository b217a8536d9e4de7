package fitting_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"meniscus.example/optics/fitting"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

func solve(t *rapid.T, in fitting.Input) (fitting.Result, bool) {
	c, faults := fitting.NewCase(in)
	if faults != nil {
		t.Fatalf("%+v: %v", in, faults)
	}
	var r fitting.Result
	err := c.Fit(&r)
	return r, err == nil
}

func near(v, w vergence.PowerVector, tol unit.Dioptre) bool { return v.Sub(w).Blur() <= tol }

// Right and left are mirror images: an axis a of one is 180 - a of the other.
func TestAMirroredEyeGetsTheMirroredLens(t *testing.T) {
	t.Parallel()
	mirror := func(x unit.Optional[unit.Degree]) unit.Optional[unit.Degree] {
		a, given := x.Get()
		if !given {
			return x
		}
		return unit.Some((180 - a).Meridian())
	}
	rapid.Check(t, func(t *rapid.T) {
		in := draw(t)
		other := in
		other.Refraction.Axis, other.Keratometry.Flat.Meridian = mirror(in.Refraction.Axis), mirror(in.Keratometry.Flat.Meridian)
		r, ok := solve(t, in)
		m, okToo := solve(t, other)
		if ok != okToo {
			t.Fatalf("one eye has a lens, the other none")
		}
		if !ok {
			return
		}
		flip := func(v vergence.PowerVector) vergence.PowerVector {
			return vergence.PowerVector{M: v.M, J0: v.J0, J45: -v.J45}
		}
		if !near(flip(r.Wanted.Power.PowerVector), m.Wanted.Power.PowerVector, 1e-9) || r.Toricity != m.Toricity ||
			!(math.Abs(float64(r.Blur-m.Blur)) <= 1e-7) {
			t.Fatalf("%v %v leaves %v; mirrored %v %v leaves %v", r.Toricity, r.Power, r.Blur, m.Toricity, m.Power, m.Blur)
		}
	})
}

// An eye that is turned, cornea and refraction together, needs the lens turned.
func TestATurnedEyeNeedsTheTurnedLens(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		in := draw(t)
		in.Plan.Toricity = fitting.Bitoric
		in.Plan.PowerStep, in.Plan.CylinderStep = d(0.25), d(0.25)
		turn := unit.Degree(rapid.Float64Range(0, 180).Draw(t, "turn"))
		other := in
		by := func(x unit.Optional[unit.Degree]) unit.Optional[unit.Degree] {
			return unit.Some((x.Or(0) + turn).Meridian())
		}
		other.Refraction.Axis, other.Keratometry.Flat.Meridian = by(in.Refraction.Axis), by(in.Keratometry.Flat.Meridian)
		r, ok := solve(t, in)
		m, okToo := solve(t, other)
		if !ok || !okToo {
			return
		}
		if !near(r.Wanted.Power.Rotate(turn), m.Wanted.Power.PowerVector, 1e-9) || !near(r.TearLens.Rotate(turn), m.TearLens.PowerVector, 1e-9) ||
			!(math.Abs(float64(r.Blur-m.Blur)) <= 1e-7) {
			t.Fatalf("%v leaves %v; turned by %v, %v leaves %v", r.Power, r.Blur, turn, m.Power, m.Blur)
		}
	})
}

func TestAKeptLensOfTheRequiredPowerLeavesNothing(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		in := draw(t)
		in.Plan.Toricity = fitting.Bitoric
		first, ok := solve(t, in)
		if !ok {
			return
		}
		p := first.Wanted.Power.MinusCylinder()
		if p.Axis == 0 {
			p.Axis = 180
		}
		in.Lens.Power = unit.Some(written(float64(p.Sphere), float64(p.Cylinder), float64(p.Axis)))
		if r, ok := solve(t, in); !ok || !(r.Blur <= vergence.NoCylinder) {
			t.Fatalf("%v leaves %v", p, r.Blur)
		} else if p.Cylinder != 0 && !(r.Blur <= 1e-9) {
			t.Fatalf("%v leaves %v", p, r.Blur)
		}
	})
}

// A cylinder that vanishes takes its axis with it without a jump.
func TestTheAnswerIsContinuousWhereTheCylinderVanishes(t *testing.T) {
	t.Parallel()
	none := fit(t, eye(-3, 0, 180, 7.8, 7.8, 180))
	for _, axis := range []float64{1, 45, 90, 179} {
		for _, c := range []float64{1e-3, 1e-6, 5e-324} {
			r := fit(t, eye(-3, -c, axis, 7.8, 7.8, 180))
			if !(math.Abs(float64(r.Wanted.Power.M-none.Wanted.Power.M)) <= c && float64(r.Wanted.Power.J()) <= c) {
				t.Errorf("cylinder %v x %v: %v, without it %v", c, axis, r.Wanted.Power, none.Wanted.Power)
			}
		}
	}
}

// block is a 2×2 matrix of numbers, and system a ray transfer matrix of four of them: (y', a') = (A y + B a, C y + D a). This is
// a second implementation of the chain, by general matrices, that shares nothing with the first.
type block [2][2]float64

type system struct{ a, b, c, d block }

func (m block) times(n block) (r block) {
	for i := range 2 {
		for j := range 2 {
			r[i][j] = m[i][0]*n[0][j] + m[i][1]*n[1][j]
		}
	}
	return r
}

func (m block) plus(n block) (r block) {
	for i := range 2 {
		for j := range 2 {
			r[i][j] = m[i][j] + n[i][j]
		}
	}
	return r
}

func (m block) inverse() block {
	det := m[0][0]*m[1][1] - m[0][1]*m[1][0]
	return block{{m[1][1] / det, -m[0][1] / det}, {-m[1][0] / det, m[0][0] / det}}
}

func scalar(x float64) block { return block{{x, 0}, {0, x}} }

func (s system) then(n system) system {
	return system{
		n.a.times(s.a).plus(n.b.times(s.c)), n.a.times(s.b).plus(n.b.times(s.d)),
		n.c.times(s.a).plus(n.d.times(s.c)), n.c.times(s.b).plus(n.d.times(s.d)),
	}
}

// refracting is a thin element of the power matrix f: reduced angles change by -f y.
func refracting(f block) system {
	for i := range 2 {
		for j := range 2 {
			f[i][j] = -f[i][j]
		}
	}
	return system{scalar(1), block{}, f, scalar(1)}
}

func gap(metres, index float64) system {
	return system{scalar(1), scalar(metres / index), block{}, scalar(1)}
}

// dioptric is the power matrix of a sphero-cylinder (Long 1976).
func dioptric(sphere, cylinder, axis float64) block {
	s, c := math.Sincos(axis * math.Pi / 180)
	return block{{sphere + cylinder*s*s, -cylinder * s * c}, {-cylinder * s * c, sphere + cylinder*c*c}}
}

func toricSurface(before, behind float64, r surface.Radii) block {
	flat := (behind - before) / (float64(r.Flat) / 1000)
	steep := (behind - before) / (float64(r.Steep) / 1000)
	return dioptric(flat, steep-flat, float64(r.FlatMeridian))
}

// The over-refraction, before the ordered lens before the tears, sends parallel light to the cornea as the spectacle lens alone
// sends it, refracted there by the tears' face of the cornea.
func TestASecondImplementationAgrees(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		in := draw(t)
		r, ok := solve(t, in)
		if !ok {
			return
		}
		n, nt := float64(r.Body.Index), float64(r.Layer.Index)
		vertex := float64(r.Spectacle.Vertex()) / 1000
		p := func(v vergence.PowerVector) block {
			sc := v.MinusCylinder()
			if sc.Cylinder == 0 {
				return block{{float64(v.M + v.J0), float64(v.J45)}, {float64(v.J45), float64(v.M - v.J0)}}
			}
			return dioptric(float64(sc.Sphere), float64(sc.Cylinder), float64(sc.Axis))
		}
		front := r.Body.FrontCurvature(r.Over.Made).Radii()
		worn := refracting(p(r.OverWorn)).then(gap(vertex, 1)).
			then(refracting(toricSurface(1, n, front))).then(gap(float64(r.Body.CentreThickness)/1000, n)).
			then(refracting(toricSurface(n, nt, r.Radii))).then(gap(float64(r.Layer.Apex)/1000, nt))
		bare := refracting(dioptric(float64(in.Refraction.Sphere.Or(0)), float64(in.Refraction.Cylinder.Or(0)), float64(in.Refraction.Axis.Or(0)))).
			then(gap(vertex, 1)).then(refracting(toricSurface(1, nt, r.Cornea.Radii())))
		// Vergence of what was parallel: -C A⁻¹.
		one, other := worn.c.times(worn.a.inverse()), bare.c.times(bare.a.inverse())
		for i := range 2 {
			for j := range 2 {
				if !(math.Abs(one[i][j]-other[i][j]) <= 1e-9) {
					t.Fatalf("%+v: vergence at the cornea %v with the lens, %v with the spectacles", in, one, other)
				}
			}
		}

		// And the lens in air has the back vertex power that it was ordered with.
		alone := refracting(toricSurface(1, n, front)).then(gap(float64(r.Body.CentreThickness)/1000, n)).then(refracting(toricSurface(n, 1, r.Radii)))
		bvp, want := alone.c.times(alone.a.inverse()), p(r.PowerOrdered.PowerVector)
		for i := range 2 {
			for j := range 2 {
				if !(math.Abs(-bvp[i][j]-want[i][j]) <= 1e-9) {
					t.Fatalf("back vertex power %v, ordered %v", bvp, want)
				}
			}
		}
	})
}

// Blendowske 2015: the smallest resolved angle is doubled at 1 D.
func TestAcuityFollowsTheModel(t *testing.T) {
	t.Parallel()
	if loss, decimal := fitting.Acuity(1); decimal != 0.5 || !(math.Abs(loss-math.Log10(2)) <= 1e-15) {
		t.Errorf("1 D: %v, %v", loss, decimal)
	}
	if loss, decimal := fitting.Acuity(0); loss != 0 || decimal != 1 {
		t.Errorf("0 D: %v, %v", loss, decimal)
	}
}

func TestSumsBeyondAnyLensAreErrors(t *testing.T) {
	t.Parallel()
	for _, v := range []vergence.PowerVector{{M: 101}, {M: -101}, {M: 90, J0: 11}, {J45: 26}} {
		if err := fitting.TooStrong(v, "x"); err == nil {
			t.Errorf("%v passes", v)
		}
		if _, err := fitting.Combine([]fitting.Term{{Vector: v}}); err == nil {
			t.Errorf("%v is a sum", v)
		}
	}
	sum, err := fitting.Combine([]fitting.Term{{Vector: vergence.Sphere(3)}, {Vector: vergence.Sphere(1), Subtract: true}})
	if err != nil || sum.M != 2 {
		t.Error(sum, err)
	}
}
