package plan

// poolNuisance pools what the sheet says about the control groups.
func poolNuisance(e *EvidenceRead) map[string]Assumed { return map[string]Assumed{} }
