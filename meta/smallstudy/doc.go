// Package smallstudy: see doc.
package smallstudy
