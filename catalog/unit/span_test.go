package unit_test

import (
	"math"
	"slices"
	"testing"

	"driploop/catalog/unit"
)

type span = unit.Span

func TestSpan(t *testing.T) {
	s := span{Lo: 699, Hi: 716}
	if s.Mid() != 707.5 || s.Width() != 17 || s.Empty() {
		t.Errorf("%v has the middle %v, the width %v, empty %v", s, s.Mid(), s.Width(), s.Empty())
	}
	for f, want := range map[unit.MHz]bool{698.999: false, 699: true, 707: true, 716: true, 716.001: false} {
		if s.Contains(f) != want {
			t.Errorf("%v contains %v: %v, want %v", s, f, !want, want)
		}
	}
	for other, want := range map[span]bool{
		{Lo: 699, Hi: 716}: true, {Lo: 700, Hi: 710}: true, {Lo: 698, Hi: 716}: false, {Lo: 699, Hi: 717}: false, {Lo: 800, Hi: 900}: false,
	} {
		if s.Covers(other) != want {
			t.Errorf("%v covers %v: %v, want %v", s, other, !want, want)
		}
	}
	for empty := range map[span]bool{{}: true, {Lo: 5, Hi: 5}: true, {Lo: 6, Hi: 5}: true, {Lo: unit.MHz(math.NaN()), Hi: 5}: true} {
		if !empty.Empty() {
			t.Errorf("%v holds no spectrum, but is not empty", empty)
		}
	}
}

func TestSpanOverlap(t *testing.T) {
	s := span{Lo: 100, Hi: 200}
	for other, want := range map[span]span{
		{Lo: 50, Hi: 150}:  {Lo: 100, Hi: 150},
		{Lo: 150, Hi: 250}: {Lo: 150, Hi: 200},
		{Lo: 120, Hi: 130}: {Lo: 120, Hi: 130},
		{Lo: 0, Hi: 1000}:  s,
	} {
		if got := s.Overlap(other); got != want {
			t.Errorf("%v and %v share %v, want %v", s, other, got, want)
		}
		if got := other.Overlap(s); got != want {
			t.Errorf("%v and %v share %v, want %v", other, s, got, want)
		}
	}
	for _, other := range []span{{Lo: 0, Hi: 100}, {Lo: 200, Hi: 300}, {Lo: 0, Hi: 50}, {Lo: 250, Hi: 300}} {
		if got := s.Overlap(other); !got.Empty() {
			t.Errorf("%v and %v share %v, want nothing", s, other, got)
		}
	}
}

func TestSpanMinus(t *testing.T) {
	s := span{Lo: 100, Hi: 200}
	for _, c := range []struct {
		name   string
		covers []span
		left   []span
	}{
		{"nothing covers", nil, []span{s}},
		{"all is covered", []span{{Lo: 100, Hi: 200}}, nil},
		{"more than all", []span{{Lo: 0, Hi: 900}}, nil},
		{"the low end", []span{{Lo: 50, Hi: 120}}, []span{{Lo: 120, Hi: 200}}},
		{"the high end", []span{{Lo: 180, Hi: 250}}, []span{{Lo: 100, Hi: 180}}},
		{"the middle", []span{{Lo: 130, Hi: 140}}, []span{{Lo: 100, Hi: 130}, {Lo: 140, Hi: 200}}},
		{"two in the wrong order", []span{{Lo: 160, Hi: 170}, {Lo: 110, Hi: 120}}, []span{{Lo: 100, Hi: 110}, {Lo: 120, Hi: 160}, {Lo: 170, Hi: 200}}},
		{"two that overlap", []span{{Lo: 110, Hi: 150}, {Lo: 140, Hi: 160}}, []span{{Lo: 100, Hi: 110}, {Lo: 160, Hi: 200}}},
		{"two that touch", []span{{Lo: 100, Hi: 150}, {Lo: 150, Hi: 200}}, nil},
		{"a gap between two", []span{{Lo: 100, Hi: 149}, {Lo: 150, Hi: 200}}, []span{{Lo: 149, Hi: 150}}},
		{"one beside it", []span{{Lo: 200, Hi: 300}, {Lo: 0, Hi: 100}}, []span{s}},
		{"an empty one inside", []span{{Lo: 150, Hi: 150}}, []span{s}},
		{"a backward one", []span{{Lo: 180, Hi: 120}}, []span{s}},
	} {
		if got := s.Minus(c.covers...); !slices.Equal(got, c.left) {
			t.Errorf("%s: %v is left, want %v", c.name, got, c.left)
		}
	}
	for _, empty := range []span{{}, {Lo: 5, Hi: 5}} {
		if got := empty.Minus(); len(got) > 0 {
			t.Errorf("of %v, which is empty, %v is left", empty, got)
		}
	}
}

func TestSpectrumPrints(t *testing.T) {
	for got, want := range map[string]string{
		unit.MHz(707.5).String():            "707.5 MHz",
		unit.MHz(2110).String():             "2110 MHz",
		span{Lo: 699, Hi: 716}.String():     "699–716 MHz",
		span{Lo: 1710.5, Hi: 1755}.String(): "1710.5–1755 MHz",
	} {
		if got != want {
			t.Errorf("printed %q, want %q", got, want)
		}
	}
}
