package importers

import (
	"reflect"
	"testing"
)

func TestCompare(t *testing.T) {
	a := readCSVText(t, "study,year,n1,mean1,sd1,n2,mean2,sd2,risk of bias\nA,2001,20,5.0,2,20,4,2,low\nB,2002,30,6,2.5,31,5,2,high\nC 2003,,10,1,1,10,1,1,low\n", Options{Name: "a"})
	b := readCSVText(t, "Study\tMean (SD) treatment\tn treatment\tn control\tMean (SD) control\tRoB\tyear\nB\t6 (2.6)\t30\t31\t5 (2)\tsome concerns\t2002\nA\t5 (2)\t20\t20\t4 (2)\tLow\t\nC 2013\t1 (1)\t10\t10\t1 (1)\tlow\t\n", Options{Name: "b", Delimiter: "\t"})
	got := Compare(a, b)
	want := Comparison{A: "a", B: "b", Studies: 2, Compared: 16, Equal: 13,
		Differences: []Difference{
			{Study: "A", Meaning: Year, CellA: "B2", TextA: "2001"},
			{Study: "B", Meaning: RiskOfBias, CellA: "I3", CellB: "F2", TextA: "high", TextB: "some concerns"},
			{Study: "B", Meaning: "treatment sd", CellA: "E3", CellB: "B2", TextA: "2.5", TextB: "6 (2.6)"},
		},
		OnlyA: []Missing{{"C 2003", 4, "C 2013"}}, OnlyB: []Missing{{"C 2013", 4, "C 2003"}}}
	if !reflect.DeepEqual(got, want) {
		t.Errorf("got  %+v\nwant %+v", got, want)
	}
	if same := Compare(a, a); len(same.Differences)+len(same.OnlyA)+len(same.OnlyB) != 0 || same.Equal != same.Compared || same.Studies != 3 {
		t.Errorf("%+v", same)
	}
}
