// Package num is the ground floor: distribution functions with both tails kept, their quantiles, noncentral t, root finding,
// quadrature with an error estimate, sums that stay accurate and random streams that give the same numbers on any machine.
//
// Every distribution function comes as a pair, CDF and Survival, each computed on its own, so that a small tail keeps its
// digits; every quantile comes as a pair too (the Upper form takes the upper-tail probability). Arguments outside a function's
// domain are a programmer's mistake here and panic with the prefix "num:"; the public packages check first and return errors.
package num

import "fmt"

func domain(function string, arguments ...float64) {
	panic(fmt.Sprintf("num: %s: argument outside its domain: %v", function, arguments))
}
