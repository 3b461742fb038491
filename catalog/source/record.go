package source

// Shape says how a key that holds tables is written.
type Shape int

const (
	Scalar      Shape = iota // a plain value
	OneTable                 // one sub-table
	RowTables                // an array of tables
	NamedTables              // a table of tables under IDs
)

// KeyDoc documents one key of a record.
type KeyDoc struct {
	Name     string
	Required bool
	Type     TypeDoc // of a plain value
	Doc      string
	Shape    Shape
	Sub      *Record // what the tables below hold
	Most     int     // so many tables below at most; 0: no bound
}

// TypeDoc documents what a value is. Bounds are nil where there is none.
type TypeDoc struct {
	Name     string // what a person would call it: "length", "dB", "one of"
	Example  string
	OneOf    []string
	Min, Max *float64
	List     *TypeDoc // of the items of a list
	Each     *TypeDoc // of the values of a table whose keys are free

	Form   *Form            // what a machine may know of the value
	Choice func() []TypeDoc // of a value of several types: those it may have
	Sub    func() *Record   // of an inline table: its keys
}

// Form is what a machine can hold a value against without reading it.
type Form struct {
	Base        Base
	Pattern     string           // regular expression that a text fits as a whole; "" where there is none
	Among       func() []string  // all words that stand, where they are too many to print
	Least, Most int              // number of items of a list; Most 0: no bound
	Items       func() []TypeDoc // types of the items of a list, one by one
}

// Base is the family of values that a type belongs to.
type Base int

const (
	AnyText Base = iota // text; also the base of a type without Form that is a choice of words
	AnyNumber
	Whole
	Truth
	OfDay
	OfTime
)

// Record documents one table format in the order of its declaration.
type Record struct {
	Keys       []KeyDoc
	Conditions []Condition
	Variants   *Variants // keys beyond these, by a word in one of them
}

// Variants is the formats of a table that differ by a word.
type Variants struct {
	Key   string
	Words []string
	Of    func(word string) *Record // all keys of the table where the word stands
}

// Condition is a need of a table that follows from other keys of it. Bind functions
// report it themselves where it is not met; this is how they document it.
type Condition struct {
	When *State  // absent: always
	Any  []State // at least one of them is true
	Not  []State // not all of them are true
	// Rows are the names of tables below whose rows must meet Any, each by itself, where
	// the table Head does not meet HeadAny for all of them.
	Rows    []string
	Head    string
	HeadAny []State
}

// State is a key that is there, and holds one of the values, or none of them, where
// values are given. Lacking counts a key that is not there as well.
type State struct {
	Key     string
	Is, Non []any
	Lacking bool
}

// Given is a key that is there.
func Given(key string) State { return State{Key: key} }

// Holds is a key with one of these values.
func Holds(key string, values ...any) State { return State{Key: key, Is: values} }

// Describe runs a bind function without a document and returns what it reads.
func Describe(bind func(*Keys)) *Record {
	r := &Record{}
	bind(&Keys{rec: r, table: &Node{Kind: Table}})
	return r
}

// Needs is the condition that one of the keys at least is there.
func Needs(keys ...string) Condition {
	var c Condition
	for _, k := range keys {
		c.Any = append(c.Any, Given(k))
	}
	return c
}

// OneOfTwo is the conditions that one of two keys is there and not both.
func OneOfTwo(a, b string) []Condition {
	return []Condition{Needs(a, b), {Not: []State{Given(a), Given(b)}}}
}

// Demand documents a condition; while a document is read it does nothing.
func (k *Keys) Demand(conditions ...Condition) {
	if k.rec != nil {
		k.rec.Conditions = append(k.rec.Conditions, conditions...)
	}
}

// Bound documents that there are no more than so many tables under a key; the bind
// function holds the file to it.
func (k *Keys) Bound(key string, most int) {
	if k.rec != nil {
		k.rec.Key(key).Most = most
	}
}

// Vary documents that more keys belong to the table, by the word under a key of it.
func (k *Keys) Vary(key string, words []string, of func(string) *Record) {
	if k.rec != nil {
		k.rec.Variants = &Variants{key, words, of}
	}
}

// sub documents a key that holds tables; outside a recording only its name counts.
func (k *Keys) sub(name string, shape Shape, doc string, bind func(*Keys)) KeyDoc {
	if k.rec == nil {
		return KeyDoc{Name: name}
	}
	return KeyDoc{Name: name, Shape: shape, Doc: doc, Sub: Describe(bind)}
}

// Key finds a key of the record by name, or nil.
func (r *Record) Key(name string) *KeyDoc {
	for i := range r.Keys {
		if r.Keys[i].Name == name {
			return &r.Keys[i]
		}
	}
	return nil
}
