// Package client is the root of what applications call meniscus with: notation reads and prints prescriptions as the
// trade writes them, embedded runs the engine in the process.
package client
