// Package tear has what lies between a rigid lens and the cornea: the power of the tear lens, and the chain of
// vergences from the cornea through the tears to the back of the lens.
//
//	air | lens n, thickness t | tears n_t, thickness g at the apex | cornea
package tear
