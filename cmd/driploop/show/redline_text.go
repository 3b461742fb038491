package show

import "strings"

// Text lays the redline out for a terminal or a log.
func (p *RedlinePage) Text(page Page) []byte {
	s := &sheet{page: page}
	how := strong
	if strings.HasPrefix(p.Verdict, "Held") {
		how = stop
	}
	s.para("", how, Clean(p.Verdict))
	for _, l := range p.Lead {
		s.para("", plain, Clean(l))
	}
	for _, b := range p.Blocks {
		s.gap()
		s.para("", fine, Clean(b.head))
		for _, fold := range []bool{false, true} {
			for _, it := range b.items {
				if it.fold == fold {
					s.redItem(it)
				}
			}
		}
	}
	s.gap()
	s.para("", faint, Clean(p.Seen))
	return []byte(s.b.String())
}

// redTag is how wide the word before a line is.
const redTag = 9

// redItem writes a line behind its word; on a narrow page the text hangs under it.
func (s *sheet) redItem(it redItem) {
	tag := it.tag + strings.Repeat(" ", max(1, redTag-len(it.tag)))
	how := strong
	if it.fold {
		how = faint
	}
	indent := redTag + 2
	if s.page.Width < 60 {
		indent = 4
		tag = it.tag + "  "
	}
	s.hang(Term("  "+tag), how, indent, plain, Clean(it.text))
}
