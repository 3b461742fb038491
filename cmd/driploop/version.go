package main

import "runtime/debug"

// version is that of the module, with the revision it was built from.
var version = buildVersion()

func buildVersion() string {
	const release = "0.1.0"
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return release
	}
	for _, s := range info.Settings {
		if s.Key == "vcs.revision" && len(s.Value) >= 12 {
			return release + "+" + s.Value[:12]
		}
	}
	return release
}
