// Package meta pools effect estimates: common effect, random effects by several estimators of the between-study variance, intervals of the mean,
// heterogeneity, prediction, pooled 2x2 tables and influence.
//
// Throughout, y are the estimates on their analysed scale, v their variances, w = 1/v, w* = 1/(v + tau2) and df = k - 1. What can't be had (an
// interval with k = 1, a prediction with k = 2) is a value that says so, not an error; an error means that the input can't be used at all. No
// result is ever NaN or infinite.
package meta
