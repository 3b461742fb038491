module driploop

go 1.26.0

require (
	github.com/BurntSushi/toml v1.6.0
	github.com/google/go-cmp v0.7.0
	github.com/pelletier/go-toml/v2 v2.4.3
	github.com/rogpeppe/go-internal v1.16.0
	golang.org/x/sync v0.25.0
)

require golang.org/x/tools v0.26.0 // indirect
