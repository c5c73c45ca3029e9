// Package effect turns what a paper reports about a comparison into an effect estimate with an honest variance, and
// says by which route it came there.
package effect
