// Package published holds published values with their sources, for tests and for the installation qualification. Each value stands as printed, with where it
// stands, how it is known ("read here" or "recalled from memory"), and what its printed inputs give when recomputed with general-purpose libraries.
package published
