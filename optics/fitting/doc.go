// Package fitting does the job: from what was measured of an eye, and what is decided of its lens, to the lens to
// order, with what it will leave uncorrected and what a practitioner should know.
//
// NewCase checks, Case.Fit computes, Result.Derivation explains. Every answer is a calculated starting point, to be
// confirmed on the eye by a licensed practitioner under local rules; nothing here diagnoses.
package fitting
