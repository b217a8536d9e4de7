package server

import (
	"context"
	"errors"
	"log/slog"
	"runtime/debug"
	"time"

	"google.golang.org/genproto/googleapis/rpc/errdetails"
	"google.golang.org/grpc"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/metadata"
	"google.golang.org/grpc/status"
)

// interceptors are what every unary call passes, the outermost first.
func interceptors(log *slog.Logger) []grpc.UnaryServerInterceptor {
	return []grpc.UnaryServerInterceptor{
		echoRequestID,    // first, so that every answer and every failure carries the id
		logCall(log),     // sees the final code of what is inside it
		recoverCall(log), // inside the log, so that a panic is logged as the failure that the caller gets
		refuseLate,       // nothing is computed for a caller who has gone
		nameNotServed,    // next to the handler: gives its UNIMPLEMENTED a reason
	}
}

// requestIDKey is the metadata key by which a caller correlates.
const requestIDKey = "x-request-id"

// requestID is the caller's own id, where there is a sane one: 1 to 128 printable ASCII characters.
func requestID(ctx context.Context) string {
	ids := metadata.ValueFromIncomingContext(ctx, requestIDKey)
	if len(ids) == 0 || len(ids[0]) == 0 || len(ids[0]) > 128 {
		return ""
	}
	for _, c := range []byte(ids[0]) {
		if c < 0x20 || c > 0x7e {
			return ""
		}
	}
	return ids[0]
}

// echoRequestID sends the caller's request id back in the header.
func echoRequestID(ctx context.Context, req any, _ *grpc.UnaryServerInfo, handler grpc.UnaryHandler) (any, error) {
	if id := requestID(ctx); id != "" {
		// It fails only where there is no call to answer.
		_ = grpc.SetHeader(ctx, metadata.Pairs(requestIDKey, id))
	}
	return handler(ctx, req)
}

// logCall logs method, code, reason, duration and request id, and nothing else: the text of an error can hold what was
// sent. Successes are logged at debug, the mistakes of callers at info, ours at error.
func logCall(log *slog.Logger) grpc.UnaryServerInterceptor {
	return func(ctx context.Context, req any, info *grpc.UnaryServerInfo, handler grpc.UnaryHandler) (any, error) {
		begin := time.Now()
		res, err := handler(ctx, req)
		code := status.Code(err)
		level := slog.LevelInfo
		switch code {
		case codes.OK:
			level = slog.LevelDebug
		case codes.Internal:
			level = slog.LevelError
		}
		if log.Enabled(ctx, level) {
			log.LogAttrs(ctx, level, "call",
				slog.String("method", info.FullMethod),
				slog.String("code", code.String()),
				slog.String("reason", reasonOf(err)),
				slog.Duration("duration", time.Since(begin)),
				slog.String("request_id", requestID(ctx)))
		}
		return res, err
	}
}

// reasonOf is the reason in the ErrorInfo of a status, or empty.
func reasonOf(err error) string {
	for _, d := range status.Convert(err).Details() {
		if info, ok := d.(*errdetails.ErrorInfo); ok {
			return info.GetReason()
		}
	}
	return ""
}

// recoverCall turns a panic into INTERNAL, with the stack in the log. It builds the whole status itself. The value of the
// panic is not logged but for its type: it can hold what was sent.
func recoverCall(log *slog.Logger) grpc.UnaryServerInterceptor {
	return func(ctx context.Context, req any, info *grpc.UnaryServerInfo, handler grpc.UnaryHandler) (res any, err error) {
		defer func() {
			if p := recover(); p != nil {
				logPanic(ctx, log, info.FullMethod)
				res, err = nil, internal()
			}
		}()
		return handler(ctx, req)
	}
}

func logPanic(ctx context.Context, log *slog.Logger, method string) {
	log.LogAttrs(ctx, slog.LevelError, "panic", slog.String("method", method), slog.String("stack", string(debug.Stack())))
}

// streamRecover is recoverCall for streams.
func streamRecover(log *slog.Logger) grpc.StreamServerInterceptor {
	return func(srv any, ss grpc.ServerStream, info *grpc.StreamServerInfo, handler grpc.StreamHandler) (err error) {
		defer func() {
			if p := recover(); p != nil {
				logPanic(ss.Context(), log, info.FullMethod)
				err = internal()
			}
		}()
		return handler(srv, ss)
	}
}

// refuseLate answers at once where the caller has gone or the deadline has passed.
func refuseLate(ctx context.Context, req any, _ *grpc.UnaryServerInfo, handler grpc.UnaryHandler) (any, error) {
	switch err := ctx.Err(); {
	case errors.Is(err, context.DeadlineExceeded):
		return nil, failure(codes.DeadlineExceeded, reasonDeadline, "the deadline passed before the call was begun")
	case err != nil:
		return nil, failure(codes.Canceled, reasonCancelled, "the call was cancelled before it was begun")
	}
	return handler(ctx, req)
}

// nameNotServed gives the UNIMPLEMENTED of a method that is in the schema and not served its reason.
func nameNotServed(ctx context.Context, req any, info *grpc.UnaryServerInfo, handler grpc.UnaryHandler) (any, error) {
	res, err := handler(ctx, req)
	if err != nil && status.Code(err) == codes.Unimplemented {
		return nil, notServed(info.FullMethod)
	}
	return res, err
}

// streamNotServed is nameNotServed for streams.
func streamNotServed(srv any, ss grpc.ServerStream, info *grpc.StreamServerInfo, handler grpc.StreamHandler) error {
	err := handler(srv, ss)
	if err != nil && status.Code(err) == codes.Unimplemented {
		return notServed(info.FullMethod)
	}
	return err
}

func notServed(method string) error {
	return failure(codes.Unimplemented, reasonNotServed, method+" is not served by version "+Version)
}
