// Package embedded runs the engine in the process, without a network: the same handlers, the same answers, the same
// errors as over the wire.
//
// It links the optics. An application that only calls a remote server does not import it.
package embedded
