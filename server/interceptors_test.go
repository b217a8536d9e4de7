package server

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"log/slog"
	"slices"
	"strings"
	"testing"
	"time"

	"google.golang.org/genproto/googleapis/rpc/errdetails"
	"google.golang.org/grpc"
	"google.golang.org/grpc/codes"
	healthpb "google.golang.org/grpc/health/grpc_health_v1"
	"google.golang.org/grpc/metadata"
	reflectionv1 "google.golang.org/grpc/reflection/grpc_reflection_v1"
	"google.golang.org/grpc/status"
	"google.golang.org/grpc/test/bufconn"

	"go.uber.org/goleak"

	"meniscus.example/optics/unit"
	pb "meniscus.example/proto/meniscus/v1"
)

func TestMain(m *testing.M) { goleak.VerifyTestMain(m) }

func TestTheRequestIDComesBack(t *testing.T) {
	t.Parallel()
	client := pb.NewFittingServiceClient(dial(t, New(Options{})))
	for id, want := range map[string]int{"abc-123": 1, strings.Repeat("x", 128): 1, strings.Repeat("x", 129): 0, "": 0} {
		for _, req := range []*pb.FitRequest{fitRequest(), {}} {
			var header metadata.MD
			ctx := metadata.AppendToOutgoingContext(context.Background(), requestIDKey, id)
			_, _ = client.Fit(ctx, req, grpc.Header(&header)) // also on an error
			if got := header.Get(requestIDKey); len(got) != want || want == 1 && got[0] != id {
				t.Errorf("sent %q, got %q", id, got)
			}
		}
	}
}

// A number of a request stands in no line of the log, whatever comes of the request.
func TestTheLogHoldsNoClinicalValue(t *testing.T) {
	t.Parallel()
	var log bytes.Buffer
	s := New(Options{Log: slog.New(slog.NewTextHandler(&log, &slog.HandlerOptions{Level: slog.LevelDebug}))})
	client := pb.NewFittingServiceClient(dial(t, s))
	ctx := metadata.AppendToOutgoingContext(context.Background(), requestIDKey, "correlate-me")
	const canary = 7.654321
	for _, change := range []func(*pb.FitRequest){
		func(r *pb.FitRequest) { r.GetEye().GetRefraction().SetSphereD(-canary) },
		func(r *pb.FitRequest) { r.GetEye().GetKeratometry().GetSteep().SetRadiusMm(canary) },
		func(r *pb.FitRequest) { r.GetEye().GetKeratometry().GetSteep().SetPowerD(canary) },
		func(r *pb.FitRequest) { r.GetEye().GetRefraction().SetCylinderD(1000 * canary) },
		func(r *pb.FitRequest) {
			p := &pb.SphereCylinder{}
			p.SetSphereD(10 * canary)
			r.SetLens(pb.Lens_builder{Power: p}.Build())
		},
	} {
		req := fitRequest()
		change(req)
		_, _ = client.Fit(ctx, req) // an answer or an error
	}
	out := log.String()
	if lines := strings.Count(out, "msg=call"); lines != 5 {
		t.Errorf("%d lines of calls: %s", lines, out)
	}
	for _, want := range []string{"request_id=correlate-me", "code=OK", "code=InvalidArgument", "reason=INVALID_FIELDS", "reason=IMPOSSIBLE_LENS", "method=/meniscus.v1.FittingService/Fit", "duration="} {
		if !strings.Contains(out, want) {
			t.Errorf("no %s in %s", want, out)
		}
	}
	for _, never := range []string{"654", "43.2", "refraction", "sphere"} {
		if strings.Contains(strings.ToLower(out), never) {
			t.Errorf("%s in %s", never, out)
		}
	}
}

// A panic becomes INTERNAL, tells the caller nothing, and the next call is answered.
func TestAPanicIsNobodyElsesProblem(t *testing.T) {
	t.Parallel()
	var log bytes.Buffer
	chain := interceptor(slog.New(slog.NewTextHandler(&log, nil)))
	info := &grpc.UnaryServerInfo{FullMethod: "/x/Y"}
	_, err := chain(context.Background(), nil, info, func(context.Context, any) (any, error) { panic("secret 7.654321") })
	code, reason, _ := details(t, err)
	if code != codes.Internal || reason != reasonInternal || strings.Contains(err.Error(), "secret") || strings.Contains(log.String(), "secret") {
		t.Errorf("%v; log %s", err, log.String())
	}
	if !strings.Contains(log.String(), "panic") || !strings.Contains(log.String(), "level=ERROR") {
		t.Errorf("log %s", log.String())
	}
	res, err := chain(context.Background(), nil, info, func(context.Context, any) (any, error) { return 1, nil })
	if res != 1 || err != nil {
		t.Error(res, err)
	}
}

func TestNothingIsComputedForACallerWhoHasGone(t *testing.T) {
	t.Parallel()
	s := New(Options{})
	gone, cancel := context.WithCancel(context.Background())
	cancel()
	late, cancelLate := context.WithDeadline(context.Background(), time.Now().Add(-time.Second))
	defer cancelLate()
	for ctx, want := range map[context.Context]codes.Code{gone: codes.Canceled, late: codes.DeadlineExceeded} {
		_, err := s.Call(ctx, pb.FittingService_Fit_FullMethodName, func(any) error { return nil })
		if code, _, _ := details(t, err); code != want {
			t.Errorf("%v, want %v", err, want)
		}
	}
}

func TestEveryMethodOfTheSchemaIsAnsweredOrSaidNotToBe(t *testing.T) {
	t.Parallel()
	s := New(Options{})
	served := 0
	for _, name := range s.Methods() {
		_, err := s.Call(context.Background(), name, func(any) error { return nil })
		switch code, reason, _ := details(t, err); {
		case code == codes.Unimplemented && reason == reasonNotServed:
		case code == codes.OK || code == codes.InvalidArgument:
			served++
		default:
			t.Errorf("%s: %v", name, err)
		}
	}
	if served != 7 {
		t.Errorf("%d methods are served", served)
	}
	conn := dial(t, s)
	for _, name := range []string{"/meniscus.v1.FittingService/Nothing", "/nobody.v1.NobodyService/Nothing"} {
		_, inProcess := s.Call(context.Background(), name, func(any) error { return nil })
		wire := conn.Invoke(context.Background(), name, fitRequest(), &pb.FitResponse{})
		if code, reason, _ := details(t, wire); code != codes.Unimplemented || reason != reasonNotServed || wire.Error() != inProcess.Error() {
			t.Errorf("%v on the wire, %v in the process", wire, inProcess)
		}
	}
	stream, err := pb.NewFittingServiceClient(conn).FitStream(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	_, err = stream.Recv()
	if code, reason, _ := details(t, err); code != codes.Unimplemented || reason != reasonNotServed {
		t.Error(err)
	}
}

func TestErrorsOfTheCoreBecomeStatuses(t *testing.T) {
	t.Parallel()
	wrong, worse := &unit.FieldError{Field: "a.b", Problem: "is wrong"}, &unit.FieldError{Field: "c[1]", Problem: "is worse"}
	cannot := &unit.ImpossibleError{Fields: []string{"a", "d"}, Problem: "cannot be", Remedy: "try b"}
	for name, c := range map[string]struct {
		err    error
		code   codes.Code
		reason string
		fields []string
	}{
		"a value":                 {wrong, codes.InvalidArgument, reasonInvalidFields, []string{"a.b"}},
		"a wrapped value":         {fmt.Errorf("in a step: %w", wrong), codes.InvalidArgument, reasonInvalidFields, []string{"a.b"}},
		"values":                  {errors.Join(wrong, worse), codes.InvalidArgument, reasonInvalidFields, []string{"a.b", "c[1]"}},
		"joined twice":            {fmt.Errorf("all: %w", errors.Join(errors.Join(wrong), worse)), codes.InvalidArgument, reasonInvalidFields, []string{"a.b", "c[1]"}},
		"no lens":                 {cannot, codes.FailedPrecondition, reasonImpossibleLens, []string{"a", "d"}},
		"a wrapped no lens":       {fmt.Errorf("in a step: %w", cannot), codes.FailedPrecondition, reasonImpossibleLens, []string{"a", "d"}},
		"a value comes first":     {errors.Join(cannot, wrong), codes.InvalidArgument, reasonInvalidFields, []string{"a.b"}},
		"a caller who has gone":   {context.Canceled, codes.Canceled, reasonCancelled, nil},
		"a deadline that is over": {fmt.Errorf("in a step: %w", context.DeadlineExceeded), codes.DeadlineExceeded, reasonDeadline, nil},
		"a mistake of ours":       {errors.New("secret"), codes.Internal, reasonInternal, nil},
	} {
		err := statusFrom(c.err)
		code, reason, fields := details(t, err)
		if code != c.code || reason != c.reason || !slices.Equal(fields, c.fields) || strings.Contains(err.Error(), "secret") {
			t.Errorf("%s: %v names %v", name, err, fields)
		}
	}
	for _, d := range status.Convert(statusFrom(cannot)).Details() {
		if p, ok := d.(*errdetails.PreconditionFailure); ok && p.GetViolations()[0].GetDescription() != "cannot be; try b" {
			t.Errorf("no remedy: %v", p)
		}
	}
}

func TestHealthAndReflectionAnswer(t *testing.T) {
	t.Parallel()
	s := New(Options{})
	conn := dial(t, s)
	ctx, cancel := context.WithTimeout(context.Background(), 10*time.Second)
	defer cancel()
	health := healthpb.NewHealthClient(conn)
	for name, want := range map[string]healthpb.HealthCheckResponse_ServingStatus{
		"":                              healthpb.HealthCheckResponse_SERVING,
		"meniscus.v1.FittingService":    healthpb.HealthCheckResponse_SERVING,
		"meniscus.v1.RefractionService": healthpb.HealthCheckResponse_SERVING,
		"meniscus.v1.CorneaService":     healthpb.HealthCheckResponse_SERVING,
		"meniscus.v1.ReferenceService":  healthpb.HealthCheckResponse_SERVING,
		"meniscus.v1.LensService":       healthpb.HealthCheckResponse_NOT_SERVING,
		"meniscus.v1.SeriesService":     healthpb.HealthCheckResponse_NOT_SERVING,
		"meniscus.v1.ChartService":      healthpb.HealthCheckResponse_NOT_SERVING,
	} {
		res, err := health.Check(ctx, &healthpb.HealthCheckRequest{Service: name})
		if err != nil || res.GetStatus() != want {
			t.Errorf("%q: %v, %v, want %v", name, res, err, want)
		}
	}
	if _, err := health.Check(ctx, &healthpb.HealthCheckRequest{Service: "nothing"}); status.Code(err) != codes.NotFound {
		t.Error(err)
	}
	watch, err := health.Watch(ctx, &healthpb.HealthCheckRequest{})
	if err != nil {
		t.Fatal(err)
	}
	if res, err := watch.Recv(); err != nil || res.GetStatus() != healthpb.HealthCheckResponse_SERVING {
		t.Errorf("%v, %v", res, err)
	}
	s.health.Shutdown()
	if res, err := watch.Recv(); err != nil || res.GetStatus() != healthpb.HealthCheckResponse_NOT_SERVING {
		t.Errorf("%v, %v", res, err)
	}

	v1, err := reflectionv1.NewServerReflectionClient(conn).ServerReflectionInfo(ctx)
	if err != nil {
		t.Fatal(err)
	}
	if err := v1.Send(&reflectionv1.ServerReflectionRequest{MessageRequest: &reflectionv1.ServerReflectionRequest_ListServices{}}); err != nil {
		t.Fatal(err)
	}
	if res, err := v1.Recv(); err != nil || !strings.Contains(res.String(), "meniscus.v1.FittingService") {
		t.Errorf("%v, %v", res, err)
	}
	// The older version of reflection, which some tools still ask for first.
	g := s.GRPC()
	defer g.Stop()
	if _, ok := g.GetServiceInfo()["grpc.reflection.v1alpha.ServerReflection"]; !ok {
		t.Error("reflection v1alpha is not registered")
	}
}

// A watch that its client never closes is told, ended with a reason, and does not hold up the stop.
func TestAnOpenWatchDoesNotHoldUpTheStop(t *testing.T) {
	t.Parallel()
	s := New(Options{})
	listener := bufconn.Listen(1 << 20)
	g := s.GRPC()
	served := make(chan struct{})
	go func() {
		defer close(served)
		_ = g.Serve(listener) // ends with the stop
	}()
	conn := dialListener(t, listener)
	ctx, cancel := context.WithTimeout(context.Background(), 50*time.Second)
	defer cancel()
	watches := map[string]healthpb.Health_WatchClient{}
	for _, name := range []string{"", "meniscus.v1.FittingService"} {
		watch, err := healthpb.NewHealthClient(conn).Watch(ctx, &healthpb.HealthCheckRequest{Service: name})
		if err != nil {
			t.Fatal(err)
		}
		if res, err := watch.Recv(); err != nil || res.GetStatus() != healthpb.HealthCheckResponse_SERVING {
			t.Fatalf("%q: %v, %v", name, res, err)
		}
		watches[name] = watch
	}
	const grace = 40 * time.Second
	begin := time.Now()
	s.Stop(g, grace)
	if took := time.Since(begin); took > grace/2 {
		t.Errorf("it took %v to stop", took)
	}
	<-served
	for name, watch := range watches {
		if res, err := watch.Recv(); err != nil || res.GetStatus() != healthpb.HealthCheckResponse_NOT_SERVING {
			t.Errorf("%q: %v, %v", name, res, err)
		}
		_, err := watch.Recv()
		if code, reason, _ := details(t, err); code != codes.Unavailable || reason != reasonStopping {
			t.Errorf("%q: %v", name, err)
		}
	}
	s.Stop(g, grace) // again: nothing happens
}
