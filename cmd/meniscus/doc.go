// Command meniscus calculates contact lens fits at a terminal.
package main
