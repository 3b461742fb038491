package source

// ProblemKind says what is wrong with a file; each becomes a rule of its own.
type ProblemKind int

const (
	Syntax ProblemKind = iota + 1 // not TOML, over a cap, or read differently by the two parsers
	Key                           // a key that nobody knows, or one that is missing
	Value                         // a value of the wrong type, unit or range, or a reference that leads nowhere
	Merge                         // left behind by a merge: conflict markers, one thing defined twice
)

// Problem is one thing wrong with a file. Says states what was read and what was
// expected; Do states what to do about it.
type Problem struct {
	Kind     ProblemKind
	At       Place
	Says, Do string
	Also     []Place // other places that belong to it, such as the first definition
}

// MaxProblems is how many problems of one file are kept; the rest is counted.
const MaxProblems = 200
