package catalog_test

// example is all keys of one kind, and what they are read as: the fields of the part
// and the values in them. No two values of one kind and type are the same, so a key
// that goes to the wrong field shows.
type example struct{ toml, values string }

const commonExample = `name = "the name"
maker = "Alder Works"
code = "A-1"
sheet = "sheet of 2026-01"
status = "last-buy"
instead = ["Y", "Z"]
mass_kg = 1.25
rated = ["outdoor", "riser", "plenum", "burial"]
ambient_c = [-21, 56]
tools = ["crimp die 10.9", "torque wrench"]
bags = [10, 50]
serials = true
expendable = true
`

const commonValues = `Kind %s
Name the name
Maker Alder Works
Code A-1
Sheet sheet of 2026-01
Status last-buy
Instead [Y Z]
MassKg 1.25
Rated [outdoor riser plenum burial]
AmbientC [-21 56]
Tools [crimp die 10.9 torque wrench]
Bags [10 50]
Serials true
Expendable true
`

const portsExample = `
[part.X.port.p1]
connector = "N female"
impedance_ohm = 50
use = "gnss"
poe = "passive 24 V"
unused = "never"
bands = ["B12", "n77"]
dc_out = { volts = 5, ma = 80 }
lead = { cable = "CX-5", length = "3 m", in_gain = true }
side = "server"
polarization = "-45"
[part.X.port.p2]
use = "data"
`

const portsValues = `Ports.1.Name p1
Ports.1.Connector N female
Ports.1.Impedance 50
Ports.1.Use gnss
Ports.1.PoE passive 24 V
Ports.1.Unused never
Ports.1.Bands [B12 n77]
Ports.1.DCOut.Volts 5
Ports.1.DCOut.MA 80
Ports.1.Lead.Cable CX-5
Ports.1.Lead.Length 3 m
Ports.1.Lead.InGain true
Ports.1.Side server
Ports.1.Polar -45
Ports.2.Name p2
Ports.2.Use data
`

const pathsExample = `
[[part.X.path]]
from = "p1"
to = ["p2", "p3"]
mhz = [698, 2700]
loss_db = [[700, 6.4], [2700, 6.9]]
[[part.X.path]]
from = "p2"
to = "p3"
loss_db = 30
`

const pathsValues = `Paths.1.From p1
Paths.1.To [p2 p3]
Paths.1.MHz 698–2700 MHz
Paths.1.Loss [{700 MHz 6.4} {2700 MHz 6.9}]
Paths.2.From p2
Paths.2.To [p3]
Paths.2.Loss [{0 MHz 30}]
`

const antennaExample = `xpd_db = 22
port_isolation_db = 28
max_w = 51
pim_dbc = -150
dc = "short"
wind_area_m2 = 0.11
size_mm = 640
mast_mm = [31, 52]
needs_ground_plane = true
fixing = "magnet"
`

const rangesExample = `
[[part.X.range]]
mhz = [617, 960]
gain_dbi = 8.5
vswr = 1.9
front_to_back_db = 18
beam_deg = [66, 61]
ports = ["p1"]
[[part.X.range]]
mhz = [1710, 2700]
gain_dbi = 10
`

const antennaValues = `Antenna.Ranges.1.MHz 617–960 MHz
Antenna.Ranges.1.Gain 8.5
Antenna.Ranges.1.VSWR 1.9
Antenna.Ranges.1.FB 18
Antenna.Ranges.1.Beam [66 61]
Antenna.Ranges.1.Ports [p1]
Antenna.Ranges.2.MHz 1710–2700 MHz
Antenna.Ranges.2.Gain 10
Antenna.XPD 22
Antenna.PortIsolation 28
Antenna.MaxW 51
Antenna.PIMdBc -150
Antenna.DC short
Antenna.WindAreaM2 0.11
Antenna.SizeMM 640
Antenna.MastMM [31 52]
Antenna.GroundPlane true
Antenna.Fixing magnet
`

var passive = example{
	`dc = "pass"
max_w = 52
pim_dbc = -151
isolation_db = 21
` + portsExample + pathsExample,
	portsValues + pathsValues + `Passive.DC pass
Passive.MaxW 52
Passive.PIMdBc -151
Passive.Isolation 21
`}

var supply = example{
	`volts = 48
amps = 0.6
poe = "bt3"
wind_area_m2 = 0.04
size_mm = 210
` + portsExample,
	portsValues + `Supply.Volts 48
Supply.Amps 0.6
Supply.PoE bt3
Body.WindAreaM2 0.04
Body.SizeMM 210
`}

var data = example{
	`category = "6A"
screened = true
conductor = "cca"
size = "23 AWG"
fire = "CMP"
poe = "at"
` + portsExample,
	portsValues + `Data.Category 6A
Data.Screened true
Data.Conductor cca
Data.Size 23 AWG
Data.Fire CMP
Data.PoE at
`}

var wire = example{
	`size = "2.5 mm2"
cores = 2
amps = 7.5
`,
	`Wire.Size 2.5 mm2
Wire.Cores 2
Wire.Amps 7.5
`}

var bond = example{
	`material = "copper-clad-steel"
size = "6 AWG"
insulated = true
`,
	`Bond.Material copper-clad-steel
Bond.Size 6 AWG
Bond.Insulated true
`}

var examples = map[string]example{
	"antenna": {antennaExample + portsExample + rangesExample, portsValues + antennaValues},
	"cable": {
		`impedance_ohm = 75
loss_db_per_100m = [[450, 8.9], [2000, 19.7]]
max_mhz = 5800
od_mm = 10.3
bend_radius = "4 in"
dc_ohm_per_km = 8.4
velocity = 0.85
fire = "CATVR"
`,
		`Cable.Impedance 75
Cable.Loss [{450 MHz 8.9} {2000 MHz 19.7}]
Cable.MaxMHz 5800
Cable.ODmm 10.3
Cable.Bend 0.102 m
Cable.DCOhmKm 8.4
Cable.Velocity 0.85
Cable.Fire CATVR
`},
	"connector": {
		`connector = "RP-SMA male"
impedance_ohm = 50
fits = ["CX-5", "CX-10"]
loss_db = 0.15
`,
		`Connector.Face RP-SMA male
Connector.Impedance 50
Connector.Fits [CX-5 CX-10]
Connector.LossDB 0.15
`},
	"jumper": {
		`cable = "CX-5"
length = "60 ft"
ends = ["N male", "SMA female"]
loss_db = [[700, 0.4], [2700, 0.9]]
`,
		`Jumper.Cable CX-5
Jumper.Length 18.288 m
Jumper.Ends [N male SMA female]
Jumper.Loss [{700 MHz 0.4} {2700 MHz 0.9}]
`},
	"adapter": passive, "splitter": passive, "tap": passive, "coupler": passive, "diplexer": passive,
	"filter": passive, "attenuator": passive, "dc-block": passive, "bias-tee": passive, "load": passive,
	"arrestor": {
		`principle = "gas-tube"
spark_v = 90
dc = "block"
max_w = 53
bulkhead = true
directional = true
` + portsExample + pathsExample,
		portsValues + pathsValues + `Arrestor.Principle gas-tube
Arrestor.SparkV 90
Arrestor.DC block
Arrestor.MaxW 53
Arrestor.Bulkhead true
Arrestor.Directional true
`},
	"amplifier": {
		`class = "wideband"
mobility = "mobile"
coupling = ["antenna", "cradle", "wired"]
coupling_db = 23
network_protection = true
isolation_control = true
step_db = 1.5
max_in_dbm = -9
damage_in_dbm = 11
load = { volts = [11, 15], w = 18 }
wind_area_m2 = 0.07
size_mm = 320
[[part.X.band]]
band = "B12"
uplink = { gain_db = 64, max_out_dbm = 24, nf_db = 5 }
downlink = { gain_db = 65, max_out_dbm = 12, nf_db = 6 }
[[part.X.band]]
band = "B29"
[[part.X.kit]]
side = "donor"
antenna = "ANT-1"
max_gain_dbi = 11
least_loss_db = 2.8
bands = ["B5", "B12"]
[[part.X.kit]]
side = "server"
max_gain_dbi = 3
` + portsExample,
		portsValues + `Amplifier.Class wideband
Amplifier.Mobility mobile
Amplifier.Coupling [antenna cradle wired]
Amplifier.CouplingDB 23
Amplifier.NetworkProtection true
Amplifier.IsolationControl true
Amplifier.StepDB 1.5
Amplifier.MaxIn -9
Amplifier.DamageIn 11
Amplifier.Bands.1.Band B12
Amplifier.Bands.1.Uplink.GainDB 64
Amplifier.Bands.1.Uplink.MaxOut 24
Amplifier.Bands.1.Uplink.NF 5
Amplifier.Bands.1.Downlink.GainDB 65
Amplifier.Bands.1.Downlink.MaxOut 12
Amplifier.Bands.1.Downlink.NF 6
Amplifier.Bands.2.Band B29
Amplifier.Kits.1.Side donor
Amplifier.Kits.1.Antenna ANT-1
Amplifier.Kits.1.MaxGain 11
Amplifier.Kits.1.LeastLoss 2.8
Amplifier.Kits.1.Bands [B5 B12]
Amplifier.Kits.2.Side server
Amplifier.Kits.2.MaxGain 3
Amplifier.Load.Volts [11 15]
Amplifier.Load.W 18
Body.WindAreaM2 0.07
Body.SizeMM 320
`},
	"router": {
		`bands = ["B4", "n71"]
tx_dbm = 23.5
nf_db = 7
streams = 4
max_antenna_gain_dbi = { B4 = 9.5, n71 = 6 }
load = { volts = [9, 30], w = 14 }
` + antennaExample + portsExample + rangesExample,
		portsValues + antennaValues + `Router.Bands [B4 n71]
Router.TxDBm 23.5
Router.NF 7
Router.Streams 4
Router.MaxAntennaGain.1.Name B4
Router.MaxAntennaGain.1.Val 9.5
Router.MaxAntennaGain.2.Name n71
Router.MaxAntennaGain.2.Val 6
Router.Load.Volts [9 30]
Router.Load.W 14
`},
	"supply": supply, "injector": supply, "switch": supply, "battery": supply,
	"data-cable": data, "data-arrestor": data,
	"wire": wire, "fuse": wire,
	"bond-conductor": bond, "bond-point": bond, "electrode": bond,
	"mount": {
		`mast_mm = [42, 43]
wall_mm = 2.6
yield_mpa = 235
length = "2 m"
ballast = { mass_kg = 120, base = "900 mm", friction = 0.5 }
`,
		`Mount.MastMM [42 43]
Mount.WallMM 2.6
Mount.YieldMPa 235
Mount.Length 2 m
Mount.Ballast.MassKg 120
Mount.Ballast.Base 0.9 m
Mount.Ballast.Friction 0.5
`},
	"consumable": {
		`per = "metre"
holds = "10 m"
`,
		`Consumable.Per metre
Consumable.Holds {0 10 m}
`},
}
