package show

import (
	"net/url"
	"regexp"
	"strings"
)

// SARIF is text in a SARIF log that shows itself and nothing else: readers of such
// logs make links of [text](target) even in plain text, and fill in {0}.
type SARIF string

// SARIFOf makes text of a string from a file.
func SARIFOf(s string) SARIF {
	out := strings.ReplaceAll(string(Clean(s)), "](", "] (")
	return SARIF(placeholder.ReplaceAllString(out, "{ $1"))
}

var placeholder = regexp.MustCompile(`\{(\d)`)

func sarifList(list []string) []SARIF {
	out := []SARIF{}
	for _, s := range list {
		out = append(out, SARIFOf(s))
	}
	return out
}

// URI is a relative reference as RFC 3986 has it: every byte that is not unreserved
// stands escaped, a colon too, which would end a scheme.
type URI string

// URIOf escapes a slash-separated path.
func URIOf(path string) URI {
	parts := strings.Split(path, "/")
	for i, p := range parts {
		parts[i] = strings.ReplaceAll(url.QueryEscape(p), "+", "%20")
	}
	return URI(strings.Join(parts, "/"))
}
