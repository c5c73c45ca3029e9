package result

// Reading is how an evidence sheet was understood: the document of `footing read --json`.
type Reading struct {
	Schema   string    `json:"schema"` // "footing/read/1"
	Tool     Tool      `json:"tool"`
	Evidence Evidence  `json:"evidence"`
	Scale    ScaleInfo `json:"scale"`
	Studies  []Study   `json:"studies"` // every record in sheet order, used or not
	Findings []Finding `json:"findings"`
}

// Manual is the list of methods: the document of `footing methods --json`.
type Manual struct {
	Schema  string   `json:"schema"` // "footing/methods/1"
	Tool    Tool     `json:"tool"`
	Methods []Method `json:"methods"`
}

// Method is one entry of the manual.
type Method struct {
	Name      string   `json:"name"` // token of plan files and results
	Words     string   `json:"words"`
	Group     string   `json:"group"` // "pooling", "small studies", ...
	Assumes   string   `json:"assumes"`
	Misleads  string   `json:"misleads"`
	Reference string   `json:"reference"`
	Check     string   `json:"check"` // the published value that it is held against
	Also      []string `json:"also"`  // other names that people look it up by
}

// Extractions holds two extractions of the same studies side by side: the document of `footing read --against --json`.
type Extractions struct {
	Schema      string                 `json:"schema"` // "footing/extractions/1"
	Tool        Tool                   `json:"tool"`
	A           string                 `json:"a"` // file names
	B           string                 `json:"b"`
	Studies     int                    `json:"studies"`  // in both
	Compared    int                    `json:"compared"` // figures and judgements that at least one sheet states for a study in both
	Equal       int                    `json:"equal"`
	Differences []ExtractionDifference `json:"differences"`
	OnlyA       []OnlyInOne            `json:"onlyA"`
	OnlyB       []OnlyInOne            `json:"onlyB"`
}

// ExtractionDifference is one figure or judgement on which the sheets disagree.
type ExtractionDifference struct {
	Study   string `json:"study"`
	Meaning string `json:"meaning"`
	CellA   string `json:"cellA"`
	TextA   string `json:"textA"`
	CellB   string `json:"cellB"`
	TextB   string `json:"textB"`
}

// OnlyInOne is a study that only one sheet has.
type OnlyInOne struct {
	Study string `json:"study"`
	Row   int    `json:"row"`
	Near  string `json:"near"` // label in the other sheet that is nearly the same
}
