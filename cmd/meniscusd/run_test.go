package main

import (
	"bufio"
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"net"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"syscall"
	"testing"
	"time"

	"google.golang.org/grpc"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/credentials/insecure"
	healthpb "google.golang.org/grpc/health/grpc_health_v1"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// runWith runs the program in this process, with an environment, until ctx ends.
func runWith(ctx context.Context, env map[string]string, args ...string) (code int, stdout, stderr string) {
	var out, errs bytes.Buffer
	code = run(ctx, args, func(name string) (string, bool) { v, ok := env[name]; return v, ok }, &out, &errs)
	return code, out.String(), errs.String()
}

// stopped is a context that has ended: the program stops as soon as it has begun.
func stopped() context.Context {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	return ctx
}

func TestTheCommandLineAndTheEnvironment(t *testing.T) {
	taken, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	defer taken.Close()
	for name, c := range map[string]struct {
		env  map[string]string
		args []string
		code int
		says string
	}{
		"version":                 {nil, []string{"--version"}, exitFine, "meniscusd engine"},
		"help":                    {nil, []string{"--help"}, exitFine, "It diagnoses nothing and stores nothing"},
		"an unknown flag":         {nil, []string{"--nothing"}, exitUsage, "unknown flag"},
		"an argument":             {nil, []string{"serve"}, exitUsage, "takes flags only"},
		"a port that is taken":    {nil, []string{"--listen", taken.Addr().String()}, exitFailed, "address already in use"},
		"no address":              {nil, []string{"--listen", "nowhere"}, exitFailed, "missing port"},
		"beyond loopback":         {nil, []string{"--listen", "0.0.0.0:0"}, exitUsage, "--plaintext-beyond-loopback"},
		"every interface":         {nil, []string{"--listen", ":0"}, exitUsage, "--plaintext-beyond-loopback"},
		"empty":                   {nil, []string{"--listen", ""}, exitUsage, "--listen is empty"},
		"empty by name":           {nil, []string{"--listen", "", "--plaintext-beyond-loopback"}, exitUsage, "--listen is empty"},
		"empty in it":             {map[string]string{"MENISCUS_LISTEN": ""}, nil, exitUsage, "--listen is empty"},
		"a machine's own name":    {nil, []string{"--listen", "somewhere.example:0"}, exitUsage, "--plaintext-beyond-loopback"},
		"not only loopback":       {nil, []string{"--listen", "[::]:0"}, exitUsage, "--plaintext-beyond-loopback"},
		"beyond loopback by name": {nil, []string{"--listen", "0.0.0.0:0", "--plaintext-beyond-loopback"}, exitFine, "meniscusd listening"},
		"from the environment":    {map[string]string{"MENISCUS_LISTEN": "127.0.0.1:0"}, nil, exitFine, "meniscusd listening"},
		"a flag beats it":         {map[string]string{"MENISCUS_LISTEN": "0.0.0.0:0"}, []string{"--listen", "127.0.0.1:0"}, exitFine, "meniscusd listening"},
		"wrong in it":             {map[string]string{"MENISCUS_SHUTDOWN_GRACE": "soon"}, nil, exitUsage, "MENISCUS_SHUTDOWN_GRACE"},
		"a level":                 {nil, []string{"--log-level", "LOUD"}, exitUsage, "LOUD"},
		"a negative grace":        {nil, []string{"--shutdown-grace", "-1s"}, exitUsage, "negative"},
		"a size":                  {nil, []string{"--max-message-bytes", "5"}, exitUsage, "1024"},
	} {
		code, out, errs := runWith(stopped(), c.env, c.args...)
		if code != c.code || !strings.Contains(out+errs, c.says) {
			t.Errorf("%s: exit code %d, want %d; %s%s", name, code, c.code, out, errs)
		}
	}
}

// build builds the program.
func build(t testing.TB) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "meniscusd")
	if out, err := exec.Command("go", "build", "-o", path, ".").CombinedOutput(); err != nil {
		t.Fatalf("%v: %s", err, out)
	}
	return path
}

// start starts the program on a free port, and gives its address.
func start(t testing.TB, path string) (*exec.Cmd, string) {
	t.Helper()
	c := exec.Command(path, "--listen", "127.0.0.1:0")
	c.Env = append(os.Environ(), "MENISCUS_LOG_LEVEL=INFO")
	log, err := c.StderrPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = c.Process.Kill() }) // where it has not ended
	lines := bufio.NewScanner(log)
	if !lines.Scan() {
		t.Fatal("the server said nothing")
	}
	var line struct{ Msg, Address string }
	if err := json.Unmarshal(lines.Bytes(), &line); err != nil || line.Msg != "meniscusd listening" {
		t.Fatalf("%s: %v", lines.Text(), err)
	}
	go func() {
		for lines.Scan() {
		}
	}()
	return c, line.Address
}

func dial(t testing.TB, address string) *grpc.ClientConn {
	t.Helper()
	conn, err := grpc.NewClient(address, grpc.WithTransportCredentials(insecure.NewCredentials()))
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { conn.Close() })
	return conn
}

func eye() *pb.FitRequest {
	return pb.FitRequest_builder{Eye: pb.Eye_builder{
		Refraction: pb.Refraction_builder{SphereD: proto.Float64(-3), VertexDistanceMm: proto.Float64(12)}.Build(),
		Keratometry: pb.Keratometry_builder{
			Flat:  pb.MeridianReading_builder{RadiusMm: proto.Float64(7.9), MeridianDeg: proto.Float64(10)}.Build(),
			Steep: pb.MeridianReading_builder{RadiusMm: proto.Float64(7.8)}.Build(),
		}.Build(),
	}.Build()}.Build()
}

// A real process: it answers, and SIGTERM ends it at once although somebody watches its health.
func TestTheServerAnswersAndStopsGracefully(t *testing.T) {
	process, address := start(t, build(t))
	conn := dial(t, address)
	ctx, cancel := context.WithTimeout(context.Background(), 20*time.Second)
	defer cancel()
	res, err := pb.NewFittingServiceClient(conn).Fit(ctx, eye())
	if err != nil || !res.GetLens().HasPower() {
		t.Fatalf("%v, %v", res, err)
	}
	watch, err := healthpb.NewHealthClient(conn).Watch(ctx, &healthpb.HealthCheckRequest{Service: "meniscus.v1.FittingService"})
	if err != nil {
		t.Fatal(err)
	}
	if res, err := watch.Recv(); err != nil || res.GetStatus() != healthpb.HealthCheckResponse_SERVING {
		t.Fatalf("%v, %v", res, err)
	}
	if err := process.Process.Signal(syscall.SIGTERM); err != nil {
		t.Fatal(err)
	}
	if res, err := watch.Recv(); err != nil || res.GetStatus() != healthpb.HealthCheckResponse_NOT_SERVING {
		t.Errorf("%v, %v", res, err)
	}
	begin := time.Now() // the watcher stays, and the grace period is 10 s
	if err := process.Wait(); err != nil {
		t.Errorf("%v", err)
	}
	if took := time.Since(begin); took > 5*time.Second {
		t.Errorf("it took %v to stop", took)
	}
	if _, err := watch.Recv(); status.Code(err) != codes.Unavailable {
		t.Errorf("the watch ended with %v", err)
	}
}

// BenchmarkStart reports how long it takes from the start of the program to its first answer, and the memory resident then and
// before.
func BenchmarkStart(b *testing.B) {
	path := build(b)
	var n, first, idle, after float64
	for b.Loop() {
		n++
		begin := time.Now()
		process, address := start(b, path)
		conn := dial(b, address)
		idle += resident(b, process.Process.Pid)
		if _, err := pb.NewFittingServiceClient(conn).Fit(context.Background(), eye()); err != nil {
			b.Fatal(err)
		}
		first += float64(time.Since(begin).Milliseconds())
		after += resident(b, process.Process.Pid)
		_ = process.Process.Signal(syscall.SIGTERM)
		_ = process.Wait() // it was told to end
	}
	b.ReportMetric(first/n, "ms-to-first-answer")
	b.ReportMetric(idle/n, "MiB-idle")
	b.ReportMetric(after/n, "MiB-after-one-call")
	b.ReportMetric(0, "ns/op")
}

// resident is the memory of a process that is resident, in MiB.
func resident(t testing.TB, pid int) float64 {
	t.Helper()
	status, err := os.ReadFile(fmt.Sprintf("/proc/%d/status", pid))
	if err != nil {
		t.Fatal(err)
	}
	for line := range strings.Lines(string(status)) {
		if rest, ok := strings.CutPrefix(line, "VmRSS:"); ok {
			kib, err := strconv.ParseFloat(strings.Fields(rest)[0], 64)
			if err != nil {
				t.Fatal(err)
			}
			return kib / 1024
		}
	}
	t.Fatal("no VmRSS")
	return 0
}
