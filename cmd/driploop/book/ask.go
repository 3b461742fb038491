package book

import (
	"fmt"

	"github.com/xuri/excelize/v2"

	"driploop/bom"
)

// validate sets what may be written where a sheet is filled in by hand.
func (b *builder) validate(l *layout) error {
	for i, f := range l.Facts {
		if f.Ask == nil {
			continue
		}
		at := ref(l.value, l.facts+i)
		if err := b.ask(l, at, kindOf(f), f.Ask); err != nil {
			return err
		}
	}
	for i, c := range l.Columns {
		if c.Ask == nil || len(l.Rows) == 0 {
			continue
		}
		area := ref(i+1, l.rowOf(0)) + ":" + ref(i+1, l.rowOf(len(l.Rows)-1))
		if err := b.ask(l, area, c.Kind, c.Ask); err != nil {
			return err
		}
	}
	return nil
}

func (b *builder) ask(l *layout, area string, kind bom.CellKind, a *bom.Ask) error {
	v := excelize.NewDataValidation(true)
	v.SetSqref(area)
	var err error
	takes := ""
	between := func(least, most any, t excelize.DataValidationType) {
		err = v.SetRange(least, most, t, excelize.DataValidationOperatorBetween)
	}
	switch {
	case len(a.Choice) > 0:
		takes, err = "one of the list", v.SetDropList(a.Choice)
	case kind == bom.KindCount:
		most := orElse(a.Most, bom.MostFilledCount)
		takes = fmt.Sprintf("a whole number from %d to %d", a.Least, most)
		between(int(a.Least), int(most), excelize.DataValidationTypeWhole)
	case kind == bom.KindMoney:
		takes = "an amount of money, without its currency"
		between(0, int(orElse(a.Most, bom.MostFilledMoney)), excelize.DataValidationTypeDecimal)
	case kind == bom.KindLength:
		takes = "a length in metres, without the unit"
		if l.Feet {
			takes = "a length in feet, without the unit"
		}
		between(0, int(orElse(a.Most, bom.MostFilledLength)), excelize.DataValidationTypeDecimal)
	case kind == bom.KindDay:
		takes = "a day"
		between(bom.DayNumber(bom.FirstFilledDay), bom.DayNumber(bom.LastFilledDay), excelize.DataValidationTypeDate)
	default:
		takes = fmt.Sprintf("a text of at most %d characters", bom.MostFilledText)
		between(0, bom.MostFilledText, excelize.DataValidationTypeTextLength)
	}
	if err != nil {
		return err
	}
	v.SetError(excelize.DataValidationErrorStyleStop, "Not taken", "Here stands "+takes+", or nothing.")
	if a.Hint != "" {
		v.SetInput("", a.Hint)
	}
	return b.file.AddDataValidation(l.name, v)
}

func orElse(v, other int64) int64 {
	if v == 0 {
		return other
	}
	return v
}

// kindOf is what kind of value a fact has, or is given.
func kindOf(f bom.Fact) bom.CellKind {
	if f.Cell.Kind == bom.KindBlank {
		return f.Kind
	}
	return f.Cell.Kind
}
