package source

import "testing"

// TestOddFilesAreReadTwice holds which ways of writing call for the second parser.
func TestOddFilesAreReadTwice(t *testing.T) {
	for text, odd := range map[string]bool{
		"[device.amp]\npart = \"A-1\"\nset = { B5 = 1.5 }\nat = [1, -2.5]\non = 2026-12-01\nx = true\n": false,
		"port.a = 1\nport.b = 2\n":     false,
		"[a]\nx = 1\n[a.b]\ny = 2\n":   false,
		"[[a]]\nx = 1\n[[a]]\nx = 2\n": false,
		"x = 'plain'\n":                false,
		"x = \"a\\tb\"\n":              true,
		"x = \"\"\"a\"\"\"\n":          true,
		"x = '''a'''\n":                true,
		"\"x\" = 1\n":                  true,
		"['a']\nx = 1\n":               true,
		"x = 1_000\n":                  true,
		"x = 0x10\n":                   true,
		"x = 1e3\n":                    true,
		"x = +1\n":                     true,
		"x = 2026-12-01T10:00:00\n":    true,
		"x = 2026-12-01T10:00:00Z\n":   true,
		"x = 10:00:00\n":               true,
		"[a.b]\ny = 2\n[a]\nx = 1\n":   false,
	} {
		x := newIndexer(&File{Path: "a.toml", Src: []byte(text)})
		x.file.index()
		x.run()
		if x.odd != odd || len(x.problems) > 0 {
			t.Errorf("%q: odd is %v, expected %v; problems %v", text, x.odd, odd, x.problems)
		}
	}
}
