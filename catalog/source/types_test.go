package source

import (
	"errors"
	"fmt"
	"math"
	"reflect"
	"strings"
	"testing"
	"time"

	"driploop/catalog/unit"
)

// values reads one value of a type from its TOML text.
func readValue[T any](t *testing.T, typ Type[T], text string) (Val[T], []string) {
	t.Helper()
	var v Val[T]
	problems := read(t, "v = "+text+"\n", func(k *Keys) { Opt(k, &v, "v", typ, "a value") })
	return v, problems
}

// reads holds that a text is read as a value, at its place.
func reads[T any](t *testing.T, typ Type[T], text string, want T) {
	t.Helper()
	v, problems := readValue(t, typ, text)
	if len(problems) > 0 || !v.Set || !reflect.DeepEqual(v.V, want) || v.At.Text() != text {
		t.Errorf("%s is read as %v at %q %v, want %v", text, v.V, v.At.Text(), problems, want)
	}
}

// refuses holds that a text is refused with one problem, and leaves nothing set.
func refuses[T any](t *testing.T, typ Type[T], text, want string) {
	t.Helper()
	v, problems := readValue(t, typ, text)
	if v.Set || !reflect.DeepEqual(v, Val[T]{}) {
		t.Errorf("%s is refused, but leaves %+v", text, v)
	}
	if len(problems) != 1 || !strings.Contains(problems[0], want) {
		t.Errorf("%s is refused with %q, want %q", text, problems, want)
	}
}

func TestPlainTypes(t *testing.T) {
	reads(t, Text, `"a b"`, "a b")
	reads(t, Text, `""`, "")
	refuses(t, Text, `3`, "the number 3 was read, text is expected; write it in quotes")
	reads(t, Flag, `true`, true)
	reads(t, Flag, `false`, false)
	refuses(t, Flag, `"true"`, `the text "true" was read, true or false is expected`)
	refuses(t, Flag, `1`, "the number 1 was read")
	reads(t, Name, `"amp-1"`, "amp-1")
	refuses(t, Name, `"amp.1"`, `"amp.1" is no name`)
	refuses(t, Name, `"`+strings.Repeat("x", 65)+`"`, "64 at most")
	refuses(t, Name, `true`, "true was read, a name is expected")
	reads(t, Day, `2026-12-01`, unit.Date{Year: 2026, Month: 12, Day: 1})
	refuses(t, Day, `"2026-12-01"`, `the text "2026-12-01" was read, a date is expected; write it like 2026-12-01, without quotes`)
	refuses(t, Day, `2026-12-01T10:00:00`, "the time 2026-12-01 10:00:00 was read")
	reads(t, When, `2026-12-01T16:00:00`, time.Date(2026, 12, 1, 16, 0, 0, 0, time.UTC))
	refuses(t, When, `2026-12-01T16:00:00Z`, "without zone")
	refuses(t, When, `2026-12-01`, "the date 2026-12-01 was read")
	refuses(t, When, `16:00:00`, "the time 16:00:00 was read")
}

func TestQuantityTypes(t *testing.T) {
	reads(t, Length, `"60 ft"`, unit.MM(18288))
	refuses(t, Length, `"60"`, "needs a number, a space and a unit")
	refuses(t, Length, `60`, `the number 60 was read, a length is expected; write it like "18.5 m"`)
	reads(t, Temperature, `"113 F"`, unit.Celsius(45))
	refuses(t, Temperature, `45`, "a temperature is expected")
	reads(t, Speed, `"44 m/s"`, unit.Speed(44))
	refuses(t, Speed, `"44 kn"`, "m/s, mph or km/h")
	reads(t, Size, `"16 mm2"`, unit.Gauge{MM2: 16, Written: "16 mm2"})
	refuses(t, Size, `"16"`, "a conductor size is written")
	reads(t, Price, `"318.00"`, unit.Money(3_180_000))
	refuses(t, Price, `318.00`, `the number 318 was read, a money amount is expected`)
}

func TestNumberTypes(t *testing.T) {
	reads(t, Number, `-3.5`, -3.5)
	reads(t, Number, `7`, 7.0)
	refuses(t, Number, `"7"`, `the text "7" was read, a number (number) is expected; write it without quotes and without unit`)

	db := Between(-10, 20.5, "dB")
	reads(t, db, `-10`, -10.0)
	reads(t, db, `20.5`, 20.5)
	refuses(t, db, `-10.000001`, "-10.000001 is outside -10 to 20.5 dB; check the figure and its unit")
	refuses(t, db, `20.500001`, "20.500001 is outside -10 to 20.5 dB")
	refuses(t, db, `[3]`, "a list was read")
	refuses(t, db, `{ a = 1 }`, "a table was read")

	watts := AtLeast(0, "W")
	reads(t, watts, `0`, 0.0)
	reads(t, watts, `1e300`, 1e300)
	refuses(t, watts, `-0.001`, "-0.001 is outside what begins at 0 W")

	three := Count(1, 3)
	reads(t, three, `1`, 1)
	reads(t, three, `3`, 3)
	refuses(t, three, `0`, "0 is outside 1 to 3")
	refuses(t, three, `4`, "4 is outside 1 to 3")
	refuses(t, three, `2.0`, "the number 2 was read, a whole number is expected; write it without quotes and without decimals")
	refuses(t, three, `9223372036854775807`, "9223372036854775807 is outside 1 to 3")
}

func TestOneOf(t *testing.T) {
	stage := OneOf("draft", "review", "construction")
	reads(t, stage, `"review"`, "review")
	refuses(t, stage, `"reviw"`, `"reviw" is not one of draft, review, construction; did you mean review?`)
	refuses(t, stage, `"Review"`, "did you mean review?")
	refuses(t, stage, `"hold"`, "; write one of them")
	refuses(t, stage, `""`, "; write one of them")
	refuses(t, stage, `3`, "the number 3 was read, one of draft, review, construction is expected")
}

func TestChecked(t *testing.T) {
	even := Checked("even word", `"ab"`, func(s string) (int, error) {
		if len(s)%2 == 1 {
			return 0, errors.New("it is odd")
		}
		return len(s), nil
	})
	reads(t, even, `"abcd"`, 4)
	refuses(t, even, `"abc"`, `v: it is odd; write it like "ab"`)
}

func TestListOf(t *testing.T) {
	v, problems := readValue(t, ListOf(Between(0, 10, "m")), `[1, 2.5, 10]`)
	if len(problems) > 0 || len(v.V) != 3 || v.V[1].V != 2.5 || v.V[1].At.Text() != "2.5" || !v.V[2].Set {
		t.Errorf("read %+v %v", v.V, problems)
	}
	if v, problems := readValue(t, ListOf(Text), `[]`); len(problems) > 0 || !v.Set || len(v.V) != 0 {
		t.Errorf("an empty list is %+v %v", v, problems)
	}
	refuses(t, ListOf(Text), `"a"`, `the text "a" was read, a list is expected; write it in brackets`)
	var v2 Val[[]Val[float64]]
	got := read(t, "v = [1, 11, 2, \"x\",\n  -1]\n", func(k *Keys) { Opt(k, &v2, "v", ListOf(Between(0, 10, "m")), "") })
	wants(t, got, []string{ // each at its element
		`1:9 11: v: 11 is outside 0 to 10 m`,
		`1:16 "x": v: the text "x" was read`,
		`2:3 -1: v: -1 is outside`,
	})
	if v2.Set {
		t.Error("a list with a fault in it is set")
	}
}

func TestNestedLists(t *testing.T) {
	tables := ListOf(Pair(Between(0, 3000, "MHz, dB"), "[850, 24.7]"))
	v, problems := readValue(t, tables, `[[150, 1], [2500, 2.5]]`)
	if len(problems) > 0 || len(v.V) != 2 || v.V[1].V != [2]float64{2500, 2.5} || v.V[1].At.Text() != "[2500, 2.5]" {
		t.Errorf("read %+v %v", v.V, problems)
	}
	var to Val[[]Val[[2]float64]]
	got := read(t, "v = [[150, \"a\"], [1, 2, 3], 7, [-1, -2], [5, 6], []]\n", func(k *Keys) { Opt(k, &to, "v", tables, "") })
	wants(t, got, []string{
		`1:12 "a": v: the text "a" was read, a number`,
		`1:18 [1, 2, 3]: v: a list was read, a pair is expected; write it like [850, 24.7]`,
		`1:29 7: v: the number 7 was read, a pair is expected`,
		`1:33 -1: v: -1 is outside`,
		`1:37 -2: v: -2 is outside`,
		`1:50 []: v: a list was read, a pair is expected`,
	})
	// A number that no plan can mean was reported by Parse; the others still are.
	got = read(t, "v = [[150, nan], [1, -5]]\n", func(k *Keys) { Opt(k, &to, "v", tables, "") })
	wants(t, got, []string{`1:22 -5: v: -5 is outside`})
	if to.Set {
		t.Error("a table with a nan in it is set")
	}
}

func TestEither(t *testing.T) {
	list := Map(ListOf(Number), func(v []Val[float64]) (int, error) { return len(v), nil })
	one := Map(Count(0, 99), func(n int) (int, error) { return -n, nil })
	typ := Either(IsArray, list, one, "a list or a number")
	reads(t, typ, `[1, 2, 3]`, 3)
	reads(t, typ, `7`, -7)
	refuses(t, typ, `["x"]`, `the text "x" was read, a number (number) is expected`)
	refuses(t, typ, `"x"`, `the text "x" was read, a whole number is expected`)
	for text, want := range map[string][4]bool{
		`[1]`: {true, false, false, false}, `{ a = 1 }`: {false, true, false, false}, `"a"`: {false, false, true, false}, `2026-12-01`: {false, false, false, true}, `1`: {},
	} {
		n := parseGood(t, "v = "+text+"\n").Root.Get("v").Value
		if got := [4]bool{IsArray(n), IsTable(n), IsString(n), IsDay(n)}; got != want {
			t.Errorf("%s is array, table, string, day: %v, want %v", text, got, want)
		}
	}
}

func TestMapRefusesWithThePlaceOfTheValue(t *testing.T) {
	even := Map(Count(0, 100), func(n int) (string, error) {
		if n%2 == 1 {
			return "half", errors.New("it is odd")
		}
		return fmt.Sprint(n), nil
	})
	reads(t, even, `4`, "4")
	refuses(t, even, `5`, "1:5 5: v: it is odd; check the figure")
	refuses(t, even, `101`, "101 is outside 0 to 100")
}

func TestInline(t *testing.T) {
	var list Val[[]Val[room]]
	bind := func(k *Keys) { Opt(k, &list, "rooms", ListOf(Inline((*room).keys)), "") }
	wants(t, read(t, `rooms = [{ name = "a" }, { name = "b", area = 2 }]`+"\n", bind), nil)
	if len(list.V) != 2 || list.V[1].V.Area.V != 2 || list.V[1].V.At != `1:26 { name = "b", area = 2 }` {
		t.Errorf("read %+v", list.V)
	}
	list = Val[[]Val[room]]{}
	wants(t, read(t, "rooms = [{ nam = \"a\" }, 3, { name = 4, area = -1 }, { name = nan }]\n", bind), []string{
		`1:12 nam: rooms: nothing reads the key "nam" here, and name is needed; did you mean name?`,
		`1:25 3: rooms: the number 3 was read, a table is expected; write it in braces`,
		`1:37 4: rooms: name: the number 4 was read, text is expected`,
		`1:47 -1: rooms: area: -1 is outside`,
	})
	if list.Set {
		t.Error("a list with faults in it is set")
	}
}

// What belongs to a fault inside an inline table comes with it.
func TestInlineKeepsOtherPlaces(t *testing.T) {
	d, _ := parseBytes([]byte("v = { a = 1, b = 2 }\n"))
	var v Val[int]
	twoOfThem := Inline(func(_ *int, k *Keys) {
		var a, b Val[float64]
		Opt(k, &a, "a", Number, "")
		Opt(k, &b, "b", Number, "")
		k.Fault(b.At, "one of the two is too much", "take it out", a.At)
	})
	problems := Read(d, func(k *Keys) { Opt(k, &v, "v", twoOfThem, "") })
	if len(problems) != 1 || len(problems[0].Also) != 1 || where(problems[0].Also[0]) != "1:11 1" {
		t.Errorf("problems are %+v", problems)
	}
}

func TestOr(t *testing.T) {
	if got := (Val[int]{V: 3, Set: true}).Or(7); got != 3 {
		t.Errorf("a value that is set gives way: %d", got)
	}
	if got := (Val[int]{V: 3}).Or(7); got != 7 {
		t.Errorf("a value that is not set counts: %d", got)
	}
	if got := (Val[int]{Set: true}).Or(7); got != 0 {
		t.Errorf("a zero that was given is replaced: %d", got)
	}
}

func TestNumbersAreFinite(t *testing.T) {
	for _, n := range []*Node{{Kind: Float, Float: math.NaN()}, {Kind: Float, Float: math.Inf(1)}, {Kind: Refused}, {Kind: String, Str: "1"}} {
		if v, ok := n.number(); ok {
			t.Errorf("%+v is the number %v", n, v)
		}
	}
}
