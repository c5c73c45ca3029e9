package importers

import (
	"strconv"

	"footing/meta/effect"
)

// keptFigure is one figure of a record, packed.
type keptFigure struct {
	value    float64
	cell     string
	place    uint8 // index into places
	bound    effect.Bound
	decimals int16
}

// keptRest is what a record reports beside figures.
type keptRest struct {
	scale          effect.Scale
	isLog          bool
	direction      effect.Direction
	sides          int8
	notSignificant bool
	pointBiserial  bool
}

// places lists everywhere that a figure can go; placeOf finds the number of a place by its meaning (with its arm).
var places, placeNumber = buildPlaces()

func buildPlaces() ([]place, map[Meaning]uint8) {
	var list []place
	number := map[Meaning]uint8{}
	add := func(m Meaning, p place) {
		number[m] = uint8(len(list))
		list = append(list, p)
	}
	for _, m := range plainOrder {
		if p := figures[m]; p != nil {
			add(m, p)
		}
	}
	for _, m := range armOrder {
		get := armFigures[m]
		if get == nil {
			continue
		}
		add("treatment "+m, func(r *effect.Reported) *effect.Figure { return get(&r.Treatment) })
		add("control "+m, func(r *effect.Reported) *effect.Figure { return get(&r.Control) })
	}
	return list, number
}

// Reported is what the record says about its comparison.
func (r *Record) Reported() effect.Reported {
	var out effect.Reported
	for i := range r.kept {
		k := &r.kept[i]
		*places[k.place](&out) = effect.Figure{Value: k.value, Given: true, Decimals: int(k.decimals), Bound: k.bound, Cell: k.cell}
	}
	out.EstimateScale, out.EstimateIsLog, out.Direction = r.rest.scale, r.rest.isLog, r.rest.direction
	out.PSides, out.NotSignificant, out.PointBiserial = int(r.rest.sides), r.rest.notSignificant, r.rest.pointBiserial
	return out
}

// figure is one figure of the record, by the number of its place.
func (r *Record) figure(place uint8) effect.Figure {
	for i := range r.kept {
		if k := &r.kept[i]; k.place == place {
			return effect.Figure{Value: k.value, Given: true, Decimals: int(k.decimals), Bound: k.bound, Cell: k.cell}
		}
	}
	return effect.Figure{}
}

// keep packs what the record reports; only the places in used can be filled.
func (r *Record) keep(rep *effect.Reported, used []uint8) {
	n := 0
	for _, p := range used {
		if places[p](rep).Given {
			n++
		}
	}
	r.kept = make([]keptFigure, 0, n)
	for _, p := range used {
		if f := places[p](rep); f.Given {
			r.kept = append(r.kept, keptFigure{f.Value, f.Cell, p, f.Bound, int16(f.Decimals)})
		}
	}
	r.rest = keptRest{rep.EstimateScale, rep.EstimateIsLog, rep.Direction, int8(rep.PSides), rep.NotSignificant, rep.PointBiserial}
}

// Cells lists every cell of the record as read.
func (r *Record) Cells() []Cell {
	n := len(r.cells)
	for _, j := range r.joined {
		n += len(j.cells)
	}
	out := make([]Cell, 0, n)
	add := func(row int, cells []cell) {
		for i := range cells {
			out = append(out, r.described(row, &cells[i]))
		}
	}
	add(r.Row, r.cells)
	for _, j := range r.joined {
		add(j.n, j.cells)
	}
	return out
}

func (r *Record) described(row int, c *cell) Cell {
	out := Cell{Address: address(int(c.column), row), Column: int(c.column), Text: c.text}
	if h := r.set.at(int(c.column)); h != nil {
		out.Heading, out.Meaning = h.Typed, h.Meaning
	}
	return out
}

// Other gives the columns that were not understood, by heading as typed: for moderators and filters. A heading that stands
// twice keeps its second column under "heading (column D)", a column without one is "column D".
func (r *Record) Other() map[string]string {
	out := map[string]string{}
	for i := range r.cells {
		h := r.set.at(int(r.cells[i].column))
		if h == nil || h.Meaning != "" {
			continue
		}
		name := h.Typed
		if name == "" {
			name = "column " + columnName(h.Column)
		}
		if _, taken := out[name]; taken {
			name += " (column " + columnName(h.Column) + ")"
		}
		out[name] = r.cells[i].text
	}
	return out
}

// ShowCellsOf makes the record show the cells of another reading of the same row, for values that a decision replaced.
func (r *Record) ShowCellsOf(other *Record) {
	r.set, r.cells, r.joined = other.set, other.cells, other.joined
}

// textAt is the text of the record's cell in a column of its own row.
func (r *Record) textAt(column int) string {
	for i := range r.cells {
		if int(r.cells[i].column) == column {
			return r.cells[i].text
		}
	}
	return ""
}

// tellApart puts the year behind labels that stand before several studies of different years, as when one column holds
// the authors and another the years.
func tellApart(recs []Record) {
	labels := labelNumbers(recs)
	years := make([]int, len(recs))
	differ := map[int32]bool{}
	for i, k := range labels {
		switch y := recs[i].Year; {
		case y == 0 || years[k] == y:
		case years[k] == 0:
			years[k] = y
		default:
			differ[k] = true
		}
	}
	if len(differ) == 0 {
		return
	}
	for i := range recs {
		if r := &recs[i]; r.Year != 0 && differ[labels[i]] {
			r.Study += " " + strconv.Itoa(r.Year)
		}
	}
}
