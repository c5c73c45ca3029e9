package importers

import "maps"

// kinds lists every kind of finding that this package makes, with what it means.
var kinds = map[string]string{
	// The file as a whole.
	"file-not-found":       "there is no file of that name",
	"file-is-folder":       "the name is that of a folder",
	"file-unreadable":      "the file can't be opened or read",
	"file-empty":           "the file holds nothing",
	"file-too-large":       "the file, packed or unpacked, is beyond the limit of an evidence sheet",
	"file-not-a-sheet":     "the file is no spreadsheet, or one of a kind that can't be read",
	"file-encrypted":       "the file is protected by a password",
	"file-damaged":         "the workbook is cut short or inconsistent, so a study could be lost",
	"text-damaged":         "quote marks of a text file don't match, so its cells can't be told apart",
	"encoding-unknown":     "the named text encoding doesn't exist",
	"encoding-damaged":     "bytes of the file don't belong to its encoding",
	"encoding-guessed":     "the text is not UTF-8 and was read as Windows-1252",
	"delimiter-unusable":   "the named delimiter can't be one",
	"format-not-writable":  "files of this kind can be read but not added to",
	"adding-changes-data":  "adding rows would change how others are read",
	"nothing-to-add":       "the sheet of new studies has no study",
	"study-there-already":  "the study to be added is in the sheet already",
	"column-does-not-fit":  "a column of the new studies has no counterpart",
	"sheet-not-found":      "the workbook has no sheet of that name",
	"sheet-empty":          "the sheet holds no cells",
	"sheet-too-large":      "the sheet has too many rows or cells for an evidence sheet",
	"sheet-chosen":         "of several sheets one was read",
	"too-many-columns":     "the sheet has too many columns for an evidence sheet",
	"no-headings":          "no row of headings was found",
	"no-records":           "there are headings but no studies",
	"meaning-unknown":      "columns: names a meaning that doesn't exist",
	"heading-not-found":    "columns: names a heading that the sheet doesn't have",
	"heading-mapped-twice": "columns: gives one heading two meanings",

	// Headings and layout.
	"heading-not-understood":  "the column is kept as a note",
	"heading-half-understood": "a figure was recognised in the heading, other words were not",
	"heading-near-miss":       "the heading is probably a slip of the pen",
	"two-columns-one-meaning": "two headings mean the same; the first is used",
	"two-heading-rows":        "the headings stand in two rows and were joined",
	"repeated-headings":       "a row repeats the headings",
	"arms-by-number":          "the groups are named 1 and 2, t and c, ...: the first is the treatment",
	"one-row-per-group":       "each row holds one group; rows were joined to comparisons",
	"groups-not-paired":       "the rows of a study can't be joined to comparisons",
	"shared-control":          "several groups are compared with one control group",
	"study-column-guessed":    "no heading names the studies; the first column of words was taken",
	"d-as-printed":            "standardized differences headed d are used without a small-sample correction",
	"merged-cells":            "cells under merged cells were given their value",
	"hidden-rows":             "rows hidden in the spreadsheet were read",
	"hidden-column":           "a hidden column was read",
	"formulas":                "the values stored with formulas were used",

	// Rows.
	"second-table":            "the sheet holds a second table, which was not read",
	"total-row":               "a row of totals was passed over",
	"row-without-figures":     "a row without figures was passed over",
	"row-longer-than-heading": "a row of a text file was cut into too many cells",
	"no-study-label":          "a row has figures but no label",
	"label-from-above":        "a row without a label was taken for the study above it",
	"duplicate-row":           "two rows have the same figures",
	"several-rows-one-study":  "one label stands before several rows",
	"same-control-group":      "two rows of a study have the same control group",
	"mean-impossible-for-n":   "whole-number answers of that many people can't have this mean",
	"sd-looks-like-se":        "an SD is so small that it is probably a standard error",

	// Cells.
	"text-in-number-cell":   "the cell should hold a number and holds words",
	"date-in-number-cell":   "a spreadsheet program made a date of a figure",
	"error-cell":            "the cell holds an error of a formula",
	"formula-without-value": "the formula's value was not stored",
	"ambiguous-comma":       "a comma may be a decimal or a thousands mark",
	"mixed-decimal-marks":   "some numbers have a decimal comma, others a point",
	"decimal-comma":         "numbers were read with a decimal comma",
	"number-out-of-range":   "the number is too large to compute with",
	"value-out-of-range":    "the figure can't have this value",
	"count-not-whole":       "a number of people or events is not whole",
	"p-of-zero":             "a p printed as 0 was read as a bound",
	"percent-as-number":     "shares above 1 were read as percentages",
	"percent-sign":          "a number with a percent sign was read as a hundredth",
	"sign-behind-number":    "stars or footnote signs were left off a number",
	"second-figure-unclear": "the number in brackets may be an SD or a standard error",
	"limits-in-wrong-order": "the lower limit is above the upper one",
	"year-not-understood":   "the cell holds no year",

	// Judgements: the name of the meaning, and that the word in the cell is not known.
	"risk-of-bias-not-understood":     "use low, some concerns or high",
	"direction-not-understood":        "use favours treatment or favours control",
	"sides-not-understood":            "use one or two",
	"scale-not-understood":            "use the name of an effect scale",
	"higher-is-better-not-understood": "use yes or no",
}

// Kinds lists every kind of finding that the package makes, with what it means. The names are stable between releases.
func Kinds() map[string]string { return maps.Clone(kinds) }
