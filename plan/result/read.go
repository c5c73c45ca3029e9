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
