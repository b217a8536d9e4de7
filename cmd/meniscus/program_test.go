package main

import (
	"bytes"
	"context"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"

	"google.golang.org/grpc"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/proto"
)

var update = flag.Bool("update", false, "write the golden texts instead of comparing them")

// fake is a service that answers every call with the same message or error, and keeps what it was asked.
type fake struct {
	answer proto.Message
	err    error
	method string
	asked  proto.Message
}

func (f *fake) Invoke(_ context.Context, method string, args, reply any, _ ...grpc.CallOption) error {
	f.method, f.asked = method, proto.Clone(args.(proto.Message))
	if f.err != nil {
		return f.err
	}
	proto.Merge(reply.(proto.Message), f.answer)
	return nil
}

func (f *fake) NewStream(context.Context, *grpc.StreamDesc, string, ...grpc.CallOption) (grpc.ClientStream, error) {
	return nil, status.Error(codes.Unimplemented, "no streams")
}

// outcome is what the program did.
type outcome struct {
	code     int
	out, err string
}

// call runs the program in the test, with a service in the place of the engine; without one it is the engine.
func call(t *testing.T, service grpc.ClientConnInterface, stdin string, args ...string) outcome {
	t.Helper()
	var out, errOut bytes.Buffer
	if service == nil {
		code := run(t.Context(), args, strings.NewReader(stdin), &out, &errOut)
		return outcome{code, out.String(), errOut.String()}
	}
	a := &app{
		in: strings.NewReader(stdin), out: &out, errOut: &errOut,
		engine: func() grpc.ClientConnInterface { return service },
	}
	code := a.run(t.Context(), args)
	return outcome{code, out.String(), errOut.String()}
}

// golden compares a text with the one in testdata, and holds that it is within the width of a page where it is one.
func golden(t *testing.T, name, got string) {
	t.Helper()
	path := filepath.Join("testdata", name)
	if *update {
		if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		t.Errorf("%s is not what it was (go test ./cmd/meniscus -update writes it anew); got\n%s\nwant\n%s", path, got, want)
	}
	if strings.HasSuffix(name, ".txt") {
		withinTheWidth(t, name, got)
	}
}

func withinTheWidth(t *testing.T, name, text string) {
	t.Helper()
	for line := range strings.Lines(text) {
		line = strings.TrimSuffix(line, "\n")
		if n := utf8.RuneCountInString(line); n > width || strings.TrimRight(line, " ") != line || strings.Contains(line, noBreak) {
			t.Errorf("%s: a line of %d columns, or with space at its end, or with a no-break space: %q", name, n, line)
		}
	}
}
