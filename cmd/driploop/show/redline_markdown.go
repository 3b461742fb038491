package show

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"strings"
)

// What a comment keeps free for its end, and the most that its first lines take.
const (
	mostLead     = 6000
	redEnd       = 1200
	mostFoldLead = 160
)

// Markdown lays the redline out as one comment of a pull request: the verdict first,
// what asks for an answer in the open, the rest folded. It is never longer than
// MostMarkdown, whatever the change: what does not fit is counted. The mark stands at
// the end.
func (p *RedlinePage) Markdown(mark string) []byte {
	m := &inspectMD{room: MostMarkdown - redEnd - len(p.Seen)*2}
	m.add("## " + string(Prose(clip(p.Verdict, mostText))) + "\n")
	for _, l := range p.Lead {
		line := "\n" + string(Prose(clip(l, mostText))) + "\n"
		if MostMarkdown-m.room+len(line) > mostLead+redEnd {
			break
		}
		m.add(line)
	}
	open, folded := p.fitted(m.room)
	for i, b := range p.Blocks {
		if open[i] == 0 && folded[i] == 0 {
			continue
		}
		b.markdown(m, open[i], folded[i])
	}
	if left := p.left(open, folded); left > 0 {
		m.add(fmt.Sprintf("\nand %d more that do not fit here; the text and JSON of the run have them all\n", left))
	}
	m.room += redEnd
	m.add("\n" + string(Prose(clip(p.Seen, 2*mostText))) + "\n\n" + RedlineMarker(mark) + "\n")
	return []byte(m.b.String())
}

// RedlineMarker is the HTML comment by which a comment of ours is found again, to be
// written anew. Nothing of a file goes into it, and nothing from a file can look like
// it: every "<" from a file is escaped, so no HTML comment comes of one. Somebody who
// may comment can still copy it: whoever looks for it also asks who wrote it.
func RedlineMarker(mark string) string {
	sum := sha256.Sum256([]byte("driploop redline\x00" + mark))
	return "<!-- driploop-redline " + hex.EncodeToString(sum[:])[:24] + " -->"
}

// lineMD is an item as a line of a list.
func (it *redItem) lineMD() string {
	return "- " + it.tag + ": " + string(Prose(clip(it.text, mostText))) + "\n"
}

// fitted says how many open and how many folded lines of each block there is room for:
// what is open goes first, block by block, for the worst come first.
func (p *RedlinePage) fitted(room int) (open, folded []int) {
	open, folded = make([]int, len(p.Blocks)), make([]int, len(p.Blocks))
	headed := make([]bool, len(p.Blocks))
	for _, fold := range []bool{false, true} {
		for i, b := range p.Blocks {
			framed := false
			for j := range b.items {
				it := &b.items[j]
				if it.fold != fold {
					continue
				}
				need := len(it.lineMD())
				if !headed[i] {
					need += len(b.headMD())
				}
				if fold && !framed {
					need += mostFoldLead
				}
				if need > room {
					break
				}
				room -= need
				headed[i] = true
				if fold {
					framed = true
					folded[i]++
				} else {
					open[i]++
				}
			}
		}
	}
	return open, folded
}

func (p *RedlinePage) left(open, folded []int) int {
	n := 0
	for i, b := range p.Blocks {
		n += len(b.items) - open[i] - folded[i]
	}
	return n
}

func (b *redBlock) headMD() string {
	return "\n#### " + string(Prose(clip(b.head, 2*mostName))) + "\n\n"
}

func (b *redBlock) markdown(m *inspectMD, open, folded int) {
	m.add(b.headMD())
	for _, fold := range []bool{false, true} {
		var lines []string
		for i := range b.items {
			if b.items[i].fold == fold {
				lines = append(lines, b.items[i].lineMD())
			}
		}
		if !fold {
			m.add(strings.Join(lines[:open], ""))
		} else if folded > 0 {
			m.fold(words(folded, "more line", "more lines"), func() { m.add(strings.Join(lines[:folded], "")) })
		}
	}
}
