package reports

import (
	"bytes"
	"strings"
	"testing"
)

func TestEnclosedFilesComeBack(t *testing.T) {
	want := map[string][]byte{"plan.yaml": []byte("title: Split lessons\n"), "evidence.xlsx": {0, 1, 2, 255, '<', '/', 's'}, "<odd> name": []byte("</script>")}
	var o []HTMLOption
	for _, name := range []string{"plan.yaml", "evidence.xlsx", "<odd> name"} {
		o = append(o, Enclose(name, want[name]))
	}
	page, err := HTML(inventedPlan(3, false), o...)
	if err != nil {
		t.Fatal(err)
	}
	got, err := ReadEnclosed(page)
	if err != nil || len(got) != 3 {
		t.Fatalf("%d files, %v", len(got), err)
	}
	for _, f := range got {
		if !bytes.Equal(f.Data, want[f.Name]) {
			t.Errorf("%s came back as %q", f.Name, f.Data)
		}
	}
	first := strings.Index(string(page), `"Data":"`) + len(`"Data":"`)
	changed := bytes.Clone(page)
	changed[first] ^= 1
	if _, err := ReadEnclosed(changed); err == nil {
		t.Error("a changed file was taken")
	}
	if _, err := ReadEnclosed(page[:first+5]); err == nil {
		t.Error("a page cut short was taken")
	}
	if got, err := ReadEnclosed([]byte("<p>nothing</p>")); err != nil || got != nil {
		t.Error("files out of nowhere")
	}
}

func TestPrintedNumbers(t *testing.T) {
	p := inventedPlan(12, false)
	page := func() []byte {
		b, err := HTML(p)
		if err != nil {
			t.Fatal(err)
		}
		return b
	}
	list, err := PrintedNumbers(page())
	if err != nil {
		t.Fatal(err)
	}
	if len(list) < 800 {
		t.Errorf("%d numbers", len(list))
	}
	find := func(l []PrintedNumber, n PrintedNumber) bool {
		for _, x := range l {
			if x == n {
				return true
			}
		}
		return false
	}
	scale := effectScale{p.Pool.Scale}
	for _, n := range []PrintedNumber{
		{"", "cost", strings.TrimPrefix(costText(p, p.Size.Chosen.Cost), "€")},
		{"What the studies say", "random effects", scale.text(*p.Pool.Random.Estimate)},
		{"What the studies say", "What the studies found, by year", scale.text(p.Pool.Random.Interval.Lower)},
	} {
		if !find(list, n) {
			t.Errorf("the list lacks %+v", n)
		}
	}
	again, _ := PrintedNumbers(page())
	differ := func(a, b []PrintedNumber) int {
		n := 0
		for i := range a {
			if i >= len(b) || a[i] != b[i] {
				n++
			}
		}
		return n
	}
	if differ(list, again) != 0 {
		t.Error("the same page gives another list")
	}
	*p.Pool.Random.Estimate += 0.02 // one printed digit
	if n := differ(list, must(PrintedNumbers(page()))); n == 0 {
		t.Error("a changed figure shows in no printed number")
	}
}

func must[T any](x T, err error) T {
	if err != nil {
		panic(err)
	}
	return x
}
