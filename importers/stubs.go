package importers

import "footing/internal/finding"

func openCompound(path string, data []byte, opt Options) (*gridSource, error) {
	at := finding.Place{File: path}
	return nil, problem("file-not-a-sheet", at, "this is an older binary workbook (.xls) or a workbook with a password, which can't be read here", "save it as .xlsx without a password in your spreadsheet program")
}

func openODS(p *parts, opt Options) (*gridSource, error) {
	return nil, problem("file-not-a-sheet", p.at(), "this is an OpenDocument file, which can't be read here", "save it as .xlsx or .csv in your spreadsheet program")
}
