// Package prior: see doc.
package prior
