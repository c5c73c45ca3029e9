// Package power: see doc.
package power
