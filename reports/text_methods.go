package reports

import "footing/plan/result"

// TextMethods lists the methods by group, one line each.
func TextMethods(list []result.Method, o TextOptions) string {
	w := &textWriter{o: o}
	w.head("Methods", "footing methods NAME explains one")
	group := ""
	for _, m := range list {
		if m.Group != group {
			group = m.Group
			w.blank()
			w.line("%s", w.ink(termStrong, group))
		}
		const room = 32
		name := m.Name
		if columnsOf(name) >= room {
			w.line("%s", name)
			name = ""
		}
		w.wrapped(name, room, m.Words)
	}
	return w.String()
}

// TextMethod explains one method.
func TextMethod(m result.Method, o TextOptions) string {
	w := &textWriter{o: o}
	w.head(m.Name, m.Group)
	w.wrapped("", 0, m.Words)
	w.blank()
	w.wrapped("assumes", 12, m.Assumes)
	w.wrapped("misleads", 12, m.Misleads)
	w.wrapped("reference", 12, m.Reference)
	if m.Check != "" {
		w.wrapped("checked by", 12, m.Check)
	}
	return w.String()
}
