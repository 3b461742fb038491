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
}

// TypeDoc documents what a value is. Bounds are nil where there is none.
type TypeDoc struct {
	Name     string // what a person would call it: "length", "dB", "one of"
	Example  string
	OneOf    []string
	Min, Max *float64
	List     *TypeDoc // of the items of a list
	Each     *TypeDoc // of the values of a table whose keys are free
}

// Record documents one table format in the order of its declaration.
type Record struct{ Keys []KeyDoc }

// Describe runs a bind function without a document and returns what it reads.
func Describe(bind func(*Keys)) *Record {
	r := &Record{}
	bind(&Keys{rec: r, table: &Node{Kind: Table}})
	return r
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
