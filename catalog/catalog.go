package catalog

import (
	"embed"
	"fmt"
	"sort"
	"sync"

	"driploop/catalog/source"
)

// Catalog finds parts by ID: those of the workspace, and behind them the embedded
// generic ones.
type Catalog struct {
	own     map[string]*Part
	generic map[string]*Part
	Twice   []Twin // IDs that the workspace defines more than once

	allOnce sync.Once
	all     []*Part
	fitOnce sync.Once
	fits    map[string][]*Part // connectors by cable
}

// Twin is a part defined twice in the workspace; the first stays.
type Twin struct{ Kept, Other *Part }

//go:embed generic/*.toml
var genericFiles embed.FS

// Generic is the embedded catalog; it is read once.
var Generic = sync.OnceValue(func() []*Part {
	var all []*Part
	entries, err := genericFiles.ReadDir("generic")
	if err != nil {
		panic(err) // the folder is part of the program
	}
	for _, e := range entries {
		src, err := genericFiles.ReadFile("generic/" + e.Name())
		if err != nil {
			panic(err)
		}
		var parts []Part
		readEmbedded("generic/"+e.Name(), src, func(k *source.Keys) {
			source.Named(k, &parts, "part", (*Part).keys, "parts")
		})
		for i := range parts {
			parts[i].Generic = true
			all = append(all, &parts[i])
		}
	}
	return all
})

// readEmbedded reads a file that is part of the program. What is wrong with it is
// a mistake of the program and stops it; a test reads every such file.
func readEmbedded(name string, src []byte, bind func(*source.Keys)) {
	d, problems := source.Parse(&source.File{Path: name, Src: src})
	problems = append(problems, source.Read(d, bind)...)
	for _, p := range problems {
		panic(fmt.Sprintf("embedded %s, line %d: %s", name, p.At.Line(), p.Says))
	}
}

// ReadParts reads one catalog file of a workspace.
func ReadParts(d *source.Doc) ([]*Part, []source.Problem) {
	var parts []Part
	problems := source.Read(d, func(k *source.Keys) {
		source.Named(k, &parts, "part", (*Part).keys, "parts")
	})
	out := make([]*Part, len(parts))
	for i := range parts {
		out[i] = &parts[i]
	}
	return out, problems
}

// DescribeCatalog documents the format of catalog files; which keys a part has beside
// the common ones depends on its kind.
func DescribeCatalog() *source.Record {
	return source.Describe(func(k *source.Keys) {
		source.Named(k, new([]Part), "part", (*Part).keys, "parts")
	})
}

// New makes a catalog of the workspace's parts in front of the generic ones.
func New(own []*Part) *Catalog {
	c := &Catalog{own: make(map[string]*Part, len(own)), generic: map[string]*Part{}}
	for _, p := range own {
		if first, twice := c.own[p.ID]; twice {
			c.Twice = append(c.Twice, Twin{first, p})
			continue
		}
		c.own[p.ID] = p
	}
	for _, p := range Generic() {
		c.generic[p.ID] = p
	}
	return c
}

// Look finds a part by ID, or nil.
func (c *Catalog) Look(id string) *Part {
	if p := c.own[id]; p != nil {
		return p
	}
	return c.generic[id]
}

// Connectors lists the connector parts that are made for a cable, by ID.
func (c *Catalog) Connectors(cable string) []*Part {
	c.fitOnce.Do(func() {
		c.fits = map[string][]*Part{}
		for _, p := range c.All() {
			if p.Connector == nil {
				continue
			}
			for _, f := range p.Connector.Fits.V {
				c.fits[f.V] = append(c.fits[f.V], p)
			}
		}
	})
	return c.fits[cable]
}

// Overridden lists the generic parts that the workspace replaces, by ID.
func (c *Catalog) Overridden() []string {
	var out []string
	for id := range c.own {
		if c.generic[id] != nil {
			out = append(out, id)
		}
	}
	sort.Strings(out)
	return out
}

// Own lists the parts of the workspace by ID.
func (c *Catalog) Own() []*Part { return byID(c.own) }

// All lists every part that Look can find, by ID. The list is shared: it is not to
// be changed.
func (c *Catalog) All() []*Part {
	c.allOnce.Do(func() {
		both := make(map[string]*Part, len(c.own)+len(c.generic))
		for id, p := range c.generic {
			both[id] = p
		}
		for id, p := range c.own {
			both[id] = p
		}
		c.all = byID(both)
	})
	return c.all
}

// Nearest is the known ID that id was probably meant to be, or "".
func (c *Catalog) Nearest(id string) string {
	var ids []string
	for _, p := range c.All() {
		ids = append(ids, p.ID)
	}
	return source.Nearest(id, ids)
}

func byID(m map[string]*Part) []*Part {
	out := make([]*Part, 0, len(m))
	for _, p := range m {
		out = append(out, p)
	}
	sort.Slice(out, func(i, j int) bool { return out[i].ID < out[j].ID })
	return out
}
