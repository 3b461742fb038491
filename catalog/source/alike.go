package source

import "reflect"

// Alike reports two records, as the bind functions filled them, that mean the same:
// where a value stands in which file does not count, nor how a quantity was spelled
// ("60 ft" and "18.288 m" are one length).
func Alike(a, b any) bool { return alike(reflect.ValueOf(a), reflect.ValueOf(b)) }

var (
	placeType = reflect.TypeFor[Place]()
	fileType  = reflect.TypeFor[*File]()
)

func alike(a, b reflect.Value) bool {
	if a.IsValid() != b.IsValid() || !a.IsValid() {
		return a.IsValid() == b.IsValid()
	}
	if a.Type() != b.Type() {
		return false
	}
	if a.Type() == placeType || a.Type() == fileType {
		return true
	}
	switch a.Kind() {
	case reflect.Pointer, reflect.Interface:
		if a.IsNil() || b.IsNil() {
			return a.IsNil() == b.IsNil()
		}
		return alike(a.Elem(), b.Elem())
	case reflect.Struct:
		for i := range a.NumField() {
			if a.Type().Field(i).Name != written && !alike(a.Field(i), b.Field(i)) {
				return false
			}
		}
		return true
	case reflect.Slice, reflect.Array:
		return alikeList(a, b)
	case reflect.Map:
		return alikeMap(a, b)
	case reflect.Func, reflect.Chan, reflect.UnsafePointer:
		return true // no record holds any
	}
	return a.Equal(b)
}

// written is the field in which a quantity keeps how it was spelled.
const written = "Written"

func alikeList(a, b reflect.Value) bool {
	if a.Len() != b.Len() {
		return false
	}
	for i := range a.Len() {
		if !alike(a.Index(i), b.Index(i)) {
			return false
		}
	}
	return true
}

func alikeMap(a, b reflect.Value) bool {
	if a.Len() != b.Len() {
		return false
	}
	for _, k := range a.MapKeys() {
		if other := b.MapIndex(k); !other.IsValid() || !alike(a.MapIndex(k), other) {
			return false
		}
	}
	return true
}
