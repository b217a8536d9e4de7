package main

import (
	"bytes"
	"context"
	"errors"
	"strings"
	"testing"
	"time"

	spb "google.golang.org/genproto/googleapis/rpc/status"
	"google.golang.org/grpc"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/encoding/protojson"
	"google.golang.org/protobuf/proto"
)

func TestEveryFaultIsToldWithItsFieldAndItsFlag(t *testing.T) {
	t.Parallel()
	for name, c := range map[string]struct {
		err  error
		args []string
	}{
		"invalid.txt":            {invalid(t), usualFit},
		"invalid_from_file.txt":  {invalid(t), []string{"fit", "--file", "-"}},
		"impossible.txt":         {impossible(t), usualFit},
		"invalid.json":           {invalid(t), append(usualFit[:len(usualFit):len(usualFit)], "--json")},
		"not_served.txt":         {status.Error(codes.Unimplemented, "/meniscus.v1.FittingService/Fit is not served by version 9.9.9"), usualFit},
		"internal.txt":           {status.Error(codes.Internal, "internal error"), usualFit},
		"invalid_as_text.txt":    {status.Error(codes.InvalidArgument, "a server that tells no fields"), usualFit},
		"impossible_as_text.txt": {status.Error(codes.FailedPrecondition, "a server that tells no fields"), usualFit},
	} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			got := call(t, &fake{err: c.err}, "{}", c.args...)
			if got.code != exitFailed || got.out != "" {
				t.Errorf("exit code %d, standard output %q", got.code, got.out)
			}
			golden(t, name, got.err)
		})
	}
}

func TestTheErrorAsJSONIsTheStatusItself(t *testing.T) {
	t.Parallel()
	got := call(t, &fake{err: invalid(t)}, "", append(usualFit[:len(usualFit):len(usualFit)], "--json")...)
	read := &spb.Status{}
	if err := protojson.Unmarshal([]byte(got.err), read); err != nil || got.code != exitFailed || got.out != "" {
		t.Fatalf("%v, exit code %d, standard output %q", err, got.code, got.out)
	}
	if want := status.Convert(invalid(t)).Proto(); !proto.Equal(read, want) {
		t.Errorf("got %v, want %v", read, want)
	}
}

func TestEachCommandFailsWhenItsCallDoes(t *testing.T) {
	t.Parallel()
	for _, args := range [][]string{
		usualFit, {"vertex", "-1"}, {"combine", "-1"}, {"express", "-1"}, {"cornea", "7.80"}, {"cautions"}, {"methods"},
	} {
		got := call(t, &fake{err: status.Error(codes.ResourceExhausted, "too many calls")}, "", args...)
		if got.code != exitFailed || got.out != "" || got.err != "meniscus: ResourceExhausted: too many calls\n" {
			t.Errorf("%q: %+v", args, got)
		}
	}
}

// slow is a service that answers when its caller gives up.
type slow struct{ fake }

func (*slow) Invoke(ctx context.Context, _ string, _, _ any, _ ...grpc.CallOption) error {
	<-ctx.Done()
	return status.FromContextError(ctx.Err()).Err()
}

func TestACallEndsAtItsTimeoutAndAtAnInterrupt(t *testing.T) {
	t.Parallel()
	got := call(t, &slow{}, "", "methods", "--timeout", "20ms")
	if got.code != exitFailed || got.err != "meniscus: no answer within 20ms; --timeout gives it longer\n" {
		t.Errorf("timeout: %+v", got)
	}
	ctx, interrupt := context.WithTimeout(t.Context(), time.Hour)
	interrupt()
	var out, errOut bytes.Buffer
	a := &app{out: &out, errOut: &errOut, engine: func() grpc.ClientConnInterface { return &slow{} }}
	if code := a.run(ctx, []string{"methods"}); code != exitFailed || errOut.String() != "meniscus: interrupted\n" {
		t.Errorf("interrupt: exit code %d, %q", code, errOut.String())
	}
}

// full takes nothing.
type full struct{}

func (full) Write([]byte) (int, error) { return 0, errors.New("no space left") }

func TestAnAnswerThatCannotBeWrittenIsAFailure(t *testing.T) {
	t.Parallel()
	var errOut bytes.Buffer
	a := &app{out: full{}, errOut: &errOut, engine: func() grpc.ClientConnInterface { return &fake{answer: sphericalFit()} }}
	if code := a.run(t.Context(), usualFit); code != exitFailed || errOut.String() != "meniscus: no space left\n" {
		t.Errorf("exit code %d, %q", code, errOut.String())
	}
}

func TestAFieldIsTracedToTheNearestFlag(t *testing.T) {
	t.Parallel()
	from := origins{"eye.refraction": "--rx", "eye.refraction.vertex_distance_mm": "--vertex", "terms[1]": "POWER 2", "chords_mm": "--chord"}
	for path, want := range map[string]string{
		"eye.refraction.sphere_d":           "--rx",
		"eye.refraction":                    "--rx",
		"eye.refraction.vertex_distance_mm": "--vertex",
		"eye.keratometry.flat":              "",
		"terms[1].sphere_cylinder.axis_deg": "POWER 2",
		"terms[0].sphere_cylinder":          "",
		"chords_mm[3]":                      "--chord",
		"":                                  "",
	} {
		if got := from.of(path); got != want {
			t.Errorf("%s: got %q, want %q", path, got, want)
		}
	}
	if got := origins(nil).of("eye.refraction"); got != "" {
		t.Errorf("without origins: got %q", got)
	}
	if got := (fault{fields: []string{"eye.refraction.sphere_d", "eye.refraction.axis_deg"}}).name(from); strings.Count(got, "--rx") != 1 {
		t.Errorf("one flag, named twice: %q", got)
	}
}
