// Package reports: see doc.
package reports
