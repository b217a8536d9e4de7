package server

import (
	"context"
	"net"
	"slices"
	"sync"
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
// drifts does it to both; the ratio is the median of the slices' ratios.
func BenchmarkUnaryFit(b *testing.B) {
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
	var ratios, rates []float64
	for b.Loop() {
		a := load(b, realClients, req, slice)
		c := load(b, cannedClients, req, slice)
		d := load(b, cannedClients, req, slice)
		e := load(b, realClients, req, slice)
		ratios = append(ratios, (a+e)/(c+d))
		rates = append(rates, (a+e)/2)
	}
	slices.Sort(ratios)
	slices.Sort(rates)
	b.ReportMetric(ratios[len(ratios)/2], "ratio")
	b.ReportMetric(rates[len(rates)/2], "calls/s")
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

// load keeps 64 calls in flight for a time and gives the calls per second.
func load(b *testing.B, clients []pb.FittingServiceClient, req *pb.FitRequest, long time.Duration) float64 {
	const inFlight = 64
	var wg sync.WaitGroup
	counts := make([]int, inFlight)
	begin := time.Now()
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
	return float64(total) / took
}
