package bom

import (
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Plan is one plan file as it was read, before anything is looked up.
type Plan struct {
	ID   string // the file's name without its ending: the job's ID
	File *source.File

	Job        Job
	Operators  []Operator
	Permit     *Evidence
	Site       Site
	PowerLines []PowerLine
	Places     []Place
	Betweens   []Between
	Devices    []DeviceRow
	Cables     []CableRow
	Joints     []JointRow
	Data       []DataRow
	Wires      []WireRow
	Bonds      []BondRow
	Signals    []Signal
	Areas      []Area
	Readings   []Reading
	Reserves   []Reserve
	Extras     []Extra
	Waivers    []Waiver
}

// Job says what the job is and how far it has come.
type Job struct {
	At        source.Place
	Title     source.Val[string]
	Stage     source.Val[string] // draft, review, construction, as-built, cancelled
	Because   source.Val[string] // of a cancelled job
	Ended     source.Val[unit.Date]
	InstallOn source.Val[unit.Date]
	Profile   source.Val[string]
	Code      source.Val[string]
	Setting   source.Val[string] // building, vehicle
	Use       source.Val[string] // personal, business, public
	Crew      source.Val[string]
	Bands     source.Val[catalog.Words]
}

// Operator is one operator whose licence is used.
type Operator struct {
	ID         string
	At         source.Place
	Consent    *Evidence
	Registered *Evidence
}

// Evidence is one paper and how far it has come.
type Evidence struct {
	At    source.Place
	State source.Val[string] // missing, applied, granted, refused, not-required
	Ref   source.Val[string]
	On    source.Val[unit.Date]
	Why   source.Val[string]
}

// Counts reports whether the paper is in hand: granted, or not required with a
// reason.
func (e *Evidence) Counts() bool {
	return e != nil && (e.State.V == "granted" || e.State.V == "not-required" && e.Why.V != "")
}

// ReadPlan reads one plan file. The plan holds what could be read, whatever
// problems there are.
func ReadPlan(d *source.Doc) (*Plan, []source.Problem) {
	p := &Plan{ID: JobOf(d.File.Path), File: d.File}
	problems := source.Read(d, p.keys)
	return p, problems
}

// JobOf is the file's name without folder and ending.
func JobOf(path string) string {
	from := 0
	for i := range len(path) {
		if path[i] == '/' {
			from = i + 1
		}
	}
	name := path[from:]
	for i := len(name) - 1; i > 0; i-- {
		if name[i] == '.' {
			return name[:i]
		}
	}
	return name
}

// DescribePlan documents the plan format.
func DescribePlan() *source.Record { return source.Describe((&Plan{}).keys) }

// What the words of a plan may be, put together once for all the rows that use them.
var (
	stages      = source.OneOf("draft", "review", "construction", "as-built", "cancelled")
	settings    = source.OneOf("building", "vehicle")
	users       = source.OneOf("personal", "business", "public")
	bandNames   = source.ListOf(catalog.BandName)
	paperStates = source.OneOf("missing", "applied", "granted", "refused", "not-required")
)

func (p *Plan) keys(k *source.Keys) {
	source.One(k, &p.Job, "job", (*Job).keys, "what the job is and how far it has come")
	source.Named(k, &p.Operators, "operator", (*Operator).keys, "operators whose licence is used")
	source.One(k, p, "paper", (*Plan).papers, "papers of the site")
	source.One(k, &p.Site, "site", (*Site).keys, "the building or vehicle and its surroundings")
	source.Rows(k, &p.PowerLines, "power_line", (*PowerLine).keys, "power lines nearby")
	source.Named(k, &p.Places, "place", (*Place).keys, "places")
	source.Rows(k, &p.Betweens, "between", (*Between).keys, "loss between two places")
	source.Named(k, &p.Devices, "device", (*DeviceRow).keys, "what is put up")
	source.Named(k, &p.Cables, "cable", (*CableRow).keys, "coaxial cables and jumpers")
	source.Rows(k, &p.Joints, "joint", (*JointRow).keys, "ports that mate directly")
	source.Named(k, &p.Data, "data", (*DataRow).keys, "Ethernet lines")
	source.Named(k, &p.Wires, "wire", (*WireRow).keys, "direct current supply")
	source.Named(k, &p.Bonds, "bond", (*BondRow).keys, "grounding and bonding")
	source.Rows(k, &p.Signals, "signal", (*Signal).keys, "survey: everything in the air")
	source.Rows(k, &p.Areas, "area", (*Area).keys, "where coverage is wanted")
	source.Rows(k, &p.Readings, "reading", (*Reading).keys, "measured values")
	source.Rows(k, &p.Reserves, "reserve", (*Reserve).keys, "stock kept for this job")
	source.Rows(k, &p.Extras, "extra", (*Extra).keys, "parts beyond what the plan implies")
	source.Rows(k, &p.Waivers, "waive", (*Waiver).keys, "findings that are accepted")
}

func (j *Job) keys(k *source.Keys) {
	j.At = k.At()
	source.Opt(k, &j.Title, "title", source.Text, "what the job is called")
	source.Opt(k, &j.Stage, "stage", stages, "how far it has come; absent: draft")
	source.Opt(k, &j.Because, "because", source.Text, "why it was cancelled")
	source.Opt(k, &j.Ended, "ended", source.Day, "when it was cancelled")
	source.Opt(k, &j.InstallOn, "install_on", source.Day, "day of the install")
	source.Opt(k, &j.Profile, "profile", source.Name, "limit profile; absent: the workspace's")
	source.Opt(k, &j.Code, "code", source.Name, "grounding and safety code; absent: the workspace's")
	source.Opt(k, &j.Setting, "setting", settings, "absent: building")
	source.Opt(k, &j.Use, "use", users, "who uses it")
	source.Opt(k, &j.Crew, "crew", source.Name, "crew of the workspace")
	source.Some(k, &j.Bands, "bands", bandNames, "bands the install is for")
	cancelled := source.Holds("stage", "cancelled")
	k.Demand(source.Condition{When: &cancelled, Any: []source.State{source.Given("because")}})
	if j.Stage.V == "cancelled" && !k.Has("because") {
		k.Missing("because", "a cancelled job says why")
	}
}

func (o *Operator) keys(k *source.Keys) {
	o.ID, o.At = k.ID(), k.At()
	o.Consent = evidence(k, "consent", "the operator agrees")
	o.Registered = evidence(k, "registered", "registered with the operator")
}

func (p *Plan) papers(k *source.Keys) {
	p.Permit = evidence(k, "permit", "permit of the local authority")
}

func evidence(k *source.Keys, name, doc string) *Evidence {
	e := new(Evidence)
	if !source.One(k, e, name, (*Evidence).keys, doc) {
		return nil
	}
	return e
}

func (e *Evidence) keys(k *source.Keys) {
	e.At = k.At()
	source.Need(k, &e.State, "state", paperStates, "how far the paper has come")
	source.Opt(k, &e.Ref, "ref", source.Text, "where it is filed")
	source.Opt(k, &e.On, "on", source.Day, "its day")
	source.Opt(k, &e.Why, "why", source.Text, "why it is not required")
}
