package bom_test

// fullPlan has every key of a plan, and fullPlanValues what they are read as. No two
// values of one record and type are the same, so a key that goes to the wrong field
// shows.
const fullPlan = `
[job]
title = "Quay Lane bakery, ground floor"
stage = "cancelled"
because = "the owner sold"
ended = 2026-12-20
install_on = 2026-12-15
profile = "us-fixed-wideband"
code = "us-nec-2020"
setting = "vehicle"
use = "business"
crew = "crew-north"
bands = ["B12", "B5", "B4", "B2"]

[operator.north]
consent = { state = "granted", ref = "mail", on = 2026-11-20, why = "asked twice" }
registered = { state = "applied", ref = "form", on = 2026-11-21, why = "by the owner" }
[operator.south]
consent = { state = "not-required", why = "own plan" }
[paper]
permit = { state = "not-required", ref = "letter", on = 2026-11-02, why = "letter of 2026-11-02" }

[site]
shell_db = 14
coldest = "-15 C"
hottest = "113 F"
wind = "160 km/h"
wind_basis = "asce7-strength"
terrain = "C"
electrode = "building"
lightning_system = "II"
lightning_down_conductors = 3
lightning_length = "9 m"
lightning_gap = "0.4 m"
lightning_medium = "brick"
lightning_earths_differ = false
mains = "protected"
volts = 12
skin = "aluminium"
[[power_line]]
at = [14.0, 6, -7.5]
kv = 13.8

[place.roof]
kind = "outdoor"
at = [0.0, 0.5, 7.5]
hottest = "65 C"
coldest = "-18 C"
access = "crew"
airbag = true
[place]
shop = { kind = "indoor" }
[[between]]
a = "roof"
b = "shop"
loss_db = [[700, 4], [2100, 7]]
[[between]]
a = "shop"
b = "store"
loss_db = 9.5

[device.mast]
part = "MT-42"
place = "roof"
free = "1.5 m"
[device.donor]
part = "ANT-LP-11"
on = "mast"
up = "1.3 m"
below_roof_edge = "2.2 m"
off_wall = "1.2 m"
aim_deg = 214
people = "2.5 m"
[device.rod]
existing = true
kind = "electrode"
place = "entry"
lightning = true
[device.dome]
part = "DOME-NF"
place = "shop"
at = [2.0, 5.0, 2.7]
supplied_by = "client"
copies = { dome-2 = [6.0, 5.0, 2.6], dome-3 = { place = "store", at = [15.0, 5.0, 2.5] }, dome-4 = { place = "attic" } }
[device.amp]
part = "AMP-W"
coupling = "cradle"
serial = "4471-A"
set = { B5 = { back_off_db = 10 }, B12 = { back_off_db = 0.5 } }

[cable.C1]
part = "CX-10"
length = "18.5 m"
from = "donor"
to = "arrestor.line"
ends = ["N male", "NC-10-NM-CRIMP"]
through = ["AD-NF-SMAM", "ATT-3"]
way = ["roof", "entry 0.5 m"]
least_bend = "60 mm"
existing = false
supplied_by = "landlord"
[cable.C2]
like = "C1"
to = "C1.2"
[[joint]]
a = "arrestor.gear"
b = "amp.donor"
way = ["entry 20 cm", "shop"]
[data.E1]
part = "CAT6A-OUT-S"
length = "22 m"
from = "radio.poe"
to = "spd.line"
way = ["roof 4 m"]
existing = true
supplied_by = "carrier"
[wire.P1]
part = "W-25-2"
length = "4 m"
from = "battery"
to = "amp.power"
fuse = "FUSE-5A"
fuse_from_source = "0.15 m"
switched = "ignition"
way = ["boot", "dash"]
existing = false
supplied_by = "garage"
[bond.G1]
from = "arrestor"
to = "bar.a"
part = "BC-6-CU"
direct = false
length = "2.1 m"
bends = 2
raceway = "metal-bonded-both-ends"
existing = true
supplied_by = "electrician"

[[signal]]
operator = "north"
band = "B12"
mhz = 737.5
width_mhz = 10
rsrp_dbm = -101
scs_khz = 30
sinr_db = 4.5
bearing_deg = 212
at = "roof, east corner"
on = 2026-11-17
through = { gain_dbi = 2, loss_db = 1.5 }
[[area]]
name = "counter"
served_by = ["dome", "dome-2"]
distance = "11 m"
walls = ["plasterboard 12.5 mm", { name = "steel shelf", loss_db = 6 }, { name = "brick", loss_db = [[700, 3], [2100, 5]] }]
floors = 1
environment = "commercial"
operators = ["north"]
target_rsrp_dbm = -95
before = [{ operator = "north", band = "B12", rsrp_dbm = -112 }, { operator = "south", band = "n77", rsrp_dbm = -120 }]
[[reading]]
what = "isolation"
from = "amp.server"
to = "amp.donor"
band = "B12"
operator = "south"
at = "counter, by the till"
mhz = 707.5
value_db = 86
value_dbm = -71
value = 1.4
value_ohm = 22
value_v = 13.6
length = "18.2 m"
serial = "R-9"
stage = "survey"
on = 2026-11-18
by = "jo"
[[reserve]]
tag = "R-107"
at = "van-1"
cable = "C1"
until = 2026-12-05
[[reserve]]
part = "NC-10-NM"
qty = 8
until = 2026-12-06
[[extra]]
part = "TAPE-SA"
qty = 2
[[extra]]
part = "CX-5"
qty = "40 ft"
[[waive]]
rule = "loss/feed"
on = "cable.C1"
band = "B2"
up_to = 7.5
because = "the owner allows no other route"
by = "site lead"
until = 2027-01-31
`

const fullPlanValues = `
Job.Title: Quay Lane bakery, ground floor
Job.Stage: cancelled
Job.Because: the owner sold
Job.Ended: 2026-12-20
Job.InstallOn: 2026-12-15
Job.Profile: us-fixed-wideband
Job.Code: us-nec-2020
Job.Setting: vehicle
Job.Use: business
Job.Crew: crew-north
Job.Bands: ["B12", "B5", "B4", "B2"] = [B12, B5, B4, B2]
Operators.1.ID: north
Operators.1.Consent.State: granted
Operators.1.Consent.Ref: mail
Operators.1.Consent.On: 2026-11-20
Operators.1.Consent.Why: asked twice
Operators.1.Registered.State: applied
Operators.1.Registered.Ref: form
Operators.1.Registered.On: 2026-11-21
Operators.1.Registered.Why: by the owner
Operators.2.ID: south
Operators.2.Consent.State: not-required
Operators.2.Consent.Why: own plan
Permit.State: not-required
Permit.Ref: letter
Permit.On: 2026-11-02
Permit.Why: letter of 2026-11-02
Site.ShellDB: 14
Site.Coldest: "-15 C" = −15 °C
Site.Hottest: "113 F" = 45 °C
Site.Wind: "160 km/h" = 44.44444444444444
Site.WindBasis: asce7-strength
Site.Terrain: C
Site.Electrode: building
Site.Lightning: II
Site.Strike.Conductors: 3
Site.Strike.Length: 9 m
Site.Strike.Gap: 0.4 m
Site.Strike.Medium: brick
Site.Strike.EarthsDiffer: false
Site.Mains: protected
Site.Volts: 12
Site.Skin: aluminium
PowerLines.1.Point: [14.0, 6, -7.5] = (14 6 -7.5)
PowerLines.1.KV: 13.8
Places.1.ID: roof
Places.1.Kind: outdoor
Places.1.Point: [0.0, 0.5, 7.5] = (0 0.5 7.5)
Places.1.Hottest: "65 C" = 65 °C
Places.1.Coldest: "-18 C" = −18 °C
Places.1.Access: crew
Places.1.Airbag: true
Places.2.ID: shop
Places.2.Kind: indoor
Betweens.1.A: roof
Betweens.1.B: shop
Betweens.1.LossDB: [[700, 4], [2100, 7]] = [(700 MHz 4), (2100 MHz 7)]
Betweens.2.A: shop
Betweens.2.B: store
Betweens.2.LossDB: 9.5 = [(0 MHz 9.5)]
Devices.1.ID: mast
Devices.1.Part: MT-42
Devices.1.Place: roof
Devices.1.Free: 1.5 m
Devices.2.ID: donor
Devices.2.Part: ANT-LP-11
Devices.2.On: mast
Devices.2.Up: 1.3 m
Devices.2.BelowEdge: 2.2 m
Devices.2.OffWall: 1.2 m
Devices.2.AimDeg: 214
Devices.2.People: 2.5 m
Devices.3.ID: rod
Devices.3.Kind: electrode
Devices.3.Existing: true
Devices.3.Place: entry
Devices.3.Lightning: true
Devices.4.ID: dome
Devices.4.Part: DOME-NF
Devices.4.SuppliedBy: client
Devices.4.Place: shop
Devices.4.Point: [2.0, 5.0, 2.7] = (2 5 2.7)
Devices.4.Copies.1.Name: dome-2
Devices.4.Copies.1.Val: [6.0, 5.0, 2.6] = (- (6 5 2.6))
Devices.4.Copies.2.Name: dome-3
Devices.4.Copies.2.Val: { place = "store", at = [15.0, 5.0, 2.5] } = (store (15 5 2.5))
Devices.4.Copies.3.Name: dome-4
Devices.4.Copies.3.Val: { place = "attic" } = (attic -)
Devices.5.ID: amp
Devices.5.Part: AMP-W
Devices.5.Coupling: cradle
Devices.5.Serial: 4471-A
Devices.5.Set.1.Name: B5
Devices.5.Set.1.Val: { back_off_db = 10 } = (10)
Devices.5.Set.2.Name: B12
Devices.5.Set.2.Val: { back_off_db = 0.5 } = (0.5)
Cables.1.ID: C1
Cables.1.Part: CX-10
Cables.1.Length: 18.5 m
Cables.1.From: donor
Cables.1.To: arrestor.line
Cables.1.Ends: ["N male", "NC-10-NM-CRIMP"] = [(N male ), (- NC-10-NM-CRIMP)]
Cables.1.Through: ["AD-NF-SMAM", "ATT-3"] = [AD-NF-SMAM, ATT-3]
Cables.1.Way: ["roof", "entry 0.5 m"] = [(roof -), (entry 0.5 m)]
Cables.1.LeastBend: "60 mm" = 0.06 m
Cables.1.Existing: false
Cables.1.SuppliedBy: landlord
Cables.2.ID: C2
Cables.2.Like: C1
Cables.2.To: C1.2
Joints.1.A: arrestor.gear
Joints.1.B: amp.donor
Joints.1.Way: ["entry 20 cm", "shop"] = [(entry 0.2 m), (shop -)]
Data.1.ID: E1
Data.1.Part: CAT6A-OUT-S
Data.1.Length: 22 m
Data.1.From: radio.poe
Data.1.To: spd.line
Data.1.Way: ["roof 4 m"] = [(roof 4 m)]
Data.1.Existing: true
Data.1.SuppliedBy: carrier
Wires.1.ID: P1
Wires.1.Part: W-25-2
Wires.1.Length: 4 m
Wires.1.From: battery
Wires.1.To: amp.power
Wires.1.Fuse: FUSE-5A
Wires.1.FuseFromSource: 0.15 m
Wires.1.Switched: ignition
Wires.1.Way: ["boot", "dash"] = [(boot -), (dash -)]
Wires.1.Existing: false
Wires.1.SuppliedBy: garage
Bonds.1.ID: G1
Bonds.1.From: arrestor
Bonds.1.To: bar.a
Bonds.1.Part: BC-6-CU
Bonds.1.Direct: false
Bonds.1.Length: 2.1 m
Bonds.1.Bends: 2
Bonds.1.Raceway: metal-bonded-both-ends
Bonds.1.Existing: true
Bonds.1.SuppliedBy: electrician
Signals.1.Operator: north
Signals.1.Band: B12
Signals.1.MHz: 737.5
Signals.1.WidthMHz: 10
Signals.1.RSRP: -101
Signals.1.SCSkHz: 30
Signals.1.SINR: 4.5
Signals.1.Bearing: 212
Signals.1.Where: roof, east corner
Signals.1.On: 2026-11-17
Signals.1.Through.GainDBi: 2
Signals.1.Through.LossDB: 1.5
Areas.1.Name: counter
Areas.1.ServedBy: ["dome", "dome-2"] = [dome, dome-2]
Areas.1.Distance: 11 m
Areas.1.Walls: ["plasterboard 12.5 mm", { name = "steel shelf", loss_db = 6 }, { name = "brick", loss_db = [[700, 3], [2100, 5]] }] = [(plasterboard 12.5 mm -), (steel shelf [(0 MHz 6)]), (brick [(700 MHz 3), (2100 MHz 5)])]
Areas.1.Floors: 1
Areas.1.Environment: commercial
Areas.1.Operators: ["north"] = [north]
Areas.1.Target: -95
Areas.1.Before: [{ operator = "north", band = "B12", rsrp_dbm = -112 }, { operator = "south", band = "n77", rsrp_dbm = -120 }] = [(north B12 -112), (south n77 -120)]
Readings.1.What: isolation
Readings.1.From: amp.server
Readings.1.To: amp.donor
Readings.1.Band: B12
Readings.1.Operator: south
Readings.1.Where: counter, by the till
Readings.1.MHz: 707.5
Readings.1.DB: 86
Readings.1.DBm: -71
Readings.1.Ratio: 1.4
Readings.1.Ohm: 22
Readings.1.V: 13.6
Readings.1.Length: 18.2 m
Readings.1.Serial: R-9
Readings.1.Stage: survey
Readings.1.On: 2026-11-18
Readings.1.By: jo
Reserves.1.Tag: R-107
Reserves.1.Where: van-1
Reserves.1.Cable: C1
Reserves.1.Until: 2026-12-05
Reserves.2.Part: NC-10-NM
Reserves.2.Qty: 8
Reserves.2.Until: 2026-12-06
Extras.1.Part: TAPE-SA
Extras.1.Qty: 2 = (2 0 m)
Extras.2.Part: CX-5
Extras.2.Qty: "40 ft" = (0 12.192 m)
Waivers.1.Rule: loss/feed
Waivers.1.On: cable.C1
Waivers.1.Band: B2
Waivers.1.UpTo: 7.5
Waivers.1.Because: the owner allows no other route
Waivers.1.By: site lead
Waivers.1.Until: 2027-01-31
`
