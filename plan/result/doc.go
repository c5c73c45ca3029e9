// Package result holds the results of a run as plain records, with their JSON names. It computes nothing and imports
// no package that does: what renders a result needs no other.
//
// Every number is on the analysed scale (logs for ratios, z for correlations) and in full precision; Shown holds the
// same on the scale that people read. What is not available is null, with the reason in the field Why beside it. NaN
// and infinity never stand in a result.
package result
