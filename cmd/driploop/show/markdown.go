package show

import "strings"

// MD is Markdown on one line that shows its text and does nothing else: no link,
// picture, HTML, heading or list comes of it, nobody is mentioned and no issue
// referred to. It may stand in a paragraph, a list and the cell of a table.
type MD string

// Prose makes Markdown of a sentence. Words that a code host would make a link, a
// mention or a reference of even where they are escaped stand as code.
func Prose(s string) MD {
	words := strings.Fields(s)
	for i, w := range words {
		c := string(Clean(w))
		switch {
		case linked(c):
			words[i] = string(Code(w))
		case i == 0:
			words[i] = escapeFirst(escape(c))
		default:
			words[i] = escape(c)
		}
	}
	return MD(strings.Join(words, " "))
}

// Code makes a code span. Its fence is longer than any run of backticks inside. A
// bar stands outside, as an entity, for in a table a code span does not hide it.
func Code(s string) MD {
	parts := strings.Split(string(Clean(strings.Join(strings.Fields(s), " "))), "|")
	for i, p := range parts {
		parts[i] = span(p)
	}
	return MD(strings.Join(parts, bar))
}

const bar = "&#124;"

func span(s string) string {
	if s == "" {
		return ""
	}
	fence := strings.Repeat("`", longestRun(s, '`')+1)
	if strings.HasPrefix(s, "`") || strings.HasSuffix(s, "`") || strings.HasPrefix(s, " ") && strings.HasSuffix(s, " ") && strings.Trim(s, " ") != "" {
		s = " " + s + " "
	}
	return fence + s + fence
}

func longestRun(s string, of rune) int {
	longest, run := 0, 0
	for _, r := range s {
		if r != of {
			run = 0
			continue
		}
		run++
		longest = max(longest, run)
	}
	return longest
}

// linked reports a word that code hosts turn into a link or picture by what it says,
// whatever is escaped in it: addresses, mentions, references to issues and
// revisions, names of little pictures between colons.
func linked(w string) bool {
	low := strings.ToLower(w)
	return strings.ContainsAny(w, "@#") || strings.Contains(low, ":/") || strings.Contains(low, "www.") ||
		strings.Contains(low, "mailto:") || strings.Contains(low, "gh-") || strings.Count(w, ":") > 1 || isRevision(low)
}

// isRevision reports what could be the name of a commit.
func isRevision(w string) bool {
	w = strings.Trim(w, ".,;:()")
	return len(w) >= 7 && strings.Trim(w, "0123456789abcdef") == ""
}

// escape puts a backslash before what has a meaning inside a line.
func escape(word string) string {
	var b strings.Builder
	for _, r := range word {
		switch {
		case r == '|':
			b.WriteString(bar)
			continue
		case strings.ContainsRune("\\`*_~<[]&$", r):
			b.WriteByte('\\')
		}
		b.WriteRune(r)
	}
	return b.String()
}

// escapeFirst escapes what has a meaning at the start of a line: quotes, bullets,
// numbers of a list, underlines of a heading.
func escapeFirst(word string) string {
	if strings.HasPrefix(word, ">") || strings.Trim(word, "-") == "" || strings.Trim(word, "+") == "" || strings.Trim(word, "=") == "" {
		return `\` + word
	}
	if mark := strings.TrimLeft(word, "0123456789"); mark == "." || mark == ")" {
		return strings.TrimSuffix(word, mark) + `\` + mark
	}
	return word
}
