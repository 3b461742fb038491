package source

import (
	"strings"
	"testing"
)

func TestConflictMarkers(t *testing.T) {
	for _, c := range []struct {
		name, src string
		at        string   // of the only problem
		also      []string // the other markers
	}{
		{"both sides", "a = 1\n<<<<<<< HEAD\nb = 2\n=======\nb = 3\n>>>>>>> north\nc = 4\n",
			"2:1 <<<<<<< HEAD", []string{"4:1 =======", "6:1 >>>>>>> north"}},
		{"with the base between", "<<<<<<< ours\na = 1\n||||||| 1234567\na = 0\n=======\na = 2\n>>>>>>> theirs",
			"1:1 <<<<<<< ours", []string{"3:1 ||||||| 1234567", "5:1 =======", "7:1 >>>>>>> theirs"}},
		{"line ends of two bytes", "<<<<<<< HEAD\r\na = 1\r\n=======\r\n>>>>>>> b\r\n",
			"1:1 <<<<<<< HEAD", []string{"3:1 =======", "4:1 >>>>>>> b"}},
		{"inside an array", "a = [\n<<<<<<< HEAD\n1,\n=======\n2,\n>>>>>>> b\n]",
			"2:1 <<<<<<< HEAD", []string{"4:1 =======", "6:1 >>>>>>> b"}},
		{"inside a text", "a = '''\n<<<<<<< HEAD\none\n=======\ntwo\n>>>>>>> b\n'''\nb = 2",
			"2:1 <<<<<<< HEAD", []string{"4:1 =======", "6:1 >>>>>>> b"}},
		{"the first forgotten", "a = 1\n=======\nb = 2", "2:1 =======", nil},
		{"the last forgotten", "a = 1\n>>>>>>> b\nb = 2", "2:1 >>>>>>> b", nil},
	} {
		t.Run(c.name, func(t *testing.T) {
			p := parseBad(t, c.src)
			if p.Kind != Merge || where(p.At) != c.at {
				t.Errorf("reported at %q with kind %d, want a merge problem at %q", where(p.At), p.Kind, c.at)
			}
			var also []string
			for _, a := range p.Also {
				also = append(also, where(a))
			}
			if strings.Join(also, "|") != strings.Join(c.also, "|") {
				t.Errorf("the other markers are %q, want %q", also, c.also)
			}
		})
	}
}

func TestTwoConflicts(t *testing.T) {
	one := "<<<<<<< HEAD\na = 1\n=======\n>>>>>>> b\n"
	_, found := parseBytes([]byte(one + one))
	if len(found) != 2 || found[0].At.Line() != 1 || found[1].At.Line() != 5 {
		t.Errorf("want a problem for each conflict:%s", listed(found))
	}
}

func TestNoConflictMarkers(t *testing.T) {
	for _, src := range []string{
		"a = '''\nTitle\n=======\n'''",
		"a = '''\n========\n<<<<<<<< x\n<<<<<<<x\n <<<<<<< x\n'''",
		"# <<<<<<< HEAD",
	} {
		parseGood(t, src)
	}
}

func TestSyntaxProblemBesideConflict(t *testing.T) {
	_, found := parseBytes([]byte("a = \n<<<<<<< HEAD\n=======\n>>>>>>> b"))
	if len(found) != 2 || found[0].Kind != Syntax || found[1].Kind != Merge {
		t.Errorf("want what is wrong before the conflict, and the conflict:%s", listed(found))
	}
	if p := parseBad(t, "a = 1\n======= x"); p.Kind != Syntax {
		t.Errorf("no merge writes that line: %s", listed([]Problem{p}))
	}
}
