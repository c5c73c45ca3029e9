// Package qualify: see doc.
package qualify
