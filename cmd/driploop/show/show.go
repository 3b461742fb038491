// Package show turns results into the forms in which people and programs read
// them: text for a terminal or a log, JSON, CSV, Markdown, TOML to paste.
//
// Files of a workspace come from strangers. Each form has one file with its
// escaping and a string type of its own (Term, MD, …), and what is written in
// that form takes only that type, so that nothing from a file reaches a reader
// as anything but text.
package show

// Page is what text is made for.
type Page struct {
	Width int // columns
	Color bool
}
