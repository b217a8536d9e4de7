package server

import (
	"context"
	"log/slog"
	"runtime/debug"
	"time"

	"google.golang.org/genproto/googleapis/rpc/errdetails"
	"google.golang.org/grpc"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/metadata"
	"google.golang.org/grpc/status"
)

// interceptor is what every unary call passes, step by step. It is one function, and not a chain of many, so that a call costs no closure
// a step.
func interceptor(log *slog.Logger) grpc.UnaryServerInterceptor {
	return func(ctx context.Context, req any, info *grpc.UnaryServerInfo, handler grpc.UnaryHandler) (any, error) {
		begin := time.Now()
		echoRequestID(ctx)                              // first, so that every answer and every failure carries the id
		res, err := guard(ctx, log, req, info, handler) // nothing gets past it: lateness, a panic, a method that is not served
		logCall(ctx, log, info.FullMethod, err, begin)  // last, since it tells the code that the caller gets
		return res, err
	}
}

// guard calls the handler unless the caller has gone, and turns a panic into INTERNAL, with the stack in the log. The value of the panic
// is not logged: it can hold what was sent.
func guard(ctx context.Context, log *slog.Logger, req any, info *grpc.UnaryServerInfo, handler grpc.UnaryHandler) (res any, err error) {
	defer func() {
		if p := recover(); p != nil {
			logPanic(ctx, log, info.FullMethod)
			res, err = nil, internal()
		}
	}()
	if err := late(ctx); err != nil {
		return nil, err
	}
	if res, err = handler(ctx, req); err != nil && status.Code(err) == codes.Unimplemented {
		return nil, NotServed(info.FullMethod)
	}
	return res, err
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
func echoRequestID(ctx context.Context) {
	if id := requestID(ctx); id != "" {
		// It fails only where there is no call to answer.
		_ = grpc.SetHeader(ctx, metadata.Pairs(requestIDKey, id))
	}
}

// logCall logs method, code, reason, duration and request id, and nothing else: the text of an error can hold what was
// sent. Successes are logged at debug, the mistakes of callers at info, ours at error.
func logCall(ctx context.Context, log *slog.Logger, method string, err error, begin time.Time) {
	code, level := status.Code(err), slog.LevelInfo
	switch code {
	case codes.OK:
		level = slog.LevelDebug
	case codes.Internal:
		level = slog.LevelError
	}
	if !log.Enabled(ctx, level) {
		return
	}
	log.LogAttrs(ctx, level, "call",
		slog.String("method", method),
		slog.String("code", code.String()),
		slog.String("reason", reasonOf(err)),
		slog.Duration("duration", time.Since(begin)),
		slog.String("request_id", requestID(ctx)))
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

func logPanic(ctx context.Context, log *slog.Logger, method string) {
	log.LogAttrs(ctx, slog.LevelError, "panic", slog.String("method", method), slog.String("stack", string(debug.Stack())))
}

// streamRecover is guard for streams: a panic becomes INTERNAL.
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

// late is the error of a call whose caller has gone or whose deadline has passed.
func late(ctx context.Context) error {
	if err := ctx.Err(); err != nil {
		return ended(err, "before it was begun")
	}
	return nil
}

// streamNotServed gives the UNIMPLEMENTED of a stream that is not served its reason.
func streamNotServed(srv any, ss grpc.ServerStream, info *grpc.StreamServerInfo, handler grpc.StreamHandler) error {
	err := handler(srv, ss)
	if err != nil && status.Code(err) == codes.Unimplemented {
		return NotServed(info.FullMethod)
	}
	return err
}

// unknown answers a method or a service that is not in the schema.
func unknown(_ any, ss grpc.ServerStream) error {
	method, _ := grpc.Method(ss.Context())
	return NotServed(method)
}

// NotServed is the error of a method that this version does not serve; its name is as on the wire.
func NotServed(fullMethod string) error {
	return failure(codes.Unimplemented, reasonNotServed, fullMethod+" is not served by version "+Version)
}
