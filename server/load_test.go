package server

import (
	"context"
	"net"
	"runtime/debug"
	"slices"
	"sync"
	"syscall"
	"testing"
	"time"

	"google.golang.org/grpc"
	"google.golang.org/grpc/credentials/insecure"
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// canned answers every fit with a prepared response.
type canned struct {
	pb.UnimplementedFittingServiceServer
	response *pb.FitResponse
}

func (c canned) Fit(context.Context, *pb.FitRequest) (*pb.FitResponse, error) { return c.response, nil }

// BenchmarkHandler is a Fit without a network: door, core, answer.
func BenchmarkHandler(b *testing.B) {
	s, req := fittingService{door: newDoor(requests()...)}, benchmarkFitRequest()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := s.Fit(context.Background(), req); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkUnaryFit compares the server with a bare one that answers with a prepared message of the same content, over
// loopback, with 64 calls in flight on two connections. The two take turns in short slices, so that a machine whose speed
// drifts does it to both; both in one process with GCPercent. The ratio is the median of the slices' ratios; cpu-ratio is the same of the
// processor time a call, client included, which other work on the machine disturbs less.
func BenchmarkUnaryFit(b *testing.B) {
	defer debug.SetGCPercent(debug.SetGCPercent(GCPercent))
	req := benchmarkFitRequest()
	response, err := call(req)
	if err != nil {
		b.Fatal(err)
	}
	bare := grpc.NewServer(grpc.NumStreamWorkers(streamWorkers))
	pb.RegisterFittingServiceServer(bare, canned{response: response})
	realClients := serveLoopback(b, New(Options{}).GRPC())
	cannedClients := serveLoopback(b, bare)

	const slice = 300 * time.Millisecond
	load(b, realClients, req, slice)
	load(b, cannedClients, req, slice)
	var ratios, costs, rates []float64
	for b.Loop() {
		r1, c1 := load(b, realClients, req, slice)
		r2, c2 := load(b, cannedClients, req, slice)
		r3, c3 := load(b, cannedClients, req, slice)
		r4, c4 := load(b, realClients, req, slice)
		ratios = append(ratios, (r1+r4)/(r2+r3))
		costs = append(costs, (c2+c3)/(c1+c4))
		rates = append(rates, (r1+r4)/2)
	}
	median := func(x []float64) float64 {
		slices.Sort(x)
		return x[len(x)/2]
	}
	b.ReportMetric(median(ratios), "ratio")
	b.ReportMetric(median(costs), "cpu-ratio")
	b.ReportMetric(median(rates), "calls/s")
	b.ReportMetric(float64(proto.Size(response)), "response-bytes")
	b.ReportMetric(0, "ns/op")
}

// serveLoopback serves on loopback and gives clients on two connections.
func serveLoopback(b *testing.B, g *grpc.Server) []pb.FittingServiceClient {
	listener, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		b.Fatal(err)
	}
	done := make(chan struct{})
	go func() {
		defer close(done)
		_ = g.Serve(listener) // ends with the benchmark
	}()
	var clients []pb.FittingServiceClient
	var conns []*grpc.ClientConn
	for range 2 {
		conn, err := grpc.NewClient(listener.Addr().String(), grpc.WithTransportCredentials(insecure.NewCredentials()))
		if err != nil {
			b.Fatal(err)
		}
		conns = append(conns, conn)
		clients = append(clients, pb.NewFittingServiceClient(conn))
	}
	b.Cleanup(func() {
		for _, c := range conns {
			c.Close()
		}
		g.Stop()
		<-done
	})
	return clients
}

// load keeps 64 calls in flight for a time and gives the calls per second, and the processor seconds of a call.
func load(b *testing.B, clients []pb.FittingServiceClient, req *pb.FitRequest, long time.Duration) (rate, cost float64) {
	const inFlight = 64
	var wg sync.WaitGroup
	counts := make([]int, inFlight)
	begin, used := time.Now(), processorSeconds(b)
	end := begin.Add(long)
	for i := range inFlight {
		wg.Go(func() {
			for time.Now().Before(end) {
				if _, err := clients[i%len(clients)].Fit(context.Background(), req); err != nil {
					b.Error(err)
					return
				}
				counts[i]++
			}
		})
	}
	wg.Wait()
	took := time.Since(begin).Seconds()
	total := 0
	for _, n := range counts {
		total += n
	}
	return float64(total) / took, (processorSeconds(b) - used) / float64(total)
}

// processorSeconds is the processor time that this process has used.
func processorSeconds(b *testing.B) float64 {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		b.Fatal(err)
	}
	return float64(u.Utime.Nano()+u.Stime.Nano()) / 1e9
}
