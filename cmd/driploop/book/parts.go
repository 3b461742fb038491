package book

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strconv"
	"strings"
)

// element is the start of an element of XML.
type element struct {
	name string
	attr map[string]string // by local name
}

func elementOf(t xml.StartElement) element {
	e := element{t.Name.Local, map[string]string{}}
	for _, a := range t.Attr {
		e.attr[a.Name.Local] = a.Value
	}
	return e
}

// elements calls found for the start of every element.
func elements(text []byte, found func(element) error) error {
	return tokens(text, func(t xml.Token) error {
		if start, ok := t.(xml.StartElement); ok {
			return found(elementOf(start))
		}
		return nil
	})
}

// tokens calls found for every token. A part that defines things of its own, as
// attacks on readers do, is refused.
func tokens(text []byte, found func(xml.Token) error) error {
	d := xml.NewDecoder(bytes.NewReader(text))
	for {
		t, err := d.Token()
		if errors.Is(err, io.EOF) {
			return nil
		}
		if err != nil {
			return fmt.Errorf("the file is damaged: %w", err)
		}
		if _, definition := t.(xml.Directive); definition {
			return errors.New("the file is no workbook: a part has definitions of its own")
		}
		if err := found(t); err != nil {
			return err
		}
	}
}

// readTexts reads the table of texts. Parts of a text that are formatted apart are
// joined; readings printed above it are left out.
func readTexts(text []byte) ([]string, error) {
	var out []string
	var now strings.Builder
	inText, above := false, 0
	err := tokens(text, func(t xml.Token) error {
		switch t := t.(type) {
		case xml.StartElement:
			switch t.Name.Local {
			case "si":
				now.Reset()
			case "t":
				inText = above == 0
			case "rPh":
				above++
			}
		case xml.EndElement:
			switch t.Name.Local {
			case "si":
				out = append(out, unescape(now.String()))
			case "t":
				inText = false
			case "rPh":
				above--
			}
		case xml.CharData:
			if inText {
				now.Write(t)
			}
		}
		return nil
	})
	return out, err
}

// escapes are how the format writes characters that XML has not.
var escapes = regexp.MustCompile(`_x([0-9A-Fa-f]{4})_`)

func unescape(s string) string {
	if !strings.Contains(s, "_x") {
		return s
	}
	return escapes.ReplaceAllStringFunc(s, func(e string) string {
		n, err := strconv.ParseUint(e[2:6], 16, 16)
		if err != nil {
			return e
		}
		return string(rune(n))
	})
}
