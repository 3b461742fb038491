package show

import "driploop/catalog/source"

// conditions adds to a table's schema what its keys ask of each other.
func conditions(table object, list []source.Condition) {
	all := []object{}
	for _, c := range list {
		switch {
		case c.Rows != nil:
			all = append(all, rows(c))
		case c.When != nil:
			all = append(all, object{"if": state(*c.When), "then": need(c)})
		default:
			all = append(all, need(c))
		}
	}
	if len(all) > 0 {
		table["allOf"] = all
	}
}

// need is what a condition asks where it applies.
func need(c source.Condition) object {
	if c.Not != nil {
		return object{"not": object{"allOf": states(c.Not)}}
	}
	if len(c.Any) == 1 {
		return state(c.Any[0])
	}
	return object{"anyOf": states(c.Any)}
}

// rows is a need of every row below, which a key of the head meets for all of them.
func rows(c source.Condition) object {
	lists := object{}
	for _, name := range c.Rows {
		lists[name] = object{"items": need(source.Condition{Any: c.Any})}
	}
	head := object{"required": []string{c.Head}, "properties": object{c.Head: need(source.Condition{Any: c.HeadAny})}}
	return object{"anyOf": []object{head, {"properties": lists}}}
}

func states(list []source.State) []object {
	out := []object{}
	for _, s := range list {
		out = append(out, state(s))
	}
	return out
}

// state is a table in which a key is as it says.
func state(s source.State) object {
	out := object{}
	if !s.Lacking {
		out["required"] = []string{s.Key}
	}
	switch {
	case s.Is != nil:
		out["properties"] = object{s.Key: object{"enum": s.Is}}
	case s.Non != nil:
		out["properties"] = object{s.Key: object{"not": object{"enum": s.Non}}}
	}
	return out
}
