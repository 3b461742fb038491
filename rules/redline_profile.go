package rules

import (
	"fmt"
	"reflect"
	"slices"
	"strings"

	"driploop/catalog/source"
	"driploop/rules/limits"
)

// profileChanges compares profiles and codes row by row: those of the workspace's own
// files, and the default ones where driploop.toml names others than it did.
func (c *comparison) profileChanges(files []ownFile) {
	type two struct{ was, now string }
	var profiles, codes []two
	for i := range files {
		for side := range files[i].doc {
			for _, k := range keysIn(tableOf(files[i].key(side, "profile"))) {
				profiles = append(profiles, two{k.Name, k.Name})
			}
			for _, k := range keysIn(tableOf(files[i].key(side, "code"))) {
				codes = append(codes, two{k.Name, k.Name})
			}
		}
	}
	a, b := &c.firms[atBase].Workspace, &c.firms[atHead].Workspace
	if a.Profile.V != b.Profile.V {
		profiles = append(profiles, two{a.Profile.V, b.Profile.V})
	}
	if a.Code.V != b.Code.V {
		codes = append(codes, two{a.Code.V, b.Code.V})
	}
	for _, t := range profiles {
		if !c.told("profile", t.was, t.now) {
			c.rulerRows("profile", t.was, t.now, profileRows(c.firms[atBase].Limits.Profile(t.was)), profileRows(c.firms[atHead].Limits.Profile(t.now)))
		}
	}
	for _, t := range codes {
		if !c.told("code", t.was, t.now) {
			c.rulerRows("code", t.was, t.now, codeRows(c.firms[atBase].Limits.Code(t.was)), codeRows(c.firms[atHead].Limits.Code(t.now)))
		}
	}
}

// rulerRow is one row of a profile or code as it is compared.
type rulerRow struct {
	name, says, clause string
	value              any
	at                 source.Place
}

// rulerRows lists the rows that differ, with the old and the new coefficients and the
// clause that the old row stood on.
func (c *comparison) rulerRows(sort, was, now string, a, b []rulerRow) {
	on := sort + "." + now
	if was != now && was != "" {
		on = sort + "." + was + " to " + now
	}
	moved := false
	add := func(x Change) {
		x.Charge, x.On = ToRulers, on
		c.out.Changes = append(c.out.Changes, x)
		moved = true
	}
	for _, x := range a {
		i := slices.IndexFunc(b, func(y rulerRow) bool { return y.name == x.name })
		switch {
		case i < 0:
			add(Change{Key: x.name, How: "gone", Was: x.says + x.clause, File: x.at.Path(), Line: x.at.Line()})
		case !source.Alike(x.value, b[i].value):
			y := b[i]
			add(Change{Key: x.name, How: "changed", Was: x.says + x.clause, Now: y.says + y.clause, File: y.at.Path(), Line: y.at.Line()})
		}
	}
	for _, y := range b {
		if !slices.ContainsFunc(a, func(x rulerRow) bool { return x.name == y.name }) {
			add(Change{Key: y.name, How: "added", Now: y.says + y.clause, File: y.at.Path(), Line: y.at.Line()})
		}
	}
	if moved {
		c.names[was], c.names[now] = true, true
	}
}

func clauseOf(clause, edition, proof string) string {
	if clause == "" {
		return ""
	}
	return " (" + limits.Origin(clause, edition, proof) + ")"
}

// profileRows lists the rows of a profile: its limits by what they select, and what
// else it asks for by its name.
func profileRows(p *limits.Profile) []rulerRow {
	if p == nil {
		return nil
	}
	var out []rulerRow
	for _, r := range slices.Concat(p.Limits, p.Radio) {
		bare := *r
		bare.Clause, bare.Note, bare.Proof, bare.Edition = source.Val[string]{}, source.Val[string]{}, source.Val[string]{}, source.Val[string]{}
		name := r.Kind.V
		if where := r.Where(); where != "" {
			name += ", " + where
		}
		out = append(out, rulerRow{name: numbered(out, name), says: r.Formula(), clause: clauseOf(r.Clause.V, r.Edition.Or(p.Edition.V), r.Proof.V), value: bare, at: r.At})
	}
	rest := *p
	rest.ID, rest.Embedded, rest.Limits, rest.Radio = "", false, nil, nil
	return append(out, sections(reflect.ValueOf(rest), p.At)...)
}

// codeRows lists the rows of a code.
func codeRows(c *limits.Code) []rulerRow {
	if c == nil {
		return nil
	}
	var out []rulerRow
	for i := range c.Rows {
		r := &c.Rows[i]
		bare := *r
		bare.Section, bare.Proof, bare.Note = source.Val[string]{}, source.Val[string]{}, source.Val[string]{}
		out = append(out, rulerRow{name: numbered(out, r.ID.V), says: r.Figure(), clause: " (" + r.Citation() + ")", value: bare, at: r.At})
	}
	return out
}

// numbered tells rows of one name apart.
func numbered(rows []rulerRow, name string) string {
	n := 1
	for _, r := range rows {
		if r.name == name || strings.HasPrefix(r.name, name+" no. ") {
			n++
		}
	}
	if n == 1 {
		return name
	}
	return fmt.Sprintf("%s no. %d", name, n)
}

// sections are the parts of a profile that hold something, by the names of its fields:
// what differs there is said without its figures.
func sections(v reflect.Value, at source.Place) []rulerRow {
	var out []rulerRow
	for i := range v.NumField() {
		f := v.Type().Field(i)
		if f.Name == "At" || v.Field(i).IsZero() || v.Field(i).Kind() == reflect.Slice && v.Field(i).Len() == 0 {
			continue
		}
		says := "as written"
		if f.Name == "Title" || f.Name == "Instrument" || f.Name == "Checked" {
			continue
		}
		if v.Field(i).Kind() == reflect.Slice {
			says = count(v.Field(i).Len(), "row", "rows")
		}
		out = append(out, rulerRow{name: strings.ToLower(f.Name), says: says, value: v.Field(i).Interface(), at: at})
	}
	return out
}
