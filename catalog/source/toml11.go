package source

import "bytes"

// The parsers read TOML 1.1, but editors, formatters and older tools in the field
// read 1.0. What only 1.1 knows is refused, so that a plan that passes here opens
// everywhere.

// refuseNewEscapes reports \e and \x in a quoted string or key.
func (x *indexer) refuseNewEscapes(at Place) {
	text := x.file.Src[at.From:at.To]
	if text[0] != '"' {
		return
	}
	for i := 0; ; i += 2 {
		step := bytes.IndexByte(text[i:], '\\')
		if step < 0 {
			return
		}
		i += step
		if c := text[i+1]; c == 'e' || c == 'x' {
			from := int(at.From) + i
			x.newSyntax(x.file.stretch(from, from+2),
				`the escape \`+string(c)+` is read by few programs`, `write \u001B in place of \e, \u00HH in place of \xHH`)
		}
	}
}

// refuseNewInline reports an inline table that runs over lines, and a comma after
// its last key, which ends at the offset.
func (x *indexer) refuseNewInline(table Place, lastEnd int, lines bool) {
	f := x.file
	if lines {
		x.newSyntax(f.stretch(int(table.From), int(table.From)+1),
			"the table in braces runs over several lines", "write it on one line, or as a [table] of its own")
	}
	for at := lastEnd; at < int(table.To)-1; {
		at = f.skip(at, " \t\r\n")
		if f.Src[at] == ',' {
			x.newSyntax(f.stretch(at, at+1), "a comma follows the last key of the table in braces", "take the comma out")
			return
		}
		if f.Src[at] != '#' {
			return
		}
		at += bytes.IndexByte(f.Src[at:], '\n')
	}
}

func (x *indexer) newSyntax(at Place, says, do string) {
	x.report(Problem{Kind: Syntax, At: at, Says: says + " (new in TOML 1.1)", Do: do})
}
