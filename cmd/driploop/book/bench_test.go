package book

import (
	"bytes"
	"fmt"
	"testing"
	"time"

	"github.com/xuri/excelize/v2"

	"driploop/bom"
	"driploop/catalog/unit"
)

// benchRows is how many lines of an order are written.
const benchRows = 10_000

// long is an order of many lines with everything that an order has.
func long() bom.Sheet {
	s := order()
	s.Rows = nil
	for i := range benchRows {
		price := unit.Money(10_000 + i*100)
		s.Row(fmt.Sprint("CX-", i), bom.CountCell(int64(i)), bom.WordsCell(fmt.Sprint("CX-", i)), bom.CountCell(3), bom.MoneyCell(price),
			bom.MoneyCell(price*3).By(bom.Live{How: bom.LiveProduct, Of: []string{"packs", "unit price"}}), bom.LengthCell(unit.MM(i)))
	}
	s.SumAll("total", "together", "total")
	return s
}

// BenchmarkWrite writes a long order and says how many times longer that takes than
// the library's stream takes for the bare cells of the same table, blanks left out.
func BenchmarkWrite(b *testing.B) {
	sheet := long()
	var whole, cells time.Duration
	for b.Loop() {
		since := time.Now()
		if _, err := Write([]bom.Sheet{sheet}, Meta{Today: today}); err != nil {
			b.Fatal(err)
		}
		whole += time.Since(since)
		b.StopTimer()
		since = time.Now()
		bareCells(b, sheet)
		cells += time.Since(since)
		b.StartTimer()
	}
	b.ReportMetric(float64(whole)/float64(cells), "times-bare")
}

// bareCells streams the values of a table and nothing else.
func bareCells(b *testing.B, s bom.Sheet) {
	f := excelize.NewFile()
	defer f.Close()
	w, err := f.NewStreamWriter("Sheet1")
	if err != nil {
		b.Fatal(err)
	}
	l := &layout{Sheet: &s}
	for i, r := range s.Rows {
		row := make([]any, len(s.Columns)+1)
		for at, c := range r.Cells {
			switch c.Kind {
			case bom.KindBlank:
			case bom.KindWords:
				row[at] = c.Words
			default:
				row[at] = l.number(c)
			}
		}
		row[len(s.Columns)] = r.Key
		if err := w.SetRow(ref(1, i+1), row); err != nil {
			b.Fatal(err)
		}
	}
	if err := w.Flush(); err != nil {
		b.Fatal(err)
	}
	var out bytes.Buffer
	if err := f.Write(&out); err != nil {
		b.Fatal(err)
	}
}
