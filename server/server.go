package server

import (
	"context"
	"fmt"
	"log/slog"
	"slices"
	"strings"
	"time"

	"google.golang.org/grpc"
	"google.golang.org/grpc/health"
	healthpb "google.golang.org/grpc/health/grpc_health_v1"
	"google.golang.org/grpc/reflection"
	"google.golang.org/protobuf/reflect/protoreflect"

	pb "meniscus.example/proto/meniscus/v1"
)

// Version is the version of the engine, in every answer's provenance.
const Version = "0.1.0-dev"

// Options are how a server is made. The zero value is a server with the defaults that the fields name.
type Options struct {
	// Log takes what happens. Nil: nothing is logged. It is given method, code, reason, duration and request id,
	// never a clinical value.
	Log *slog.Logger
	// MaxMessageBytes is the greatest size of a request. 0: 1 MiB.
	MaxMessageBytes int
	// NoReflection leaves server reflection out.
	NoReflection bool
}

// Server has the services of meniscus.v1. It is safe for concurrent use.
type Server struct {
	options  Options
	services []service
	methods  map[string]method
	health   *health.Server
	around   grpc.UnaryServerInterceptor
	stopping context.Context // ends when Stop begins
	stop     context.CancelFunc
}

// service is a description, what implements it, and whether that does more than to say UNIMPLEMENTED.
type service struct {
	desc   *grpc.ServiceDesc
	impl   any
	served bool
}

// method is a unary method and what implements it.
type method struct {
	desc *grpc.MethodDesc
	impl any
}

// New makes a server. It opens nothing: GRPC serves it, Call calls it in the process.
func New(o Options) *Server {
	if o.Log == nil {
		o.Log = slog.New(slog.DiscardHandler)
	}
	if o.MaxMessageBytes == 0 {
		o.MaxMessageBytes = 1 << 20
	}
	d := newDoor(requests()...)
	s := &Server{options: o, health: health.NewServer(), methods: map[string]method{}}
	s.stopping, s.stop = context.WithCancel(context.Background())
	s.services = []service{
		{&pb.FittingService_ServiceDesc, fittingService{door: d}, true},
		{&pb.RefractionService_ServiceDesc, refractionService{door: d}, true},
		{&pb.CorneaService_ServiceDesc, corneaService{door: d}, true},
		{&pb.ReferenceService_ServiceDesc, referenceService{door: d}, true},
		// In the schema, and not served yet: a caller gets UNIMPLEMENTED with a reason, and their health is NOT_SERVING.
		{&pb.LensService_ServiceDesc, pb.UnimplementedLensServiceServer{}, false},
		{&pb.SeriesService_ServiceDesc, pb.UnimplementedSeriesServiceServer{}, false},
		{&pb.ChartService_ServiceDesc, pb.UnimplementedChartServiceServer{}, false},
	}
	for _, sv := range s.services {
		for i := range sv.desc.Methods {
			m := &sv.desc.Methods[i]
			s.methods["/"+sv.desc.ServiceName+"/"+m.MethodName] = method{m, sv.impl}
		}
		state := healthpb.HealthCheckResponse_NOT_SERVING
		if sv.served {
			state = healthpb.HealthCheckResponse_SERVING
		}
		s.health.SetServingStatus(sv.desc.ServiceName, state)
	}
	s.around = interceptor(o.Log)
	return s
}

// requests are the request messages of every service.
func requests() []protoreflect.MessageDescriptor {
	var all []protoreflect.MessageDescriptor
	for _, file := range []protoreflect.FileDescriptor{
		pb.File_meniscus_v1_fitting_service_proto, pb.File_meniscus_v1_refraction_service_proto,
		pb.File_meniscus_v1_cornea_service_proto, pb.File_meniscus_v1_reference_service_proto,
		pb.File_meniscus_v1_lens_service_proto, pb.File_meniscus_v1_series_service_proto,
		pb.File_meniscus_v1_chart_service_proto,
	} {
		for i := range file.Services().Len() {
			methods := file.Services().Get(i).Methods()
			for j := range methods.Len() {
				all = append(all, methods.Get(j).Input())
			}
		}
	}
	return all
}

// GRPC makes a gRPC server of the services, with health (Check and Watch) and, unless left out, reflection (v1 and
// v1alpha).
func (s *Server) GRPC(more ...grpc.ServerOption) *grpc.Server {
	options := append([]grpc.ServerOption{
		grpc.MaxRecvMsgSize(s.options.MaxMessageBytes),
		grpc.UnaryInterceptor(s.around),
		grpc.ChainStreamInterceptor(streamRecover(s.options.Log), streamNotServed),
		grpc.UnknownServiceHandler(unknown),
		grpc.KeepaliveEnforcementPolicy(enforcement),
		grpc.KeepaliveParams(keepaliveParameters),
		// Goroutines that stay for the next call, instead of one a call: no growth of a new stack on each.
		grpc.NumStreamWorkers(streamWorkers),
	}, more...)
	g := grpc.NewServer(options...)
	for _, sv := range s.services {
		g.RegisterService(sv.desc, sv.impl)
	}
	healthpb.RegisterHealthServer(g, endingHealth{s.health, s.stopping})
	if !s.options.NoReflection {
		reflection.Register(g)
	}
	return g
}

// Stop ends a server that GRPC made: health says that it is not serving, calls that run are finished within the
// grace period, then the rest is cut off. Open health watches are told, and end at once.
func (s *Server) Stop(g *grpc.Server, grace time.Duration) {
	s.health.Shutdown()
	s.stop()
	done := make(chan struct{})
	go func() {
		g.GracefulStop()
		close(done)
	}()
	timer := time.NewTimer(grace)
	defer timer.Stop()
	select {
	case <-done:
	case <-timer.C:
		g.Stop()
		<-done
	}
}

// Call answers one unary rpc in the process, through the same interceptor and handler as a call over the network.
// fullMethod is as on the wire ("/meniscus.v1.FittingService/Fit"). read fills the request message that it is given.
func (s *Server) Call(ctx context.Context, fullMethod string, read func(any) error) (any, error) {
	m, ok := s.methods[fullMethod]
	if !ok {
		return nil, NotServed(fullMethod)
	}
	return m.desc.Handler(m.impl, ctx, read, s.around)
}

// Methods are the full names of the unary methods in the schema, sorted.
func (s *Server) Methods() []string {
	var names []string
	for name := range s.methods {
		names = append(names, name)
	}
	slices.SortFunc(names, strings.Compare)
	return names
}

// SchemaVersion is the version of the schema that the server answers.
func SchemaVersion() string {
	return string(pb.File_meniscus_v1_fitting_service_proto.Package())
}

// VersionText is what --version prints.
func VersionText() string { return fmt.Sprintf("engine %s, schema %s", Version, SchemaVersion()) }
