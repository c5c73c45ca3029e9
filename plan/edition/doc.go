// Package edition: see doc.
package edition
