package server

import (
	"context"
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"math"
	"strconv"
	"testing"

	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// evaluate computes a formula. It knows arithmetic and nothing of optics.
func evaluate(e ast.Expr, names map[string]float64) (float64, error) {
	switch e := e.(type) {
	case *ast.ParenExpr:
		return evaluate(e.X, names)
	case *ast.BasicLit:
		return strconv.ParseFloat(e.Value, 64)
	case *ast.Ident:
		x, ok := names[e.Name]
		if !ok {
			return 0, fmt.Errorf("%s is not an input", e.Name)
		}
		return x, nil
	case *ast.UnaryExpr:
		x, err := evaluate(e.X, names)
		if e.Op != token.SUB {
			return 0, fmt.Errorf("%v is no operator here", e.Op)
		}
		return -x, err
	case *ast.BinaryExpr:
		x, err := evaluate(e.X, names)
		if err != nil {
			return 0, err
		}
		y, err := evaluate(e.Y, names)
		switch e.Op {
		case token.ADD:
			return x + y, err
		case token.SUB:
			return x - y, err
		case token.MUL:
			return x * y, err
		case token.QUO:
			return x / y, err
		}
	case *ast.CallExpr:
		var args []float64
		for _, a := range e.Args {
			x, err := evaluate(a, names)
			if err != nil {
				return 0, err
			}
			args = append(args, x)
		}
		switch f := e.Fun.(*ast.Ident).Name; {
		case f == "sqrt" && len(args) == 1:
			return math.Sqrt(args[0]), nil
		case f == "log10" && len(args) == 1:
			return math.Log10(args[0]), nil
		case f == "sind" && len(args) == 1:
			return math.Sin(args[0] * math.Pi / 180), nil
		case f == "cosd" && len(args) == 1:
			return math.Cos(args[0] * math.Pi / 180), nil
		case f == "hypot" && len(args) == 2:
			return math.Hypot(args[0], args[1]), nil
		case f == "atan2d" && len(args) == 2:
			return math.Atan2(args[0], args[1]) * 180 / math.Pi, nil
		}
	}
	return 0, fmt.Errorf("%T is not arithmetic", e)
}

// recompute holds every step against its own formula and inputs.
func recompute(t *testing.T, name string, steps []*pb.DerivationStep) {
	t.Helper()
	if len(steps) == 0 {
		t.Errorf("%s: no derivation", name)
	}
	units := map[string]bool{"[diop]": true, "mm": true, "deg": true, "1": true, "m": true, "m-1": true}
	for _, s := range steps {
		names := map[string]float64{}
		for _, in := range s.GetInputs() {
			names[in.GetName()] = in.GetValue()
			if !units[in.GetUnit()] {
				t.Errorf("%s, %s: the unit %q of %s", name, s.GetName(), in.GetUnit(), in.GetName())
			}
		}
		e, err := parser.ParseExpr(s.GetFormula())
		if err != nil {
			t.Fatalf("%s, %s: %s: %v", name, s.GetName(), s.GetFormula(), err)
		}
		got, err := evaluate(e, names)
		if err != nil {
			t.Errorf("%s, %s: %s: %v", name, s.GetName(), s.GetFormula(), err)
			continue
		}
		want := s.GetResult().GetValue()
		if !(math.Abs(got-want) <= 1e-12*max(1, math.Abs(want))) {
			t.Errorf("%s, %s: %s with %v is %v, and the step says %v", name, s.GetName(), s.GetFormula(), names, got, want)
		}
		if s.GetName() == "" || s.GetSource() == "" || s.GetResult().GetName() == "" || !units[s.GetResult().GetUnit()] {
			t.Errorf("%s: %v", name, s)
		}
	}
}

// result is the number that the last step of that result's name gives.
func result(t *testing.T, steps []*pb.DerivationStep, name string) float64 {
	t.Helper()
	for i := len(steps) - 1; i >= 0; i-- {
		if steps[i].GetResult().GetName() == name {
			return steps[i].GetResult().GetValue()
		}
	}
	t.Errorf("no step gives %s", name)
	return math.NaN()
}

func TestEveryStepOfAFitFollowsFromItsInputs(t *testing.T) {
	t.Parallel()
	for _, toricity := range []pb.Toricity{0, pb.Toricity_TORICITY_SPHERICAL, pb.Toricity_TORICITY_FRONT, pb.Toricity_TORICITY_BACK, pb.Toricity_TORICITY_BITORIC} {
		for _, axis := range []float64{180, 20, 90, 133} {
			for _, gap := range []float64{0, 40} {
				req := fitRequest()
				req.GetEye().GetRefraction().SetAxisDeg(axis)
				req.GetEye().GetKeratometry().GetSteep().SetRadiusMm(7.4)
				req.SetPlan(pb.FitPlan_builder{Toricity: toricity.Enum(), ApexClearanceUm: proto.Float64(gap), Explain: proto.Bool(true)}.Build())
				res, err := call(req)
				if err != nil {
					t.Fatal(err)
				}
				name := fmt.Sprint(toricity, " ", axis, " ", gap)
				steps := res.GetDerivation()
				recompute(t, name, steps)
				for result_, want := range map[string]float64{
					"BVP_S": res.GetRequiredPower().GetSphereD(), "BVP_C": res.GetRequiredPower().GetCylinderD(),
					"FT_M": res.GetTearLens().GetPowerVector().GetMeanD(), "FT_J45": res.GetTearLens().GetPowerVector().GetJ45D(),
					"OR_M": res.GetResidual().GetVector().GetMeanD(), "OR_J0": res.GetResidual().GetVector().GetJ0D(),
					"B": res.GetResidual().GetBlurStrengthD(), "acuity": res.GetResidual().GetDecimalAcuity(),
				} {
					if got := result(t, steps, result_); got != want {
						t.Errorf("%s: %s is %v in the derivation and %v in the answer", name, result_, got, want)
					}
				}
			}
		}
	}
}

func TestEveryStepOfTheOtherServicesFollowsFromItsInputs(t *testing.T) {
	t.Parallel()
	d := newDoor(requests()...)
	ctx := context.Background()
	rx := pb.SphereCylinder_builder{SphereD: proto.Float64(-3), CylinderD: proto.Float64(2), AxisDeg: proto.Float64(25)}.Build()
	for _, to := range []float64{0, 8, 12, 16} {
		res, err := refractionService{door: d}.TransferVertex(ctx, pb.TransferVertexRequest_builder{
			Refraction: pb.Refraction_builder{
				SphereD: proto.Float64(8), CylinderD: proto.Float64(-2.5), AxisDeg: proto.Float64(100), VertexDistanceMm: proto.Float64(12),
			}.Build(),
			ToVertexDistanceMm: &to, Explain: proto.Bool(true),
		}.Build())
		if err != nil {
			t.Fatal(err)
		}
		recompute(t, "transfer", res.GetDerivation())
		if got := result(t, res.GetDerivation(), "K_M"); got != res.GetPowerVector().GetMeanD() {
			t.Errorf("to %v mm: %v and %v", to, got, res.GetPowerVector())
		}
	}
	sum, err := refractionService{door: d}.Combine(ctx, pb.CombineRequest_builder{
		Terms: []*pb.Term{
			pb.Term_builder{SphereCylinder: rx}.Build(),
			pb.Term_builder{PowerVector: pb.PowerVector_builder{MeanD: proto.Float64(1), J45D: proto.Float64(0.5)}.Build(), Subtract: proto.Bool(true)}.Build(),
		},
		Explain: proto.Bool(true),
	}.Build())
	if err != nil {
		t.Fatal(err)
	}
	recompute(t, "sum", sum.GetDerivation())
	for _, turn := range []float64{0, 10, -33} {
		res, err := refractionService{door: d}.Express(ctx, pb.ExpressRequest_builder{SphereCylinder: rx, RotationDeg: &turn, Explain: proto.Bool(true)}.Build())
		if err != nil {
			t.Fatal(err)
		}
		recompute(t, "forms", res.GetDerivation())
		if axis := res.GetPlusCylinder().GetAxisDeg(); !near(axis, math.Mod(25+turn+180, 180), 1e-9) {
			t.Errorf("turned by %v: axis %v", turn, axis)
		}
	}
	k, err := corneaService{door: d}.DescribeCornea(ctx, pb.DescribeCorneaRequest_builder{Keratometry: fitRequest().GetEye().GetKeratometry(), Explain: proto.Bool(true)}.Build())
	if err != nil {
		t.Fatal(err)
	}
	recompute(t, "cornea", k.GetDerivation())
}
