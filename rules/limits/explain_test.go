package limits

import (
	"strings"
	"testing"
)

func TestFormulasReadAsPeopleWriteThem(t *testing.T) {
	for _, c := range []struct{ profile, kind, direction, state, want string }{
		{"us-fixed-wideband", "gain", "uplink", "", "G ≤ −34 − RSSI + MSCL"},
		{"us-fixed-wideband", "gain", "uplink", "power-off", "G ≤ MSCL"},
		{"us-fixed-wideband", "gain", "", "", "G ≤ 6.5 + 20·log10(f/MHz)"},
		{"us-fixed-wideband", "noise_per_mhz", "uplink", "", "N ≤ −103 − RSSI"},
		{"us-fixed-wideband", "eirp", "downlink", "", "EIRP ≤ 17 dBm"},
		{"us-fixed-provider", "gain", "", "", "G ≤ −68 + MSCL + BSCL"},
		{"uk-indoor-multi", "system_gain", "", "", "G ≤ 10 − RSSI"},
		{"uk-indoor-multi", "eirp", "uplink", "", "EIRP ≤ 17 dBm per 5 MHz"},
		{"us-industrial", "noise_erp", "uplink", "", "N ≤ −43 dBm per 10 kHz"},
		{"us-mobile-wideband", "noise_per_mhz", "", "", "N ≤ −59 dBm/MHz"},
	} {
		var got []string
		for _, r := range Builtin().Profile(c.profile).Limits {
			if r.Kind.V == c.kind && r.Direction.V == c.direction && r.State.V == c.state {
				got = append(got, r.Formula())
			}
		}
		if !strings.Contains(strings.Join(got, "\n")+"\n", c.want+"\n") {
			t.Errorf("%s %s: %q, expected %q among them", c.profile, c.kind, got, c.want)
		}
	}
}

func TestExplanationNamesClauseEditionAndProof(t *testing.T) {
	p := Builtin().Profile("us-fixed-wideband")
	want := "G ≤ 6.5 + 20·log10(f/MHz), in dB, f the middle of the amplifier's own uplink in the band; " +
		"47 CFR 20.21(e)(8)(i)(C)(2)(i) (as amended by FCC 14-138 and FCC 18-35), from memory, not compared with the current text " +
		"(uplink and downlink, both at the uplink's middle)"
	if got := p.Limits[1].Explain(); got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
	want = "uplink, radio, 2305–2320 MHz: EIRP ≤ 23.98 dBm per 5 MHz; 47 CFR 27.50(a)(3) "
	for _, r := range p.Radio {
		if strings.HasPrefix(r.Explain(), want) {
			return
		}
	}
	t.Errorf("no radio row begins %q", want)
}

func TestEveryExplanationIsComplete(t *testing.T) {
	each(t, func(p *Profile, r *Row) {
		got := r.Explain()
		for _, part := range []string{r.Clause.V, r.Edition.V, ProofText(r.Proof.V), r.Unit(), "≤"} {
			if !strings.Contains(got, part) {
				t.Errorf("%s: %q does not say %q", p.ID, got, part)
			}
		}
	})
	for _, id := range Builtin().CodeIDs() {
		for _, r := range Builtin().Code(id).Rows {
			if got := r.Explain(); !strings.Contains(got, r.Says.V) || !strings.Contains(got, r.Citation()) || !strings.Contains(got, r.Figure()) {
				t.Errorf("%s: %q is not complete", id, got)
			}
		}
	}
}

func TestDutiesExplainThemselves(t *testing.T) {
	p := Builtin().Profile("us-fixed-wideband")
	for _, c := range []struct{ got, want string }{
		{p.Papers[0].Explain(), "each licensee whose network is used has consented before operation; 47 CFR 20.21(a)(1) (as amended by FCC 14-138 and FCC 18-35), read"},
		{p.Spectrum[3].Explain(), "AWS-1, uplink 1710–1755 MHz, downlink 2110–2155 MHz; 47 CFR 20.21(a)(4), part 27 (as amended by FCC 14-138 and FCC 18-35), read (the service is named in the clause; its edges are from memory)"},
		{p.Heights[0].Explain(), "antennas of fixed stations that transmit on 1710–1755 MHz stand at most 10 m above ground; 47 CFR 27.50(d)(4) "},
		{p.Level("general").Explain(), "S in W/m², averaged over 30 min: 30–300 MHz 2, 300–1500 MHz 0.00666666666666667·f/MHz, 1500–100000 MHz 10; 47 CFR 1.1310"},
		{p.Limits[2].Explain(), "uplink: P ≤ 30 dBm; 47 CFR 20.21(e)(8)(i)(D) (as amended by FCC 14-138 and FCC 18-35), read in a copy of the rule elsewhere, not in the clause itself (1 W)"},
	} {
		if !strings.HasPrefix(c.got, c.want) {
			t.Errorf("got  %s\nwant %s", c.got, c.want)
		}
	}
}

func TestCodeRowsPrintTheirFigureAsWritten(t *testing.T) {
	for _, c := range []struct{ code, row, want string }{
		{"us-nec-2020", "bond-conductor", "at least copper 10 AWG, aluminium 8 AWG, copper-clad-steel 17 AWG, bronze 17 AWG"},
		{"us-nec-2020", "aluminium-near-earth", "at least 18 in"},
		{"us-nec-2020", "fire-plenum", "one of CATVP, CMP"},
		{"us-nec-2020", "mast-bond", ""},
		{"iec-60728-11", "mast-moment", "at most 1650 N·m"},
		{"iec-60728-11", "exempt-below-edge", "more than 2 m"},
	} {
		if got := Builtin().Code(c.code).Row(c.row).Figure(); got != c.want {
			t.Errorf("%s %s: %q, expected %q", c.code, c.row, got, c.want)
		}
	}
	want := "NFPA 70 (NEC) 810.21(H), 2020"
	if got := Builtin().Code("us-nec-2020").Row("bond-conductor").Citation(); got != want {
		t.Errorf("citation %q, expected %q", got, want)
	}
	if got := Builtin().Code("us-nec-2020").Row("reversed").Citation(); got != "practice of the trade" {
		t.Errorf("a practice is cited as %q", got)
	}
}

func TestNumbersGiveWhatFollowsFromTheBand(t *testing.T) {
	rows := Builtin().Profile("us-fixed-wideband").Numbers("B5", "B999")
	if len(rows) != 1 || rows[0].Band.Name != "B5" {
		t.Fatalf("%d bands, expected B5 alone", len(rows))
	}
	var gain, open, radio int
	for _, f := range rows[0].Figures {
		switch {
		case f.Row.State.Or("on") != "on":
			t.Errorf("a row of state %s is in the table", f.Row.State.V)
		case f.Row.Kind.V == "gain" && f.Missing == nil:
			if gain++; !near(f.Value, 64.95) {
				t.Errorf("gain %v, expected 64.95", f.Value)
			}
		case f.Row.Kind.V == "gain":
			open++
		case f.Row.Class.V == Radio:
			if radio++; f.Value != 38.45 {
				t.Errorf("radio row %v, expected 38.45", f.Value)
			}
		}
	}
	if gain != 1 || open != 1 || radio != 1 {
		t.Errorf("%d gain rows with a figure, %d without, %d radio rows; expected one each", gain, open, radio)
	}
	if all := Builtin().Profile("us-fixed-wideband").Numbers(); len(all) < 7 {
		t.Errorf("only %d bands", len(all))
	}
}
