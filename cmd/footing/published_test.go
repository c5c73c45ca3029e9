package main

import (
	"bytes"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"footing/importers"
	"footing/plan/result"
	"footing/testdata/published"
)

// bcgSheet writes the thirteen trials of Colditz et al. 1994 as a spreadsheet of counts.
func bcgSheet(t *testing.T, dir string) string {
	t.Helper()
	d := published.Data("bcg")
	sheet := importers.Table{Sheet: "Trials", Title: "Thirteen trials", Date: "2026-01-01",
		Columns: columns("trial", "year", "events treatment", "n treatment", "events control", "n control")}
	labels, years := d.Labels("trial"), d.Column("year")
	a, n1, c, n2 := d.Column("cases_vaccinated"), d.Column("n_vaccinated"), d.Column("cases_control"), d.Column("n_control")
	for i := range labels {
		sheet.Rows = append(sheet.Rows, []any{labels[i], int(years[i]), a[i], n1[i], c[i], n2[i]})
	}
	var b bytes.Buffer
	if err := importers.WriteWorkbook(&b, sheet); err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(dir, "bcg.xlsx")
	if err := os.WriteFile(path, b.Bytes(), 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

// TestThirteenTrialsFromSheetToReport runs the published table the whole way: spreadsheet, pool, plan, report.
func TestThirteenTrialsFromSheetToReport(t *testing.T) {
	dir := t.TempDir()
	path := bcgSheet(t, dir)
	plan := "title: Thirteen trials\nevidence:\n  file: bcg.xlsx\n  higher is better: false\npool:\n  scale: risk-ratio\n  interval: normal\n" +
		"study:\n  control risk: {pool: control risk}\ntarget:\n  size for: pooled\n"
	planPath := filepath.Join(dir, "plan.yaml")
	if err := os.WriteFile(planPath, []byte(plan), 0o600); err != nil {
		t.Fatal(err)
	}
	out, errOut, code := execute(dir, []string{"plan", planPath})
	if code != 0 {
		t.Fatalf("exit code %d: %s%s", code, out, errOut)
	}
	data, err := os.ReadFile(filepath.Join(dir, "result.json"))
	if err != nil {
		t.Fatal(err)
	}
	var p result.Plan
	if err := json.Unmarshal(data, &p); err != nil {
		t.Fatal(err)
	}
	r := p.Pool.Random.Shown
	for id, x := range map[string]float64{"colditz1994-01": r.Estimate, "colditz1994-02": *r.Lower, "colditz1994-03": *r.Upper} {
		if v := published.Must(id); !v.Meets(x) {
			t.Errorf("%s: printed %s, in result.json %.6g", v.Quantity, v.Printed, x)
		}
	}
	html, err := os.ReadFile(filepath.Join(dir, "report.html"))
	if err != nil {
		t.Fatal(err)
	}
	for _, digits := range []string{"0.49", "0.34", "0.70"} {
		if !strings.Contains(string(html), digits) {
			t.Errorf("the report does not show %s", digits)
		}
	}

	out, errOut, code = execute(dir, []string{"pool", "--json", path})
	if code != 0 {
		t.Fatalf("exit code %d: %s", code, errOut)
	}
	var pool result.Pool
	if err := json.Unmarshal([]byte(out), &pool); err != nil {
		t.Fatal(err)
	}
	// Counts without a scale are pooled as log odds ratios.
	if v := published.Must("vanhouwelingen2002-01"); !v.Meets(*pool.Common.Estimate) {
		t.Errorf("common effect: printed %s, computed %.6g", v.Printed, *pool.Common.Estimate)
	}
	for _, e := range pool.Estimators {
		if e.Name != "maximum-likelihood" {
			continue
		}
		for id, x := range map[string]float64{"vanhouwelingen2002-05": *e.Estimate, "vanhouwelingen2002-06": *e.Intervals[0].StandardError, "vanhouwelingen2002-07": *e.TauSquared} {
			if v := published.Must(id); !v.Meets(x) {
				t.Errorf("%s: printed %s, computed %.6g", v.Quantity, v.Printed, x)
			}
		}
	}
	// The same fourfold tables by Mantel-Haenszel, against the sums worked in place.
	d := published.Data("bcg")
	num, den := 0.0, 0.0
	for i := range d.Rows {
		a, n1, c, n2 := d.Column("cases_vaccinated")[i], d.Column("n_vaccinated")[i], d.Column("cases_control")[i], d.Column("n_control")[i]
		num += a * (n2 - c) / (n1 + n2)
		den += c * (n1 - a) / (n1 + n2)
	}
	if got, want := *pool.MantelHaenszel.Estimate, math.Log(num/den); math.Abs(got-want) > 1e-12 {
		t.Errorf("Mantel-Haenszel %.12g, %.12g", got, want)
	}
}
