package reports

// words writes the wording to be taken over: for the protocol, for a results paper, for a grant.
func (w writer) words() *section {
	if w.p.Size.Chosen == nil {
		return nil
	}
	t := WordsOf(w.p)
	s := &section{ID: "words", Title: "Words for the protocol", Lead: "To be taken over as they stand once every assumption in them has a source or a reason."}
	if w.p.Invented {
		s.Lead = "The studies behind these words are invented, for demonstration: they show the wording and are not to be used."
	}
	for _, part := range []struct{ head, text, by string }{
		{"For the protocol", t.Protocol, "Written from the items of SPIRIT 2025 (19), CONSORT 2025 (16a) and DELTA2: first the effect and where it comes from, then the size."},
		{"For the results paper", t.Results, ""},
		{"For a grant application", t.Grant, ""},
	} {
		if part.text == "" {
			continue
		}
		b := block{Heading: part.head, Words: []string{part.text}}
		if part.by != "" {
			b.Margin = []note{{"Items", part.by}}
		}
		s.Blocks = append(s.Blocks, b)
	}
	if len(s.Blocks) == 0 {
		return nil
	}
	return s
}
