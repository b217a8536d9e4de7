package server

import (
	"context"

	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/health"
	healthpb "google.golang.org/grpc/health/grpc_health_v1"
)

// endingHealth is the health service, whose watches end once the server stops: a watch that its client keeps open would hold up a graceful
// stop for as long as the grace period lasts.
type endingHealth struct {
	*health.Server
	stopping context.Context
}

// Watch tells the status of a service at each change. When the server stops, the last that it tells is NOT_SERVING; then it fails with
// UNAVAILABLE, on which a client connects anew.
func (h endingHealth) Watch(req *healthpb.HealthCheckRequest, stream healthpb.Health_WatchServer) error {
	ctx, cancel := context.WithCancel(stream.Context())
	defer cancel()
	defer context.AfterFunc(h.stopping, cancel)()
	w := &watch{Health_WatchServer: stream, ctx: ctx}
	err := h.Server.Watch(req, w)
	if h.stopping.Err() == nil || stream.Context().Err() != nil {
		return err
	}
	if w.told == healthpb.HealthCheckResponse_SERVING {
		if err := stream.Send(&healthpb.HealthCheckResponse{Status: healthpb.HealthCheckResponse_NOT_SERVING}); err != nil {
			return err
		}
	}
	return failure(codes.Unavailable, reasonStopping, "the server is stopping")
}

// watch is the stream of one watch, with a context that ends when the server stops, and the status that was told last.
type watch struct {
	healthpb.Health_WatchServer
	ctx  context.Context
	told healthpb.HealthCheckResponse_ServingStatus
}

func (w *watch) Context() context.Context { return w.ctx }

func (w *watch) Send(res *healthpb.HealthCheckResponse) error {
	w.told = res.GetStatus()
	return w.Health_WatchServer.Send(res)
}
