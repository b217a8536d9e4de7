package server

import (
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

// streamWorkers is the number of goroutines that wait for calls: with fewer than there are calls in flight, each further call begins in a new
// goroutine, whose stack has to grow.
const streamWorkers = 128

// GCPercent is the garbage collector's target that a server is meant to run with: a fit leaves little behind and the live heap is a few MiB,
// so that collecting at the usual 100 would be most of the cost of many calls. The program that serves sets it.
const GCPercent = 400
