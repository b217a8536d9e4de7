// Package cornea turns keratometer readings into the principal radii and the shape of a cornea.
package cornea
