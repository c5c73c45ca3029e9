// Package choices: see doc.
package choices
