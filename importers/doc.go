// Package importers reads evidence sheets: files to tables with cell addresses, headings to meanings, cells to numbers,
// rows to effect.Reported, and findings about the data on the way.
package importers
