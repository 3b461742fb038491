package limits

import (
	"slices"
	"testing"
)

func TestEveryEmbeddedFileReads(t *testing.T) {
	s := Builtin()
	want := []string{"au-permission", "ca-fixed-wideband", "eu-permission", "uk-indoor-multi", "us-fixed-provider",
		"us-fixed-wideband", "us-industrial", "us-mobile-provider", "us-mobile-wideband", "us-router"}
	if got := s.ProfileIDs(); !slices.Equal(got, want) {
		t.Errorf("profiles: %v, expected %v", got, want)
	}
	for _, id := range s.ProfileIDs() {
		if p := s.Profile(id); p.ID != id || !p.Embedded {
			t.Errorf("the file of %s holds %s", id, p.ID)
		}
	}
}
