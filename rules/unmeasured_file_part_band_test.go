package rules_test

func init() {
	for _, name := range []string{"file/syntax", "file/key", "file/merge", "part/unknown", "part/kind", "part/status", "catalog/twice"} {
		unmeasured[name] = true
	}
}
