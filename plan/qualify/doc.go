// Package qualify recomputes published values on this machine, through the same packages that a plan runs through, and puts value beside value: an
// installation qualification for regulated work.
package qualify
