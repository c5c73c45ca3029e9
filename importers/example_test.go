package importers_test

import (
	"fmt"
	"os"
	"path/filepath"

	"footing/importers"
)

// An invented sheet with a title, headings in the field's own words, a decimal comma and a cell that is no number.
func ExampleRead() {
	dir, err := os.MkdirTemp("", "example")
	if err != nil {
		fmt.Println(err)
		return
	}
	defer os.RemoveAll(dir)
	file := filepath.Join(dir, "breaks.csv")
	sheet := "Rest breaks (invented);;\nAuthor (year);Effect size;Std. error\nAdams (2009);0,31;0,12\nBrown (2011);about 0,2;0,15\n"
	if err := os.WriteFile(file, []byte(sheet), 0o600); err != nil {
		fmt.Println(err)
		return
	}

	s, err := importers.Read(file, importers.Options{Name: "breaks.csv"})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, h := range s.Headings {
		fmt.Printf("%s %q: %s\n", h.Cell, h.Typed, h.Meaning)
	}
	for _, r := range s.Records {
		fmt.Println(r.Study, r.Year, r.Reported().Estimate.Given, r.Reported().Estimate.Value, r.Reported().StandardError.Value)
	}
	for _, f := range s.Findings {
		fmt.Println(f.Severity, f)
	}
	// Output:
	// A2 "Author (year)": study
	// B2 "Effect size": estimate
	// C2 "Std. error": standard error
	// Adams (2009) 2009 true 0.31 0.12
	// Brown (2011) 2011 false 0 0.15
	// note breaks.csv, B3: numbers are read with a decimal comma
	// error breaks.csv, B4: "about 0,2" stands where a number (estimate) should; the cell is not used; type the number alone, or leave the cell empty if it is not reported
}
