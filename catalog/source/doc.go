// Package source reads trees of TOML files so that whatever is found wrong, here
// or much later, can be said with the line and column of the very key or value.
//
// A Tree (a folder on disk, a git revision) lists files and hands out their
// bytes. Parse turns the bytes of one file into a Doc: an index pass finds every
// key and value with its place and holds the caps; where the file uses anything
// that two readers could take differently, a second parser decodes the same bytes,
// the two are joined, and wherever they disagree the file is refused
// with a place. Read then walks a Doc with bind functions: one function per
// record names each key, its type and its meaning, and is at once the reader,
// the list of known keys, their order, and their documentation.
//
// Nothing outside this package knows TOML.
package source
