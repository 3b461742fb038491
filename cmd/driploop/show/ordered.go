package show

import (
	"fmt"
	"strconv"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// Ordered is an order as the clerk sent it, beside what was planned.
type Ordered struct {
	PO, Vendor string
	Sent       unit.Date // zero where it is not sent yet
	To         string    // the shelf it is delivered to, or ""
	Lines      []OrderedLine
	Dropped    []OrderedLine // lines that were planned and are not ordered
	File       string
}

// OrderedLine is one line. Of what is cut to length Packs is 1, the pack is the length
// and the prices are for a metre.
type OrderedLine struct {
	Offer          *catalog.Offer
	Parts          string
	Pack           catalog.Pack
	Packs, Planned int64
	PlannedLength  unit.MM // of what is cut to length
	Price, Listed  unit.Money
	Due, Needed    unit.Date // promised, and needed; zero where nobody says
	Jobs           []string
	Note           string
}

// PackPrice is the price of one pack.
func (l *OrderedLine) PackPrice() unit.Money {
	if !l.Offer.ToLength() {
		return l.Price
	}
	return l.Price.Times(l.Pack.Length)
}

// TOML writes the order's file.
func (o *Ordered) TOML() []byte {
	b := &paste{}
	sent := ""
	if !o.Sent.IsZero() {
		sent = o.Sent.String()
	}
	b.line("[order]")
	b.keys([][2]string{{"vendor", tomlString(o.Vendor)}, {"sent", sent}, {"to", tomlWord(o.To)}})
	for i := range o.Lines {
		b.line("")
		o.Lines[i].toml(b)
	}
	return []byte(b.out.String())
}

func (l *OrderedLine) toml(b *paste) {
	pack := strconv.Itoa(l.Pack.Count)
	if l.Pack.Length > 0 {
		pack = tomlString(l.Pack.Length.String())
	}
	part, brings, due, jobs := tomlWord(l.Offer.Part.V), "", "", ""
	if len(l.Offer.Brings) > 0 {
		var in []string
		for _, p := range l.Offer.Brings {
			in = append(in, p.Name+" = "+strconv.Itoa(p.Val.V))
		}
		brings = "{" + strings.Join(in, ", ") + "}"
	}
	if !l.Due.IsZero() {
		due = l.Due.String()
	}
	if len(l.Jobs) > 0 {
		var in []string
		for _, j := range l.Jobs {
			in = append(in, tomlString(j))
		}
		jobs = "[" + strings.Join(in, ", ") + "]"
	}
	if l.Note != "" {
		b.comment(l.Note)
	}
	b.row("line", [2]string{"part", part}, [2]string{"brings", brings}, [2]string{"code", tomlWord(l.Offer.Code.V)}, [2]string{"pack", pack},
		[2]string{"packs", strconv.FormatInt(l.Packs, 10)}, [2]string{"price", tomlString(l.PackPrice().String())}, [2]string{"due", due}, [2]string{"jobs", jobs})
}

// OrderedText says what was read of each order and how it differs from what was
// planned.
func OrderedText(page Page, orders []*Ordered, moved []string) ([]byte, error) {
	d := &Document{Title: "Orders taken back"}
	if len(moved) > 0 {
		d.Blocks = append(d.Blocks, Block{Head: "SINCE THE WORKBOOK WAS MADE", Items: bullets(moved)})
	}
	for _, o := range orders {
		text := fmt.Sprintf("%s to %s", words(len(o.Lines), "line", "lines"), o.Vendor)
		if o.Sent.IsZero() {
			text += "; it has no day on which it was sent, and so it counts as a wish and not as supply"
		} else {
			text += ", sent on " + o.Sent.String()
		}
		if o.File != "" {
			text += "; in " + o.File
		}
		b := Block{Head: o.PO, Text: []string{text + "."}}
		for i := range o.Lines {
			if s := o.Lines[i].differs(); s != "" {
				b.Items = append(b.Items, Item{o.Lines[i].Parts, s})
			}
		}
		for _, l := range o.Dropped {
			b.Items = append(b.Items, Item{l.Parts, "planned, and not ordered"})
		}
		if b.Items == nil {
			b.Text = append(b.Text, "All as it was planned.")
		}
		d.Blocks = append(d.Blocks, b)
	}
	return d.Text(page)
}

func bullets(texts []string) []Item {
	var out []Item
	for _, t := range texts {
		out = append(out, Item{"", t})
	}
	return out
}

// differs says what is other than planned, and what comes too late.
func (l *OrderedLine) differs() string {
	var out []string
	if l.Packs != l.Planned {
		out = append(out, fmt.Sprintf("%d ordered, %d planned", l.Packs, l.Planned))
	}
	if l.PlannedLength > 0 && l.PlannedLength != l.Pack.Length {
		out = append(out, fmt.Sprintf("%s ordered, %s planned", l.Pack.Length, l.PlannedLength))
	}
	if l.Price != l.Listed {
		out = append(out, fmt.Sprintf("%s confirmed, %s on the list", l.Price, l.Listed))
	}
	switch {
	case l.Due.IsZero() && !l.Needed.IsZero():
		out = append(out, "no day was promised, and it is needed by "+l.Needed.String())
	case !l.Due.IsZero() && !l.Needed.IsZero() && l.Due.After(l.Needed):
		out = append(out, fmt.Sprintf("promised for %s, needed by %s", l.Due, l.Needed))
	}
	return strings.Join(out, "; ")
}
