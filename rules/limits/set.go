package limits

import (
	"embed"
	"fmt"
	"maps"
	"path"
	"slices"
	"strings"
	"sync"

	"driploop/catalog/source"
)

//go:embed profiles/*.toml codes/*.toml
var files embed.FS

// Set finds profiles and codes: those of the workspace, and behind them the
// embedded ones. It may be used from several goroutines.
type Set struct {
	ownProfiles map[string]*Profile
	ownCodes    map[string]*Code

	mu    sync.Mutex
	ready map[string]*Profile // joined with what they name in "with"
}

// Builtin is the set of the embedded profiles and codes alone.
func Builtin() *Set { return builtin() }

var builtin = sync.OnceValue(func() *Set {
	s, _ := Load()
	return s
})

// Load makes a set with the profiles and codes of a workspace in front of the
// embedded ones. Of two in the workspace under one ID the first stays, and the
// other is a problem.
func Load(docs ...*source.Doc) (*Set, []source.Problem) {
	s := &Set{ownProfiles: map[string]*Profile{}, ownCodes: map[string]*Code{}, ready: map[string]*Profile{}}
	var problems []source.Problem
	for _, d := range docs {
		var f file
		problems = append(problems, source.Read(d, f.keys)...)
		for i := range f.Profiles {
			p := &f.Profiles[i]
			if first, twice := s.ownProfiles[p.ID]; twice {
				problems = append(problems, defined("profile", p.ID, p.At, first.At))
				continue
			}
			s.ownProfiles[p.ID] = p
		}
		for i := range f.Codes {
			c := &f.Codes[i]
			if first, twice := s.ownCodes[c.ID]; twice {
				problems = append(problems, defined("code", c.ID, c.At, first.At))
				continue
			}
			s.ownCodes[c.ID] = c
		}
	}
	return s, append(problems, s.dangling()...)
}

func defined(what, id string, at, first source.Place) source.Problem {
	return source.Problem{Kind: source.Value, At: at,
		Says: fmt.Sprintf("the %s %s is defined twice in the workspace", what, source.Quote(id)),
		Do:   "keep one of them, or give it a name of its own", Also: []source.Place{first}}
}

// dangling reports names in "with" that lead nowhere.
func (s *Set) dangling() []source.Problem {
	var out []source.Problem
	for _, id := range slices.Sorted(maps.Keys(s.ownProfiles)) {
		for _, name := range s.ownProfiles[id].With.V {
			if s.raw(name.V) != nil {
				continue
			}
			do := "name one of " + strings.Join(s.ProfileIDs(), ", ")
			if near := source.Nearest(name.V, s.ProfileIDs()); near != "" {
				do = "did you mean " + near + "?"
			}
			out = append(out, source.Problem{Kind: source.Value, At: name.At,
				Says: "with: there is no profile " + source.Quote(name.V), Do: do})
		}
	}
	return out
}

// file is what a file of profiles and codes holds.
type file struct {
	Profiles []Profile
	Codes    []Code
}

func (f *file) keys(k *source.Keys) {
	source.Named(k, &f.Profiles, "profile", (*Profile).keys, "limit profiles")
	source.Named(k, &f.Codes, "code", (*Code).keys, "grounding and safety codes")
}

// Describe documents the keys of a file of profiles and codes.
func Describe() *source.Record {
	return source.Describe(func(k *source.Keys) { new(file).keys(k) })
}

// Profile finds a profile, or nil. The profile is shared: it is not to be changed.
func (s *Set) Profile(id string) *Profile {
	s.mu.Lock()
	defer s.mu.Unlock()
	if p := s.ready[id]; p != nil {
		return p
	}
	p := s.raw(id)
	if p == nil {
		return nil
	}
	joined := *p
	for _, name := range p.With.V {
		if other := s.raw(name.V); other != nil {
			joined.take(other)
		}
	}
	s.ready[id] = &joined
	return &joined
}

// raw is the profile as its file has it.
func (s *Set) raw(id string) *Profile {
	if p := s.ownProfiles[id]; p != nil {
		return p
	}
	if read := embedded().profiles[id]; read != nil {
		return read()
	}
	return nil
}

// take adds what holds here too from a profile named in "with". Its own levels and
// separation go first.
func (p *Profile) take(other *Profile) {
	p.Radio = slices.Concat(p.Radio, other.Radio)
	p.Heights = slices.Concat(p.Heights, other.Heights)
	for _, l := range other.Exposure {
		if p.Level(l.ID) == nil {
			p.Exposure = append(slices.Clip(p.Exposure), l)
		}
	}
	if p.Separation == nil {
		p.Separation = other.Separation
	}
}

// Code finds a code, or nil. The code is shared: it is not to be changed.
func (s *Set) Code(id string) *Code {
	if c := s.ownCodes[id]; c != nil {
		return c
	}
	if read := embedded().codes[id]; read != nil {
		return read()
	}
	return nil
}

// ProfileIDs lists all profiles in alphabetical order.
func (s *Set) ProfileIDs() []string { return union(s.ownProfiles, embedded().profiles) }

// CodeIDs lists all codes in alphabetical order.
func (s *Set) CodeIDs() []string { return union(s.ownCodes, embedded().codes) }

// Overrides names the embedded profiles and codes that the workspace replaces, as
// "profile us-router" or "code us-nec-2020", so that every output can say so.
func (s *Set) Overrides() []string {
	var out []string
	for id := range s.ownCodes {
		if embedded().codes[id] != nil {
			out = append(out, "code "+id)
		}
	}
	for id := range s.ownProfiles {
		if embedded().profiles[id] != nil {
			out = append(out, "profile "+id)
		}
	}
	slices.Sort(out)
	return out
}

func union[A, B any](a map[string]A, b map[string]B) []string {
	ids := slices.Concat(slices.Collect(maps.Keys(a)), slices.Collect(maps.Keys(b)))
	slices.Sort(ids)
	return slices.Compact(ids)
}

// shelf is the embedded profiles and codes by ID; each file is parsed when it is
// first asked for, because a plan needs two or three of them.
type shelf struct {
	profiles map[string]func() *Profile
	codes    map[string]func() *Code
}

var embedded = sync.OnceValue(func() shelf {
	s := shelf{profiles: map[string]func() *Profile{}, codes: map[string]func() *Code{}}
	for _, name := range list("profiles") {
		s.profiles[idOf(name)] = sync.OnceValue(func() *Profile { return &readFile(name).Profiles[0] })
	}
	for _, name := range list("codes") {
		s.codes[idOf(name)] = sync.OnceValue(func() *Code { return &readFile(name).Codes[0] })
	}
	return s
})

func idOf(name string) string { return strings.TrimSuffix(path.Base(name), ".toml") }

func list(folder string) []string {
	entries, err := files.ReadDir(folder)
	if err != nil {
		panic(err) // the folder is part of the program
	}
	var out []string
	for _, e := range entries {
		out = append(out, folder+"/"+e.Name())
	}
	return out
}

// readFile reads an embedded file, which holds one profile or code under the name
// of the file. What is wrong with it is a mistake of the program and stops it; a
// test reads every such file.
func readFile(name string) *file {
	src, err := files.ReadFile(name)
	if err != nil {
		panic(err)
	}
	d, problems := source.Parse(&source.File{Path: name, Src: src})
	f := &file{}
	problems = append(problems, source.Read(d, f.keys)...)
	for _, p := range problems {
		panic(fmt.Sprintf("embedded %s, line %d: %s", name, p.At.Line(), p.Says))
	}
	for i := range f.Profiles {
		f.Profiles[i].Embedded = true
	}
	for i := range f.Codes {
		f.Codes[i].Embedded = true
	}
	return f
}
