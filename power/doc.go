// Package power sizes a planned study. A Study is composed of an outcome, an arrangement and an aim; Resolve turns it into the Design that analyses it, or says which combination is
// offered instead. Search finds the smallest size that reaches a target; Assure averages power over a distribution of the effect.
//
// Effects are on the scale on which the study is analysed: standard deviations for means, the natural logarithm for an odds ratio or a risk ratio.
package power
