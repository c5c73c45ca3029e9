// Package meta: see doc.
package meta
