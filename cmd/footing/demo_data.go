package main

import (
	_ "embed"

	"footing/importers"
)

// The demonstration plans. Every study in them is invented.
var (
	//go:embed texts/continuous.yaml
	continuousPlan []byte
	//go:embed texts/binary.yaml
	binaryPlan []byte
)

func columns(headings ...string) []importers.NewColumn {
	out := make([]importers.NewColumn, len(headings))
	for i, h := range headings {
		out[i] = importers.NewColumn{Heading: h}
	}
	return out
}

// continuousEvidence is invented: eleven studies of rest breaks on night shifts, alertness from 0 to 100. Three rows give
// no means, as papers do: a t statistic, an effect with its interval, a p-value.
func continuousEvidence() importers.Table {
	const low, some, high = "low", "some concerns", "high"
	const note = "invented for demonstration"
	return importers.Table{
		Sheet: "Studies", Title: "Rest breaks on night shifts (invented data)", Date: "2026-11-03",
		Columns: columns("study", "year", "treatment n", "treatment mean", "treatment SD", "control n", "control mean", "control SD", "t",
			"estimate", "CI lower", "CI upper", "p", "direction", "risk of bias", "relevance", "notes"),
		Rows: [][]any{
			{"Bakery, early line", 2006, 14, 59.0, 12.0, 15, 49.6, 11.2, nil, nil, nil, nil, nil, nil, high, 0.6, note},
			{"Ferry crew, winter", 2009, 46, 60.1, 12.3, 44, 52.4, 11.5, nil, nil, nil, nil, nil, nil, low, 0.8, note},
			{"Call centre North", 2010, 22, nil, nil, 21, nil, nil, 1.74, nil, nil, nil, nil, nil, some, 0.7, note},
			{"Glassworks, furnace hall", 2012, 60, 56.1, 11.9, 58, 57.2, 11.7, nil, nil, nil, nil, nil, nil, low, 0.9, note},
			{"Parcel depot", 2013, 18, 57.1, 11.5, 18, 50.2, 11.2, nil, nil, nil, nil, nil, nil, some, 0.8, note},
			{"Hospital laundry", 2015, 75, 56.5, 11.9, 74, 55.8, 12.3, nil, nil, nil, nil, nil, nil, low, 1.0, note},
			{"Dairy, filling hall", 2016, 38, 53.7, 1.8, 40, 49.1, 11.6, nil, nil, nil, nil, nil, nil, low, 0.8, note},
			{"Toll station", 2018, 30, nil, nil, 29, nil, nil, nil, 0.54, 0.02, 1.06, nil, nil, some, 0.7, note},
			{"Printing works", 2019, 12, nil, nil, 13, nil, nil, nil, nil, nil, nil, "0.09", "favours treatment", high, 0.6, note},
			{"Airport cleaning", 2021, 54, 60.2, 11.8, 55, 53.2, 12.2, nil, nil, nil, nil, nil, nil, low, 0.9, note},
			{"Mill, two shifts", 2024, 90, 56.5, 11.4, 88, 54.5, 12.3, nil, nil, nil, nil, nil, nil, low, 1.0, note},
		},
	}
}

// binaryEvidence is invented: twelve studies of text reminders, missed appointments out of all.
func binaryEvidence() importers.Table {
	const low, some, high = "low", "some concerns", "high"
	const note = "invented for demonstration"
	return importers.Table{
		Sheet: "Studies", Title: "Text reminders and missed appointments (invented data)", Date: "2026-11-17",
		Columns: columns("study", "year", "treatment events", "treatment n", "control events", "control n", "risk of bias", "notes"),
		Rows: [][]any{
			{"Harbour clinic", 2009, 19, 160, 32, 160, some, note},
			{"Hill practice", 2010, 63, 420, 74, 420, low, note},
			{"Eye clinic East", 2011, 30, 210, 46, 211, low, note},
			{"Dental school", 2012, 135, 640, 154, 638, low, note},
			{"Station practice", 2013, 11, 95, 20, 98, high, note},
			{"Diabetes centre", 2014, 89, 380, 99, 383, low, note},
			{"Physio rooms", 2016, 42, 260, 58, 261, some, note},
			{"Skin clinic", 2017, 24, 150, 35, 150, some, note},
			{"Valley practice", 2019, 151, 820, 157, 823, low, note},
			{"Maternity unit", 2020, 80, 510, 92, 510, low, note},
			{"Youth clinic", 2022, 8, 70, 19, 66, high, note},
			{"Hearing centre", 2024, 69, 450, 80, 450, low, note},
		},
	}
}
