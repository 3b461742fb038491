package source

import "testing"

// TestSettledFilesKnowTheirPlaces holds that a file whose text was let go still
// says the lines and columns that it was asked to keep.
func TestSettledFilesKnowTheirPlaces(t *testing.T) {
	f := &File{Path: "a.toml", Src: []byte("a = 1\nöl = 2\n  b = 3\n")}
	var offsets []int32
	for i := range len(f.Src) {
		offsets = append(offsets, int32(i))
	}
	s := f.Settled(offsets)
	if len(s.Src) > 0 {
		t.Error("the text is still there")
	}
	for _, o := range offsets {
		was, is := Place{f, o, o + 1}, Place{s, o, o + 1}
		if was.Line() != is.Line() || was.Col() != is.Col() || was.Path() != is.Path() {
			t.Errorf("offset %d was line %d column %d, and is line %d column %d", o, was.Line(), was.Col(), is.Line(), is.Col())
		}
		if is.Text() != "" {
			t.Errorf("offset %d still has the text %q", o, is.Text())
		}
	}
}
