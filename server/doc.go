// Package server answers the rpcs of meniscus.v1: message in, optics call, message out.
//
// A handler parses (the door checks each number against the limits in the schema, then the core's own
// constructors check what belongs together), calls optics, and converts the answer. It holds no
// arithmetic, keeps nothing that was sent, and logs no clinical value.
package server
