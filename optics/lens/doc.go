// Package lens has a contact lens as an optical element: its back surface, its material and thickness,
// its powers, and how it passes oxygen.
package lens
