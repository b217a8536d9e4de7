package server

import (
	"runtime"
	"time"

	"google.golang.org/grpc/keepalive"
)

// How a server treats quiet connections. Mobile clients do not ping (it wakes the radio): they reconnect.
var (
	enforcement = keepalive.EnforcementPolicy{
		MinTime:             30 * time.Second,
		PermitWithoutStream: true,
	}
	keepaliveParameters = keepalive.ServerParameters{
		Time:    2 * time.Minute, // ping a client that has been quiet that long
		Timeout: 20 * time.Second,
	}
)

// streamWorkers is the number of goroutines that wait for calls.
var streamWorkers = uint32(4 * runtime.GOMAXPROCS(0))
