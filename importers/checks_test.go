package importers

import (
	"strings"
	"testing"
)

func TestSDLooksLikeSE(t *testing.T) {
	s := readCSVText(t, "study,n1,mean1,sd1,n2,mean2,sd2\nA,25,50,10,25,48,11\nB,30,52,9,30,47,10\nC,36,49,1.6,36,47,10\nD,40,51,11,40,49,9\nE,20,53,12,20,50,10\nF,20,5,1,20,4.5,1.1\nG,20,50,3.9,20,48,9\n", Options{})
	var got []string
	for _, f := range s.Findings {
		if f.Kind == "sd-looks-like-se" {
			got = append(got, f.ID())
			// 1.6 x sqrt(36) = 9.6, and the median of the seven SDs is 9.
			if !strings.Contains(f.What, "median 9") || !strings.Contains(f.What, "is 9.6") || f.Text != "1.6" || f.Study != "C" {
				t.Errorf("%+v", f)
			}
		}
	}
	if strings.Join(got, " ") != "sd-looks-like-se@D4" {
		t.Errorf("%q", got)
	}
}

func TestDuplicates(t *testing.T) {
	s := readCSVText(t, "study,n1,mean1,sd1,n2,mean2,sd2\nA,25,50,10,25,48,11\nB,25,50,10,25,48,11\nC,36,49,8,36,47,10\nC,30,51,8,36,47,10\nc ,31,51,8,37,47,10\n", Options{})
	if got := kindsOf(s.Findings); got != "arms-by-number@A1 duplicate-row@row 3 several-rows-one-study@row 4 same-control-group@row 5" {
		t.Error(got)
	}
	if !strings.Contains(s.Findings[2].What, "rows 4, 5, 6") {
		t.Error(s.Findings[2].What)
	}
}

func TestPercentages(t *testing.T) {
	for name, sheet := range map[string]string{
		"numbers": "study,n1,risk 1,n2,risk 2\nA,48,25,50,30\nB,40,12.5,40,0.5\n", "signs": "study,n1,risk 1,n2,risk 2\nA,48,25%,50,30%\nB,40,12.5 %,40,0.5%\n", "heading": "study,n1,risk 1 (%),n2,risk 2 (%)\nA,48,25,50,30\nB,40,12.5,40,0.5\n",
	} {
		s := readCSVText(t, sheet, Options{})
		b := s.Records[1].Reported()
		if s.Records[0].Reported().Treatment.Proportion.Value != 0.25 || b.Treatment.Proportion.Value != 0.125 || b.Control.Proportion.Value != 0.005 || b.Treatment.Proportion.Decimals != 3 {
			t.Errorf("%s: %+v %+v", name, b.Treatment.Proportion, b.Control.Proportion)
		}
		if warned := strings.Contains(kindsOf(s.Findings), "percent-as-number"); warned != (name == "numbers") {
			t.Errorf("%s: %s", name, kindsOf(s.Findings))
		}
	}
	s := readCSVText(t, "study,n1,risk 1,n2,risk 2\nA,48,0.25,50,0.3\nB,40,125,40,0.5\n", Options{})
	if !strings.Contains(kindsOf(s.Findings), "value-out-of-range@C3") {
		t.Error(kindsOf(s.Findings))
	}
}

// A mean of 5.19 among 28 people is impossible (Brown & Heathers 2017, recalled from memory; 145/28 = 5.179 and
// 146/28 = 5.214); 5.18 and 5.21 are possible, and over 4 items 5.19 is too (581/112 = 5.1875).
func TestGranularity(t *testing.T) {
	s := readCSVText(t, "study,n1,mean1,sd1,n2,mean2,sd2,items\nA,28,5.19,1,28,5.18,1,1\nB,28,5.21,1,28,5.19,1,4\nC,28,5.2,1,120,5.19,1,1\nD,28,5.19,1,28,5.19,1,\n", Options{})
	var got []string
	for _, f := range s.Findings {
		if f.Kind == "mean-impossible-for-n" {
			got = append(got, f.Place.Cell)
			if !strings.Contains(f.What, "5.18 and 5.21") || f.Text != "5.19" {
				t.Error(f)
			}
		}
	}
	if strings.Join(got, " ") != "C2" {
		t.Errorf("%q", got)
	}
}
