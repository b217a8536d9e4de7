// Command meniscusd serves meniscus.v1 over gRPC.
package main
