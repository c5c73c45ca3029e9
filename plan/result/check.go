package result

// Check is a report computed again from the plan and the evidence inside it: the document of `footing check --json`.
type Check struct {
	Schema     string           `json:"schema"` // "footing/check/1"
	Tool       Tool             `json:"tool"`   // that computed it again
	Report     string           `json:"report"` // file name
	Plan       CheckedFile      `json:"plan"`
	Evidence   *CheckedFile     `json:"evidence"`   // null for a plan without evidence
	Editions   *CheckedFile     `json:"editions"`   // the kept editions, packed; null where the plan had none
	Numbers    int              `json:"numbers"`    // printed in the report
	Reproduced int              `json:"reproduced"` // of these, with the same digits
	Differs    []PrintedDiffers `json:"differs"`
}

// CheckedFile is a file inside the report.
type CheckedFile struct {
	Name   string `json:"name"`
	SHA256 string `json:"sha256"`
}

// PrintedDiffers is a printed number that does not come out again. Printed or Computed is "" where the number stands in only one of the two.
type PrintedDiffers struct {
	Section  string `json:"section"`
	Label    string `json:"label"` // of its row, its drawing, or the words around it
	Printed  string `json:"printed"`
	Computed string `json:"computed"`
}
