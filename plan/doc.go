// Package plan reads a plan file and runs the whole way from evidence sheet to sample size.
package plan
