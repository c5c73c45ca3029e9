// Package importers reads evidence sheets, the spreadsheets in which people keep earlier studies: files to tables with
// cell addresses, headings to meanings, cells to numbers, rows to effect.Reported, and findings about the data on the way.
//
// Read is the way in. It tells file formats apart by their first bytes, finds the row of headings by itself, and knows
// the words of the trade in any order and spelling (Meanings lists what a column can mean, Options.Columns names what a
// heading doesn't). Numbers are read as printed: Unicode minus, thousands marks, decimal comma, percent, "<.001"; every
// figure keeps the address of its cell. A cell may hold several figures ("12.3 (4.5)", "0.45 [0.20, 0.71]", "12/48",
// "t(45) = 2.3"), headings may stand in two rows, cells may be merged, and each group of a study may have a row of its own.
//
// A sheet is read whole or not at all: a workbook that is cut short or damaged is refused, since a lost prior study
// would change the answer in silence. What is wrong in single cells becomes a finding (with file, cell, text, and what
// would mend it) and reading goes on. Kinds of findings are stable names between releases.
//
// Compare holds two extractions of the same studies side by side.
//
// The write side makes new sheets: NewSheet gives the headings for an outcome, WriteWorkbook and WriteText write them.
package importers
