// Package num: see doc.
package num
