package main

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"golang.org/x/net/html"
)

func init() { readers["html"] = inHTML }

// pageElements are those that a page of ours is made of.
var pageElements = strings.Fields("html head meta title style body h1 h2 h3 p span div strong ul li table tbody tr th td")

// inHTML reads a page as a browser does: it finds no element, attribute or address
// that is not ours.
func inHTML(page string) string {
	doc, err := html.Parse(strings.NewReader(page))
	if err != nil {
		return err.Error()
	}
	styles := 0
	for n := range doc.Descendants() {
		if n.Type == html.CommentNode {
			return "it has a comment: " + n.Data
		}
		if n.Type != html.ElementNode {
			continue
		}
		if !slices.Contains(pageElements, n.Data) {
			return "it has the element " + n.Data
		}
		if n.Data == "style" {
			styles++
		}
		for _, a := range n.Attr {
			if !slices.Contains([]string{"lang", "charset", "name", "content", "class"}, a.Key) {
				return fmt.Sprintf("%s has the attribute %s", n.Data, a.Key)
			}
		}
	}
	if styles != 1 {
		return fmt.Sprintf("it has %d style sheets", styles)
	}
	return inLog(page)
}

func TestHTMLReader(t *testing.T) {
	const page = "<!DOCTYPE html><html><head><style>p{}</style></head><body>%s</body></html>"
	if bad := inHTML(fmt.Sprintf(page, "<p class=x>a &lt;b&gt;</p>")); bad != "" {
		t.Error(bad)
	}
	for _, body := range []string{"<script>x</script>", "<img src=x>", "<p onclick=x>", "<a href=x>y</a>", "<!-- x -->", "<style>x</style>", "<p>\u202e</p>", "\n::error::x"} {
		if inHTML(fmt.Sprintf(page, body)) == "" {
			t.Errorf("%s passes", body)
		}
	}
}
