package effect

import (
	"fmt"
	"math"
)

// fromCorrelation: z = artanh r with variance 1/(n - 3) (Fisher 1921).
func fromCorrelation(w *work) {
	r := w.r
	if !r.R.Given || r.PointBiserial {
		return
	}
	n := r.N
	if !n.Given && r.Treatment.N.Given && r.Control.N.Given {
		n = Of(r.Treatment.N.Value + r.Control.N.Value)
		w.use(r.Treatment.N, r.Control.N)
	}
	if !n.Given && r.Treatment.N.Given {
		n = r.Treatment.N
	}
	if !w.need(r.R, n) {
		return
	}
	switch {
	case !(math.Abs(r.R.Value) < 1):
		w.refuse(r.R, "correlation-out-of-range", fmt.Sprintf("a correlation of %s has no z", r.R.text()), "a correlation lies between -1 and 1, both left out")
	case !(n.Value >= 4) || n.Value != math.Trunc(n.Value):
		w.refuse(n, "too-few-people", fmt.Sprintf("%s people give a correlation no variance", n.text()), "at least 4 are needed; check the cell")
	default:
		w.n = [2]float64{n.Value, 0}
		w.give(math.Atanh(r.R.Value), 1/(n.Value-3), fmt.Sprintf("artanh(%s); variance 1/(%s - 3)", r.R.text(), plain(n.Value)))
	}
}
