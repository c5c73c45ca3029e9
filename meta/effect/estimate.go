package effect

// Table is a 2x2 table as counted: events and people in each arm.
type Table struct {
	EventsTreatment, TotalTreatment float64
	EventsControl, TotalControl     float64
}

// Estimate is one study's effect on its analysed scale.
type Estimate struct {
	Study    string
	Scale    Scale
	Value    float64 // analysed scale: logs for ratios, z for correlations
	Variance float64 // of Value; above 0 and finite
	Route    string  // name of the route taken, e.g. "means-and-sds"
	Formula  string  // the route in one line, with the numbers filled in
	Notes    []string
	Cells    []string   // addresses of the cells that it came from
	Table    *Table     // the counts, where the route had them
	N        [2]float64 // people in treatment and control; 0 where unknown
	Flipped  bool       // the sign was turned because a lower value is the better one
}
