package main

import (
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/stage"
)

// targetShape turns a moment into the list's entry.
func targetShape(t *targets.Target, p *moment.Prepared, m *moment.Moment, w *moment.Want) jsonTarget {
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
	if m.ExposureOK {
		out.Exposure = exposeShape(&m.Exposure, w)
	}
	out.ExposureWhy = m.ExposureWhy
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

// exposeShape is an exposure for scripts.
func exposeShape(a *exposure.Answer, w *moment.Want) *jsonExpose {
	known := func(v targets.Measure, figures int) *float64 {
		if !v.Known {
			return nil
		}
		return rounded(v.Value, figures)
	}
	out := &jsonExpose{Mode: a.Mode, Band: string(a.Band), BookedS: figures(a.BookedS, derivedFigures), Frames: a.Frames,
		EachS: figures(a.EachS, derivedFigures), ClockS: figures(a.ClockS, derivedFigures), MedianS: known(a.MedianS, 4), UpToS: known(a.UpToS, 4),
		PReached: known(a.PReached, 4), SaturatesAt: known(a.SaturatesAt, magDigits), LimitedBy: string(a.LimitedBy), Per: a.Per,
		PA: known(a.SlitPA, 3), Words: a.Words}
	if w.Instrument != nil {
		out.Instrument = w.Instrument.Name
	}
	if a.AtNm > 0 {
		out.AtNm = rounded(a.AtNm, 1)
	}
	if a.SNR > 0 {
		out.SNR = rounded(figures(a.SNR, derivedFigures), 4)
	}
	if a.Standard != "" {
		out.Standard = &a.Standard
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
