package power

import (
	"math"

	"footing/internal/num"
)

// SignMagnitude gives the power, the chance that a significant estimate has the wrong sign (type S) and the factor by which significant estimates exaggerate on average (type M), for
// an estimate that is normal around a true effect other than 0 with a standard error, significant beyond critical standard errors on either side (one side when sides is
// 1): Gelman & Carlin 2014, in closed form.
func SignMagnitude(effect, standardError, critical float64, sides int) (power, typeS, typeM float64) {
	a := math.Abs(effect) / standardError
	up := num.NormalSurvival(critical - a)
	size := a*up + num.NormalPDF(critical-a)
	down := 0.0
	if sides != 1 {
		down = num.NormalCDF(-critical - a)
		size += -a*down + num.NormalPDF(critical+a)
	}
	power = up + down
	return power, down / power, size / power / a
}
