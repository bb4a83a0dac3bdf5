package main

import (
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/stage"
)

// targetShape turns a moment into the list's entry.
func targetShape(t *targets.Target, p *moment.Prepared, m *moment.Moment) jsonTarget {
	out := jsonTarget{
		ID: t.ID, Name: t.Name, Kind: string(t.Kind), KindNote: t.KindNote, KindInferred: t.KindInferred,
		RA: round(m.RA.Deg(), placeDigits), Dec: round(m.Dec.Deg(), placeDigits),
		ApparentRA: round(m.Place.RA.Deg(), placeDigits), ApparentDec: round(m.Place.Dec.Deg(), placeDigits),
		Az: round(m.Place.Az.Deg(), placeDigits), Alt: round(m.Place.Alt.Deg(), placeDigits),
		AltRefracted: round(m.Apparent.Deg(), placeDigits), HA: round(m.Place.HourAngle.Hours(), 8),
		Parallactic: round(m.Place.Parallact.Deg(), 6), Rising: m.Rising,
		MoonSep: round(m.MoonSep.Deg(), 5), SunSep: round(m.SunSep.Deg(), 5),
		RVCorrection: round(m.Barycentric.RVCorrectionKms, 5), BJD: round(m.Barycentric.BJDTDB, jdDigits),
		Stage: stageShape(&m.Stage), Expect: expectShape(&m.Expect),
		Can: spans(m.Course.Can), Should: spans(m.Course.Should), EndsBy: string(m.EndsBy),
		BlockedBy: blockShapes(m.BlockedBy), Unconfirmed: append([]string{}, t.Unconfirmed...),
		Conflicts: t.Conflicts, MissingOrWhys: m.Why,
	}
	if m.Sky.Known {
		out.SkyMag, out.SkyBand = rounded(m.Sky.Total.MagArcsec2(), magDigits), string(m.Sky.Band)
	}
	if m.AirOK {
		out.Airmass = rounded(float64(m.Airmass), airDigits)
	}
	if m.Course.Best != nil {
		out.BestUTC = stamp(*m.Course.Best)
		out.BestAirmass = rounded(float64(m.Course.BestAirmass), airDigits)
	}
	if m.Rank > 0 {
		r := m.Rank
		out.Rank = &r
	}
	if u := p.Drift.Uncertainty(t.Place.EpochJyr, m.At); u.Arcsec() > 0 {
		out.PosUncertain = rounded(u.Arcsec(), 1)
	}
	return out
}

func blockShapes(list []moment.Block) []jsonBlock {
	out := make([]jsonBlock, len(list))
	for i, b := range list {
		out[i] = jsonBlock{string(b.Code), b.Words, stampOrNil(b.Until)}
	}
	return out
}

// stageShape prints the probabilities unrounded: they sum to 1.
func stageShape(v *stage.Verdict) jsonStage {
	p := make(map[string]float64, len(v.P))
	for code, x := range v.P {
		p[string(code)] = x
	}
	return jsonStage{Best: v.Best, P: p, Evidence: evidenceShape(v.Evidence)}
}

func expectShape(f *light.Forecast) jsonExpect {
	out := jsonExpect{Band: string(f.Band), Level: f.Level, Basis: f.Basis}
	if f.Phase != nil {
		out.Phase = &jsonPhase{rounded(f.Phase.Value, 4), rounded(f.Phase.Sigma, 4), f.Phase.Status}
	}
	for _, s := range f.States {
		out.States = append(out.States, jsonState{s.Name, round(s.P, 4),
			round(s.Mag.Mags(), magDigits), round(s.Lo.Mags(), magDigits), round(s.Hi.Mags(), magDigits)})
	}
	if f.SB != nil {
		out.SB = rounded(f.SB.Value.MagArcsec2(), magDigits)
		out.SBLo = rounded(f.SB.Lo.MagArcsec2(), magDigits)
		out.SBHi = rounded(f.SB.Hi.MagArcsec2(), magDigits)
	}
	if f.Known {
		out.Mag = rounded(f.Mag.Mags(), magDigits)
		out.Lo = rounded(f.Lo.Mags(), magDigits)
		out.Hi = rounded(f.Hi.Mags(), magDigits)
	}
	return out
}
