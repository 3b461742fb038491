package unit

// Patterns of the quantities that carry their unit, as regular expressions in the
// subset that editors and schemas share. They hold the form; bounds of the figure are
// left to the functions that read it, since no expression can compare numbers.
const (
	decimal = `([0-9]+\.?[0-9]*|\.[0-9]+)`
	naught  = `(-?(0+\.?0*|\.0+)|` + decimal + `)` // a figure that is not negative; −0 is none
	some    = `([0-9]*[1-9][0-9]*\.?[0-9]*|[0-9]*\.[0-9]*[1-9][0-9]*)`

	LengthPattern      = `^\s*` + naught + ` \s*(m|mm|cm|ft|in)\s*$`
	SomeLengthPattern  = `^\s*` + some + ` \s*(m|mm|cm|ft|in)\s*$`
	TemperaturePattern = `^\s*-?` + decimal + ` \s*°?[CF]\s*$`
	SpeedPattern       = `^\s*` + naught + ` \s*(m/s|mph|km/h)\s*$`
	GaugePattern       = `^\s*(([1-4]/0|[0-9]|[1-3][0-9]|40) \s*AWG|` + some + ` \s*(mm2|mm²))\s*$`
	MoneyPattern       = `^[0-9]{1,12}(\.[0-9]{1,4})?$`
)
