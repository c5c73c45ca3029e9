// Package published: see doc.
package published
