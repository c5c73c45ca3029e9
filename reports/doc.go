// Package reports renders a result for people: the HTML report and its figures, the workbook, the document text and
// the terminal text. It computes no statistic; what it prints stands in package plan/result.
//
// A figure is a scene of marks (figure_scene.go) with a text alternative and a table of its numbers. The same scene is
// written into the page, where the style sheet gives its inks their colours, as an SVG file, and as a PNG picture.
// Every text goes through html/template: nothing that a person typed is ever marked as safe, and cleanText takes out
// what would not show or would turn the text around it. number.go holds how numbers are written.
package reports
