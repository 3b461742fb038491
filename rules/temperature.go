package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// endsOf lists the places of what a cable's ends go to, for a cable whose way the
// plan leaves out.
func (c *Case) endsOf(x *bom.Cable) []*bom.Place {
	var out []*bom.Place
	for _, e := range x.Ends {
		for _, m := range e.Mates {
			if o := m.Other(e); o.Device != nil && o.Device.Place != nil {
				out = append(out, o.Device.Place)
			}
		}
	}
	return out
}

// temperatures are the coldest and the hottest that a cable meets on its way; in
// the weather, an attic and a vehicle those of the site, elsewhere 20 °C.
func (c *Case) temperatures(way []bom.Section, ends []*bom.Place) (cold, hot unit.Celsius) {
	places := ends
	if len(way) > 0 {
		places = nil
		for _, s := range way {
			places = append(places, s.Place)
		}
	}
	cold, hot = 20, 20
	for i, p := range places {
		lo, hi := c.placeTemperatures(p)
		if i == 0 {
			cold, hot = lo, hi
			continue
		}
		cold, hot = min(cold, lo), max(hot, hi)
	}
	return cold, hot
}

func (c *Case) placeTemperatures(p *bom.Place) (cold, hot unit.Celsius) {
	cold, hot = 20, 20
	switch p.Kind.V {
	case "outdoor", "attic", "vehicle-skin", "vehicle-cabin":
		cold, hot = c.Plan.Site.Coldest.Or(20), c.Plan.Site.Hottest.Or(20)
	}
	return p.Coldest.Or(cold), p.Hottest.Or(hot)
}

// fit is the attenuation curve of a cable part, fitted once.
func (f *Firm) fit(p *catalog.Part) (rf.Cable, error) {
	type fitted struct {
		cable rf.Cable
		err   error
	}
	if v, ok := f.fits.Load(p); ok {
		return v.(fitted).cable, v.(fitted).err
	}
	c, err := rf.FitCable(rfPoints(p.Cable.Loss.V), unit.MHz(p.Cable.MaxMHz.V))
	f.fits.Store(p, fitted{c, err})
	return c, err
}
