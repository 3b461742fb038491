package catalog

import (
	"strings"
	"testing"

	"driploop/catalog/unit"
)

func TestBookReels(t *testing.T) {
	runStock(t, []stockCase{
		{name: "a reading and the cuts after it", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "61.4 m", how = "tape" }]
-- issue/quay-lane-1.toml --
sheet = { on = 2026-11-21, job = "quay-lane" }
cut = [{ tag = "R-107", length = "18.9 m", cable = "C1" }]
-- issue/waste.toml --
sheet = { on = 2026-11-22 }
cut = [{ tag = "R-107", length = "0.5 m", because = "crushed" }]
`, want: `
bin CX-10 shop 42 m
tag R-107 CX-10 shop 42 m
issued quay-lane CX-10 18.9 m
piece quay-lane/C1 18.9 m of R-107
`},
		{name: "the newest reading wins; a drop nobody explains", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "61.4 m" }]
-- counts/b.toml --
sheet = { on = 2026-11-25, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
`, want: `
bin CX-10 shop 52 m
tag R-107 CX-10 shop 52 m
note lost b:2+a:2 CX-10 R-107 shop shop 61.4 m/52 m
`},
		{name: "a reel does not grow", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- counts/b.toml --
sheet = { on = 2026-11-25, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52.001 m" }]
`, want: `
bin CX-10 shop 52.001 m
tag R-107 CX-10 shop 52.001 m
note grew b:2+a:2 CX-10 R-107 shop shop 52 m/52.001 m
`},
		{name: "a reading covers the cuts of its day", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "42.5 m" }]
cut = [{ tag = "R-107", length = "18.9 m", job = "x", cable = "C1" }]
`, want: `
bin CX-10 shop 42.5 m
tag R-107 CX-10 shop 42.5 m
issued x CX-10 18.9 m
piece x/C1 18.9 m of R-107
note same-day a:2+a:3 CX-10 R-107 shop
`},
		{name: "a reel that arrives is cut on its first day", files: `
-- in/PO-1-1.toml --
sheet = { on = 2026-11-20, order = "PO-1", where = "dock" }
reel = [{ tag = "R-110", part = "CX-10", left = "76.2 m", how = "label", sealed = true }]
-- issue/x-1.toml --
sheet = { on = 2026-11-20, job = "x" }
cut = [{ tag = "R-110", length = "20 m", cable = "C1" }]
-- orders/PO-1.toml --
order = { vendor = "tern", sent = 2026-11-01 }
line = [{ part = "CX-10", pack = "76.2 m", packs = 1 }]
`, want: `
bin CX-10 dock 56.2 m
tag R-110 CX-10 dock 56.2 m
issued x CX-10 20 m
piece x/C1 20 m of R-110
open PO-1 CX-10 0
`},
		{name: "two jobs cut 41.3 + 22.4 m from 52.0", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
cut = [{ tag = "R-107", length = "41.3 m", cable = "C1" }]
-- issue/y-1.toml --
sheet = { on = 2026-11-21, job = "y" }
cut = [{ tag = "R-107", length = "22.4 m", cable = "C1" }]
`, want: `
tag R-107 CX-10 shop 0 m
issued x CX-10 41.3 m
issued y CX-10 22.4 m
piece x/C1 41.3 m of R-107
piece y/C1 22.4 m of R-107
note below y-1:2+a:2+x-1:2 CX-10 R-107 shop 10.7 m/22.4 m
`},
		{name: "cut to the last millimetre", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
cut = [{ tag = "R-107", length = "52 m", cable = "C1" }]
`, want: `
tag R-107 CX-10 shop 0 m
issued x CX-10 52 m
piece x/C1 52 m of R-107
`},
		{name: "cut before it was there", files: `
-- issue/x-1.toml --
sheet = { on = 2026-11-19, job = "x" }
cut = [{ tag = "R-110", length = "20 m", cable = "C1" }]
-- in/PO-1-1.toml --
sheet = { on = 2026-11-20, order = "PO-1", where = "shop" }
reel = [{ tag = "R-110", part = "CX-10", left = "76.2 m" }]
-- orders/PO-1.toml --
order = { vendor = "tern" }
`, want: `
bin CX-10 shop 76.2 m
tag R-110 CX-10 shop 76.2 m
issued x CX-10 20 m
piece x/C1 20 m of R-110
note over PO-1-1:2+PO-1:1 CX-10 PO-1 0/76.2 m
note below x-1:2 CX-10 R-110 0/20 m
`},
		{name: "cut before a first reading that is no birth", files: `
-- issue/x-1.toml --
sheet = { on = 2026-11-19, job = "x" }
cut = [{ tag = "R-110", length = "20 m", cable = "C1" }]
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-110", part = "CX-10", left = "50 m" }]
`, want: `
bin CX-10 shop 50 m
tag R-110 CX-10 shop 50 m
issued x CX-10 20 m
piece x/C1 20 m of R-110
`},
		{name: "two readings of one time", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "50 m" }]
`, want: `
bin CX-10 shop 50 m
tag R-107 CX-10 shop 50 m
note counted-twice b:2+a:2 CX-10 R-107 shop 52 m/50 m
`},
		{name: "one tag on two shelves at one time", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "van-1" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
`, want: `
bin CX-10 shop 52 m
tag R-107 CX-10 shop 52 m
note clash a:2+b:2 CX-10 R-107 shop van-1 place
`},
		{name: "one tag, two parts: the first has it", files: `
-- counts/a.toml --
sheet = { on = 2026-10-20, where = "shop" }
reel = [{ tag = "R-104", part = "CX-10", left = "16.6 m" }]
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-104", part = "CX-7", left = "100 m" }]
`, want: `
bin CX-10 shop 16.6 m
tag R-104 CX-10 shop 16.6 m
note clash b:2+a:2 CX-10 R-104 part CX-7
`},
		{name: "one tag on two reels that arrived", files: `
-- in/PO-1-1.toml --
sheet = { on = 2026-11-20, order = "PO-1", where = "shop" }
reel = [{ tag = "R-110", part = "CX-10", left = "76.2 m" }]
-- in/PO-2-1.toml --
sheet = { on = 2026-11-21, order = "PO-2", where = "shop" }
reel = [{ tag = "R-110", part = "CX-10", left = "152.4 m" }]
-- orders/PO-1.toml --
order = { vendor = "tern", sent = 2026-11-01 }
line = [{ part = "CX-10", pack = "76.2 m", packs = 1 }]
-- orders/PO-2.toml --
order = { vendor = "tern", sent = 2026-11-01 }
line = [{ part = "CX-10", pack = "152.4 m", packs = 1 }]
`, want: `
bin CX-10 shop 152.4 m
tag R-110 CX-10 shop 152.4 m
open PO-1 CX-10 0
open PO-2 CX-10 0
note clash PO-2-1:2+PO-1-1:2 CX-10 R-110 shop shop birth 76.2 m/152.4 m
`},
		{name: "one arrival written down on two branches is one pack", files: `
-- in/PO-1-1.toml --
sheet = { on = 2026-11-20, order = "PO-1", where = "shop" }
reel = [{ tag = "R-110", part = "CX-10", left = "76.2 m" }]
-- in/PO-1-2.toml --
sheet = { on = 2026-11-20, order = "PO-1", where = "shop" }
reel = [{ tag = "R-110", part = "CX-10", left = "76 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-20, job = "x" }
cut = [{ tag = "R-110", length = "6 m", cable = "C1" }]
-- orders/PO-1.toml --
order = { vendor = "tern", sent = 2026-11-01 }
line = [{ part = "CX-10", pack = "76.2 m", packs = 2 }]
`, want: `
bin CX-10 shop 70 m
tag R-110 CX-10 shop 70 m
issued x CX-10 6 m
piece x/C1 6 m of R-110
open PO-1 CX-10 76.2 m
note counted-twice PO-1-2:2+PO-1-1:2 CX-10 R-110 shop shop 76.2 m/76 m
`},
	})
}

func TestBookTagsMove(t *testing.T) {
	runStock(t, []stockCase{
		{name: "from shelf to shelf", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- move/b.toml --
sheet = { on = 2026-11-21 }
move = [{ tag = "R-107", from = "shop", to = "van-1" }]
`, want: `
bin CX-10 van-1 52 m
tag R-107 CX-10 van-1 52 m
`},
		{name: "to a job with all it has, cuts for others from it, and back", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
move = [{ tag = "R-107", from = "shop", to = "job" }]
-- issue/x-2.toml --
sheet = { on = 2026-11-22 }
cut = [
  { tag = "R-107", length = "20 m", job = "x", cable = "C1" },
  { tag = "R-107", length = "7 m", job = "y", cable = "C1" },
]
-- back/c.toml --
sheet = { on = 2026-11-23, job = "x" }
move = [{ tag = "R-107", from = "job", to = "shop" }]
`, want: `
bin CX-10 shop 25 m
tag R-107 CX-10 shop 25 m
issued x CX-10 20 m
issued y CX-10 7 m
piece x/C1 20 m of R-107
piece y/C1 7 m of R-107
`},
		{name: "back from a job, read the next day: the job has used the rest", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
move = [{ tag = "R-107", from = "shop", to = "job" }]
-- back/c.toml --
sheet = { on = 2026-11-22, job = "x" }
move = [{ tag = "R-107", from = "job", to = "van-1" }]
-- counts/d.toml --
sheet = { on = 2026-11-23, where = "van-1" }
reel = [{ tag = "R-107", part = "CX-10", left = "22 m" }]
`, want: `
bin CX-10 van-1 22 m
tag R-107 CX-10 van-1 22 m
issued x CX-10 30 m
`},
		{name: "carried on before it was read", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
move = [{ tag = "R-107", from = "shop", to = "job" }]
-- back/c.toml --
sheet = { on = 2026-11-22, job = "x" }
move = [{ tag = "R-107", from = "van-1", to = "shop" }, { tag = "R-107", from = "job", to = "van-1" }]
-- counts/d.toml --
sheet = { on = 2026-11-23, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "22 m" }]
`, want: `
bin CX-10 shop 22 m
tag R-107 CX-10 shop 22 m
issued x CX-10 30 m
`},
		{name: "back where it began on one day", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "van-1" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- move/b.toml --
sheet = { on = 2026-11-21, job = "x" }
move = [
  { tag = "R-107", from = "dock", to = "van-1" },
  { tag = "R-107", from = "shop", to = "dock" },
  { tag = "R-107", from = "van-1", to = "job" },
  { tag = "R-107", from = "van-1", to = "shop" },
]
`, want: `
tag R-107 CX-10 job x 52 m
issued x CX-10 52 m
`},
		{name: "read on a shelf though nobody booked it back", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
move = [{ tag = "R-107", from = "shop", to = "job" }]
-- counts/d.toml --
sheet = { on = 2026-11-23, where = "van-1" }
reel = [{ tag = "R-107", part = "CX-10", left = "22 m" }]
`, want: `
bin CX-10 van-1 22 m
tag R-107 CX-10 van-1 22 m
issued x CX-10 30 m
note jump d:2+a:2 CX-10 R-107 van-1 job x 52 m/22 m
`},
		{name: "taken from where it is not", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- move/b.toml --
sheet = { on = 2026-11-21 }
move = [{ tag = "R-107", from = "van-1", to = "dock" }]
`, want: `
bin CX-10 dock 52 m
tag R-107 CX-10 dock 52 m
note clash b:2+a:2 CX-10 R-107 van-1 shop place
`},
		{name: "to scrap", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "2 m" }]
-- move/b.toml --
sheet = { on = 2026-11-21 }
move = [{ tag = "R-107", from = "shop", to = "scrap" }]
`, want: "tag R-107 CX-10 scrap 0 m\n"},
	})
}

func TestBookRemnants(t *testing.T) {
	const cut = `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- issue/quay-lane-1.toml --
sheet = { on = 2026-11-21, job = "quay-lane" }
cut = [{ tag = "R-107", length = "30 m", cable = "C1" }]
`
	runStock(t, []stockCase{
		{name: "two jobs give back under one tag", files: `
-- counts/a.toml --
sheet = { on = 2026-11-01, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "52 m" }]
-- back/x.toml --
sheet = { on = 2026-11-10, where = "shop", job = "x" }
reel = [{ tag = "R-108", part = "CX-10", left = "4 m", of = "R-107" }]
-- back/y.toml --
sheet = { on = 2026-11-11, where = "shop", job = "y" }
reel = [{ tag = "R-108", part = "CX-10", left = "5 m", of = "R-107" }]
`, want: `
bin CX-10 shop 57 m
tag R-107 CX-10 shop 52 m
tag R-108 CX-10 shop 5 m
issued x CX-10 -4 m
issued y CX-10 -5 m
note clash y:2+x:2 CX-10 R-108 shop shop birth 4 m/5 m
`},
		{name: "what comes back of a piece goes off its job", files: cut + `
-- back/b.toml --
sheet = { on = 2026-11-22 }
reel = [
  { tag = "quay-lane-C1", part = "CX-10", where = "shop", left = "6 m", of = "R-107" },
  { tag = "quay-lane-C1-2", part = "CX-10", where = "shop", left = "4 m", of = "R-107" },
]
`, want: `
bin CX-10 shop 32 m
tag R-107 CX-10 shop 22 m
tag quay-lane-C1 CX-10 shop 6 m
tag quay-lane-C1-2 CX-10 shop 4 m
issued quay-lane CX-10 20 m
piece quay-lane/C1 20 m of R-107
`},
		{name: "a remnant is cut on the day it came back, and read again later", files: cut + `
-- back/b.toml --
sheet = { on = 2026-11-22 }
reel = [{ tag = "quay-lane-C1", part = "CX-10", where = "shop", left = "6 m", of = "R-107" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-22, job = "x" }
cut = [{ tag = "quay-lane-C1", length = "2 m", cable = "C9" }]
-- counts/c.toml --
sheet = { on = 2026-11-25, where = "shop" }
reel = [{ tag = "quay-lane-C1", part = "CX-10", left = "4 m", of = "R-107" }]
`, want: `
bin CX-10 shop 26 m
tag R-107 CX-10 shop 22 m
tag quay-lane-C1 CX-10 shop 4 m
issued quay-lane CX-10 24 m
issued x CX-10 2 m
piece quay-lane/C1 24 m of R-107
piece x/C9 2 m of quay-lane-C1
`},
		{name: "of a reel that the job had whole", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "30 m" }]
-- issue/quay-lane-1.toml --
sheet = { on = 2026-11-21, job = "quay-lane" }
move = [{ tag = "R-107", from = "shop", to = "job" }]
-- back/b.toml --
sheet = { on = 2026-11-22 }
reel = [{ tag = "quay-lane-C1", part = "CX-10", where = "shop", left = "6 m", of = "R-107" }]
`, want: `
bin CX-10 shop 6 m
tag R-107 CX-10 job quay-lane 30 m
tag quay-lane-C1 CX-10 shop 6 m
issued quay-lane CX-10 24 m
`},
		{name: "split off on the shelf", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-107", part = "CX-10", left = "30 m" }]
-- counts/b.toml --
sheet = { on = 2026-11-22 }
reel = [{ tag = "R-108", part = "CX-10", where = "van-1", left = "12 m", of = "R-107" }]
`, want: `
bin CX-10 shop 18 m
bin CX-10 van-1 12 m
tag R-107 CX-10 shop 18 m
tag R-108 CX-10 van-1 12 m
`},
		{name: "of the first of two reels that were cut for one line", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-1", part = "CX-10", left = "30 m" }, { tag = "R-2", part = "CX-10", left = "30 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
cut = [{ tag = "R-1", length = "20 m", cable = "C1" }]
-- issue/x-2.toml --
sheet = { on = 2026-11-22, job = "x" }
cut = [{ tag = "R-2", length = "25 m", cable = "C1" }]
-- back/b.toml --
sheet = { on = 2026-11-23 }
reel = [{ tag = "x-C1", part = "CX-10", where = "shop", left = "19 m", of = "R-1" }]
`, want: `
bin CX-10 shop 34 m
tag R-1 CX-10 shop 10 m
tag R-2 CX-10 shop 5 m
tag x-C1 CX-10 shop 19 m
issued x CX-10 26 m
piece x/C1 1 m of R-1
piece x/C1 25 m of R-2
`},
		{name: "its row says which of two jobs its tag could mean", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-1", part = "CX-10", left = "30 m" }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21 }
cut = [{ tag = "R-1", length = "10 m", job = "x", cable = "y-C1" }, { tag = "R-1", length = "10 m", job = "x-y", cable = "C1" }]
-- back/b.toml --
sheet = { on = 2026-11-23, job = "x" }
reel = [{ tag = "x-y-C1", part = "CX-10", where = "shop", left = "4 m", of = "R-1" }]
`, want: `
bin CX-10 shop 14 m
tag R-1 CX-10 shop 10 m
tag x-y-C1 CX-10 shop 4 m
issued x CX-10 6 m
issued x-y CX-10 10 m
piece x/y-C1 6 m of R-1
piece x-y/C1 10 m of R-1
`},
		{name: "of nothing, and of another part", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [
  { tag = "R-107", part = "CX-10", left = "30 m" },
  { tag = "x-C1", part = "CX-7", left = "3 m", of = "R-107", job = "x" },
  { tag = "x-C2", part = "CX-7", left = "3 m", of = "R-1070", job = "x" },
]
`, want: `
bin CX-10 shop 30 m
bin CX-7 shop 6 m
tag R-107 CX-10 shop 30 m
tag x-C1 CX-7 shop 3 m
tag x-C2 CX-7 shop 3 m
issued x CX-7 -6 m
note clash a:4+a:3 CX-7 x-C1 parent CX-10
note unknown a:5 CX-7 x-C2 shop tag R-1070
`},
	})
}

func TestBookSerials(t *testing.T) {
	const counted = `
-- counts/a.toml --
sheet = { on = 2026-11-01, where = "shop" }
count = [{ part = "AMP-W", qty = 2, serials = ["A1", "A2"] }]
`
	runStock(t, []stockCase{
		{name: "they go where they are moved", files: counted + `
-- issue/x-1.toml --
sheet = { on = 2026-11-02, job = "x" }
move = [{ part = "AMP-W", from = "shop", to = "van-1", qty = 1, serials = ["A1"] }, { part = "AMP-W", from = "van-1", to = "job", qty = 1, serials = ["A1"] }]
`, want: `
bin AMP-W shop 1
bin AMP-W van-1 0
serial AMP-W A1 [job x]
serial AMP-W A2 [shop]
issued x AMP-W 1
`},
		{name: "one serial counted on two shelves", files: counted + `
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "van-1" }
count = [{ part = "AMP-W", qty = 1, serials = ["A1"] }]
`, want: `
bin AMP-W shop 2
bin AMP-W van-1 1
serial AMP-W A1 [van-1 shop]
serial AMP-W A2 [shop]
note clash b:2+a:2 AMP-W A1 van-1 shop place
`},
		{name: "a full recount settles it", files: counted + `
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "van-1" }
count = [{ part = "AMP-W", qty = 1, serials = ["A1"] }]
-- counts/c.toml --
sheet = { on = 2026-11-21, where = "shop" }
count = [{ part = "AMP-W", qty = 1, serials = ["A2"] }]
`, want: `
bin AMP-W shop 1
bin AMP-W van-1 1
serial AMP-W A1 [van-1]
serial AMP-W A2 [shop]
note jump c:2+a:2 AMP-W shop 2/1
`},
		{name: "a count that names some of its pieces says nothing of the others", files: counted + `
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "AMP-W", qty = 2, serials = ["A2"] }]
`, want: `
bin AMP-W shop 2
serial AMP-W A1 [shop]
serial AMP-W A2 [shop]
`},
		{name: "a complete count that does not list the part finds none of them", files: counted + `
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "shop", complete = true }
`, want: `
bin AMP-W shop 0
note jump b:1+a:2 AMP-W shop 2/0
`},
		{name: "one that arrives a second time", files: counted + `
-- in/PO-1-1.toml --
sheet = { on = 2026-11-20, order = "PO-1", where = "dock" }
move = [{ part = "AMP-W", qty = 1, serials = ["A1"] }]
-- orders/PO-1.toml --
order = { vendor = "tern", sent = 2026-11-01 }
line = [{ part = "AMP-W", packs = 1 }]
`, want: `
bin AMP-W dock 1
bin AMP-W shop 2
serial AMP-W A1 [dock shop]
serial AMP-W A2 [shop]
open PO-1 AMP-W 0
note clash PO-1-1:2+a:2 AMP-W A1 dock shop place
`},
		{name: "one serial issued to two jobs", files: counted + `
-- issue/x-1.toml --
sheet = { on = 2026-11-02, job = "x" }
move = [{ part = "AMP-W", from = "shop", to = "job", qty = 1, serials = ["A1"] }]
-- issue/y-1.toml --
sheet = { on = 2026-11-03, job = "y" }
move = [{ part = "AMP-W", from = "shop", to = "job", qty = 1, serials = ["A1"] }]
`, want: `
bin AMP-W shop 0
serial AMP-W A1 [job y job x]
serial AMP-W A2 [shop]
issued x AMP-W 1
issued y AMP-W 1
note clash y-1:2+x-1:2 AMP-W A1 job y job x place
`},
	})
}

func TestBookOrders(t *testing.T) {
	const order = `
-- orders/PO-31.toml --
order = { vendor = "tern", sent = 2026-11-01, to = "shop" }
line = [
  { part = "NC-10-NM", pack = 25, packs = 2, due = 2026-12-01 },
  { part = "NC-10-NM", pack = 10, packs = 1, due = 2026-11-20 },
  { brings = { AMP-W = 1, PS-12 = 2 }, packs = 2, dropped = 1, because = "last box", due = 2026-12-09 },
]
`
	runStock(t, []stockCase{
		{name: "nothing has come", files: order, want: `
open PO-31 NC-10-NM 50
open PO-31 NC-10-NM 10
open PO-31 AMP-W 1
open PO-31 PS-12 2
note overdue PO-31:4+PO-31:4 NC-10-NM shop PO-31 10/0
`},
		{name: "a part of it: what is due first is filled first", files: order + `
-- in/PO-31-1.toml --
sheet = { on = 2026-11-30, order = "PO-31", where = "dock" }
move = [{ part = "NC-10-NM", qty = 35 }, { part = "PS-12", qty = 2 }]
`, want: `
bin NC-10-NM dock 35
bin PS-12 dock 2
open PO-31 NC-10-NM 25
open PO-31 NC-10-NM 0
open PO-31 AMP-W 1
open PO-31 PS-12 0
`},
		{name: "more than was ordered, and what was not", files: order + `
-- in/PO-31-1.toml --
sheet = { on = 2026-11-30, order = "PO-31", where = "dock" }
move = [{ part = "NC-10-NM", qty = 61 }, { part = "NC-10-NF", qty = 1 }]
`, want: `
bin NC-10-NF dock 1
bin NC-10-NM dock 61
open PO-31 NC-10-NM 0
open PO-31 NC-10-NM 0
open PO-31 AMP-W 1
open PO-31 PS-12 2
note over PO-31-1:2+PO-31:3+PO-31:4 NC-10-NM PO-31 60/61
note over PO-31-1:2+PO-31:1 NC-10-NF PO-31 0/1
`},
		{name: "a substitute closes the line it came for", files: order + `
-- in/PO-31-1.toml --
sheet = { on = 2026-11-30, order = "PO-31", where = "dock" }
move = [{ part = "NC-10-NF", qty = 10, for_part = "NC-10-NM" }]
`, want: `
bin NC-10-NF dock 10
open PO-31 NC-10-NM 50
open PO-31 NC-10-NM 0
open PO-31 AMP-W 1
open PO-31 PS-12 2
`},
		{name: "what is moved on from the dock has not arrived twice", files: order + `
-- in/PO-31-1.toml --
sheet = { on = 2026-11-30, order = "PO-31", where = "dock" }
move = [{ part = "NC-10-NM", qty = 60 }, { part = "NC-10-NM", from = "dock", to = "shop", qty = 60 }]
`, want: `
bin NC-10-NM dock 0
bin NC-10-NM shop 60
open PO-31 NC-10-NM 0
open PO-31 NC-10-NM 0
open PO-31 AMP-W 1
open PO-31 PS-12 2
`},
		{name: "an order that was not sent is a wish", files: `
-- orders/PO-32.toml --
order = { vendor = "tern", to = "shop" }
line = [{ part = "NC-10-NM", pack = 25, packs = 2, due = 2026-11-01 }]
`, want: ""},
		{name: "one sent after today is no supply yet", today: "2026-10-31", files: order, want: `
note future PO-31:1+PO-31:5 AMP-W PO-31
note future PO-31:1+PO-31:3 NC-10-NM PO-31
note future PO-31:1+PO-31:4 NC-10-NM PO-31
note future PO-31:1+PO-31:5 PS-12 PO-31
`},
		{name: "a reel closes the line whose pack it is", files: `
-- orders/PO-33.toml --
order = { vendor = "tern", sent = 2026-11-01, to = "shop" }
line = [
  { part = "CX-10", pack = "152.4 m", packs = 1, due = 2026-12-05 },
  { part = "CX-10", pack = "76.2 m", packs = 2, due = 2026-12-09 },
]
-- in/PO-33-1.toml --
sheet = { on = 2026-11-30, order = "PO-33", where = "dock" }
reel = [{ tag = "R-1", part = "CX-10", left = "76.2 m" }, { tag = "R-2", part = "CX-7", left = "70 m", for_part = "CX-10" }]
`, want: `
bin CX-10 dock 76.2 m
bin CX-7 dock 70 m
tag R-1 CX-10 dock 76.2 m
tag R-2 CX-7 dock 70 m
open PO-33 CX-10 0
open PO-33 CX-10 76.2 m
`},
		{name: "the pack decides, not what is due first", files: `
-- orders/PO-33.toml --
order = { vendor = "tern", sent = 2026-11-01, to = "shop" }
line = [
  { part = "CX-10", pack = "152.4 m", packs = 1, due = 2026-12-05 },
  { part = "CX-10", pack = "76.2 m", packs = 1, due = 2026-12-09 },
]
-- in/PO-33-1.toml --
sheet = { on = 2026-11-30, order = "PO-33", where = "dock" }
reel = [{ tag = "R-1", part = "CX-10", left = "76.2 m" }]
`, want: `
bin CX-10 dock 76.2 m
tag R-1 CX-10 dock 76.2 m
open PO-33 CX-10 152.4 m
open PO-33 CX-10 0
`},
		{name: "a second file for an order adds nothing", files: order + strings.Replace(order, "orders/PO-31", "orders/old/PO-31", 1), want: `
open PO-31 NC-10-NM 50
open PO-31 NC-10-NM 10
open PO-31 AMP-W 1
open PO-31 PS-12 2
note overdue PO-31:4+PO-31:4 NC-10-NM shop PO-31 10/0
`},
		{name: "names an order leads with", files: `
-- orders/PO-34.toml --
order = { vendor = "tern", sent = 2026-11-01, to = "shpo" }
line = [{ part = "NOPE", packs = 1 }]
`, want: `
open PO-34 NOPE 1
note unknown PO-34:1 NOPE shelf shpo
note unknown PO-34:2 NOPE part NOPE
`},
	})
}

func TestInboundOfPart(t *testing.T) {
	s := stockCase{files: `
-- orders/PO-31.toml --
order = { vendor = "tern", sent = 2026-11-01, to = "shop" }
line = [{ part = "NC-10-NM", pack = 25, packs = 2 }, { part = "NC-10-NF", packs = 3 }]
`}.book(t)
	if q, lines := s.Inbound("NC-10-NM"); q != (Quantity{Each: 50}) || len(lines) != 1 {
		t.Errorf("%s inbound on %d lines", q, len(lines))
	}
}

// What is known of a reel besides its length.
func TestBookTagKnows(t *testing.T) {
	s := stockCase{files: `
-- in/PO-1-1.toml --
sheet = { on = 2026-11-20, order = "PO-1", where = "dock" }
reel = [
  { tag = "R-1", part = "CX-10", left = "76.2 m", how = "label", sealed = true },
  { tag = "R-2", part = "CX-10", left = "76.2 m", how = "label", sealed = true },
]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
cut = [{ tag = "R-2", length = "20 m", cable = "C1" }]
-- back/b.toml --
sheet = { on = 2026-11-22 }
reel = [{ tag = "x-C1", part = "CX-10", where = "shop", left = "4 m", of = "R-2", how = "guess" }]
`}.book(t)
	day := func(d int) Moment { return Moment{Day: unit.Date{Year: 2026, Month: 11, Day: d}} }
	for _, want := range []Tag{
		{ID: "R-1", Where: "dock", Kind: "inbound", Left: 76200, How: "label", Sealed: true, Order: "PO-1", Read: day(20)},
		{ID: "R-2", Where: "dock", Kind: "inbound", Left: 56200, How: "label", Order: "PO-1", Read: day(20)},
		{ID: "x-C1", Where: "shop", Kind: "shop", Left: 4000, How: "guess", Of: "R-2", Read: day(22)},
	} {
		got := *s.Tag(want.ID)
		want.Part, want.At = "CX-10", got.At
		if got != want {
			t.Errorf("got  %+v\nwant %+v", got, want)
		}
	}
}
