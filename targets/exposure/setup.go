package exposure

import (
	"errors"
	"math"
	"strconv"

	"evenfall/astro"
	"evenfall/astro/photon"
	"evenfall/astro/skyglow"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// Defaults of a goal. The level is that of every brightness interval; the rest
// is common practice, no source.
const (
	defaultPercentile = 0.5
	defaultLevel      = 0.8
	defaultArea       = 10.0 // square arcsec of a nebula
	defaultAtNm       = 550.0
	guideNm           = 550.0
)

// work is an exposure being worked out.
type work struct {
	s          Setting
	det        photon.Detector
	band       targets.Band     // of the mode; of a spectrum that of the source
	at         astro.Wavelength // where it is measured
	zero       photon.ZeroPoint
	zeroES     float64
	pixel      float64 // arcsec, binned
	slit, line bool
	slitSetup  photon.Slit
	slitArcsec float64
	pa         targets.Measure
	offArcsec  float64
	image      photon.Image
	through    photon.Through
	sky        skyglow.Brightness
	skyES      float64 // of the sky itself on one pixel
	colour     float64 // added to the source's magnitude to give the one of the band
	area       float64 // summed, of an extended source
	point      bool

	booked, median, bright, faint astro.Mag
	rates                         photon.Rates // at booked
	otherPeak                     float64      // on the brightest pixel, not the target's
	guard                         float64      // the brightest pixel at the bright end
	ask                           photon.Ask
	got                           photon.Answer
	series                        bool
	words                         []string
}

// dim is 10^(-0.4 m).
func dim(m float64) float64 { return math.Exp(-m * math.Ln10 / 2.5) }

// prepare works out all that the brightness scales.
func (w *work) prepare() error {
	for _, step := range []func() error{w.equipment, w.wavelength, w.zeroPoint, w.air, w.brightness, w.flux, w.wanted} {
		if err := step(); err != nil {
			return err
		}
	}
	return nil
}

// lacking turns something that the instrument lacks into a reason.
func lacking(l instrument.Lack) *Reason {
	return &Reason{Code: targets.CodeInstrument, Key: l.Key, What: l.What, Fix: l.Fix, Lack: &l}
}

// equipment takes over what the detector is.
func (w *work) equipment() error {
	i, m := w.s.Instrument, w.s.Mode
	if i == nil || m == nil {
		return fail(targets.CodeInstrument, "instrument", "write [[instrument]] and its modes in run.toml", "no instrument")
	}
	if l := i.Lacks(); len(l) > 0 {
		return lacking(l[0])
	}
	if l := i.LacksIn(m); len(l) > 0 {
		return lacking(l[0])
	}
	bx, by := max(1, w.s.Goal.Binning[0]), max(1, w.s.Goal.Binning[1])
	w.slit = i.Kind == instrument.Slit
	w.pixel = i.PixelArcsec * math.Sqrt(float64(bx*by))
	if w.slit {
		w.pixel = i.PixelArcsec * float64(by)
	}
	w.det = photon.Detector{ReadNoiseE: i.ReadNoiseE, DarkES: i.DarkES * float64(bx*by), GainEADU: i.GainEADU, LinearE: i.LinearE,
		FullWellE: i.FullWellE, BiasADU: i.BiasADU, DeadS: i.DeadS, ShutterMinS: i.ShutterMinS, MaxFrameS: w.s.MaxFrameS}
	if i.ADCBits > 0 && i.GainEADU > 0 {
		w.det.ADCMaxADU = math.Exp2(i.ADCBits) - 1
	}
	if math.IsInf(w.det.LimitE(), 1) {
		w.words = append(w.words, "no limit of the detector is given: nothing guards against saturation; write linear_e, full_well_e or adc_bits")
	}
	return nil
}

// wavelength says where and in what band it is measured.
func (w *work) wavelength() error {
	m, g := w.s.Mode, &w.s.Goal
	w.band = m.Band
	if w.slit {
		return w.spectralPoint()
	}
	if c, _, ok := m.Narrow(); ok {
		w.at = astro.Nm(c)
		_, flux := instrument.Line(w.s.Source.Band)
		w.line = flux || w.s.Source.Nebula != nil && !w.s.Source.Nebula.Surface
		return nil
	}
	b, ok := skyglow.BandOf(string(m.Band))
	if !ok {
		return fail(targets.CodeSky, "band", "use a band of the list's columns that ends in no W", "no sky is known in band %s", m.Band)
	}
	w.at = b.Wavelength()
	if g.AtNm > 0 {
		w.words = append(w.words, "at_nm does not count for images")
	}
	return nil
}

// spectralPoint finds the wavelength of a spectrum that the S/N is meant at.
func (w *work) spectralPoint() error {
	m, g := w.s.Mode, &w.s.Goal
	lo, hi := m.RangeNm[0], m.RangeNm[1]
	if lo == 0 && hi == 0 && len(m.ThroughputAt) > 1 {
		lo, hi = m.ThroughputAt[0][0], m.ThroughputAt[len(m.ThroughputAt)-1][0]
	}
	nm := g.AtNm
	line := targets.Band(g.Line)
	if line == "" && w.s.Source.Nebula != nil && !w.s.Source.Nebula.Surface && g.AtNm == 0 {
		line = w.s.Source.Band
	}
	if at, ok := instrument.Line(line); ok {
		nm, w.line, w.band = at, w.s.Source.Nebula != nil, line
	} else if g.Line != "" {
		return fail(targets.CodeInstrument, "line", "write Ha, Hb or O3", "line %q is none that fluxes are listed of", g.Line)
	}
	if nm == 0 {
		nm = defaultAtNm
		if hi > lo && (nm < lo || nm > hi) {
			nm = (lo + hi) / 2
		}
	}
	if hi > lo && !(nm >= lo && nm <= hi) {
		return fail(targets.CodeInstrument, "at_nm", "write one within "+strconv.FormatFloat(lo, 'f', 0, 64)+" to "+strconv.FormatFloat(hi, 'f', 0, 64)+" nm",
			"%.0f nm is outside the range of %s", nm, m.Name)
	}
	w.at = astro.Nm(nm)
	if !w.line {
		w.band = w.s.Source.Band
	}
	return nil
}

// throughputAt returns a mode's throughput at a wavelength: the table, linear
// between, else the one number.
func throughputAt(m *instrument.Mode, nm float64) (float64, bool) {
	t := m.ThroughputAt
	if len(t) == 0 {
		return m.Throughput.Value, m.Throughput.Known
	}
	switch last := t[len(t)-1]; {
	case nm < t[0][0] || nm > last[0]:
		return 0, false
	case nm == last[0]:
		return last[1], true
	}
	for k := 1; k < len(t); k++ {
		if nm < t[k][0] {
			u := (nm - t[k-1][0]) / (t[k][0] - t[k-1][0])
			return t[k-1][1] + u*(t[k][1]-t[k-1][1]), true
		}
	}
	return 0, false
}

// zeroPoint works out the electrons of magnitude 0.
func (w *work) zeroPoint() error {
	i, m := w.s.Instrument, w.s.Mode
	var err error
	switch _, width, narrow := m.Narrow(); {
	case w.slit:
		w.zero, err = photon.NarrowZero(w.at, m.DispersionNm*10*float64(max(1, w.s.Goal.Binning[0])))
	case narrow:
		w.zero, err = photon.NarrowZero(w.at, width*10)
	default:
		w.zero, _ = photon.ZeroPointOf(string(m.Band)) // a measured zero point needs none
	}
	if err != nil {
		return &Reason{Code: targets.CodeInstrument, What: err.Error(), of: err}
	}
	area, err := photon.Area(i.ApertureM, i.ObstructionM)
	if err != nil {
		return &Reason{Code: targets.CodeInstrument, Key: "aperture_m", What: err.Error(), of: err}
	}
	measured := 0.0
	if m.ZeroPointES.Known {
		measured = m.ZeroPointES.Value
		if w.slit {
			measured *= float64(max(1, w.s.Goal.Binning[0]))
		}
	}
	through, ok := throughputAt(m, w.at.Nm())
	if measured == 0 && (!ok || !(through > 0)) {
		return fail(targets.CodeInstrument, "throughput_at", "write throughput_at up to there, above 0", "no throughput of %s at %.0f nm", m.Name, w.at.Nm())
	}
	if w.zeroES, err = w.zero.ZeroRate(measured, area, through); err != nil {
		return &Reason{Code: targets.CodeInstrument, Key: "zero_point_e_s", What: err.Error(), of: err}
	}
	if c := w.s.Correction; c.ZeroPointMag != 0 {
		w.zeroES *= dim(-c.ZeroPointMag)
	}
	return nil
}

// skyBand is the band that the sky is asked in.
func (w *work) skyBand() (skyglow.Band, error) {
	if w.slit {
		return skyglow.Spectral(w.at)
	}
	if c, width, ok := w.s.Mode.Narrow(); ok {
		return skyglow.Narrow(astro.Nm(c), astro.Nm(width))
	}
	b, ok := skyglow.BandOf(string(w.s.Mode.Band))
	if !ok {
		return b, errors.New("no sky is known in band " + string(w.s.Mode.Band))
	}
	return b, nil
}

// air takes over sky, extinction and seeing.
func (w *work) air() error {
	s := &w.s
	if !(s.Airmass >= 1) || s.Airmass > 40 {
		return fail(targets.CodeBelow, "", "", "below the horizon: no exposure")
	}
	if s.Sky == nil || s.Extinction == nil {
		return fail(targets.CodeSky, "", "", "the sky is not known")
	}
	b, err := w.skyBand()
	if err != nil {
		return &Reason{Code: targets.CodeSky, What: err.Error(), of: err}
	}
	if w.sky, err = s.Sky(b); err != nil {
		return &Reason{Code: targets.CodeSky, What: err.Error(), of: err}
	}
	k := s.ExtinctionMag.Value
	if !s.ExtinctionMag.Known {
		k = s.Extinction.In(b)
	}
	k += s.Correction.ExtinctionMag
	if !(k >= 0) {
		k = 0
	}
	w.through = photon.Through{Extinction: k, Airmass: s.Airmass, Sky: w.sky.Total}
	seeing := photon.Seeing{ZenithArcsec: s.SeeingArcsec, Monitor: s.Monitor, ImageQuality: s.Instrument.ImageQualityArcsec}
	if w.image.FWHMArcsec, err = seeing.Width(w.at, s.Airmass); err != nil {
		return &Reason{Code: targets.CodeSeeing, Key: "seeing_arcsec", What: err.Error(), Fix: "write seeing_arcsec in [sky], 0.1 to 10", of: err}
	}
	if w.slit {
		return w.slitOf()
	}
	return nil
}

// slitOf chooses the slit and how it stands.
func (w *work) slitOf() error {
	m, g := w.s.Mode, &w.s.Goal
	w.slitArcsec = g.SlitArcsec
	if w.slitArcsec == 0 {
		best := math.Inf(1)
		for _, v := range m.SlitArcsec {
			if d := math.Abs(v - w.image.FWHMArcsec); d < best {
				best, w.slitArcsec = d, v
			}
		}
	}
	if !(w.slitArcsec > 0) {
		return lacking(instrument.Lack{Mode: m.Name, Key: "slit_arcsec", What: "no slit", Fix: "write slit_arcsec = [0.8, 1.0, 1.5] in the mode, or in the request"})
	}
	bx := float64(max(1, g.Binning[0]))
	w.slitSetup = photon.Slit{At: w.at, ZeroES: w.zeroES, DispersionA: m.DispersionNm * 10 * bx, WidthArcsec: w.slitArcsec,
		ScalePixel: m.SlitScalePixel / bx, PixelArcsec: w.pixel, Through: w.through}
	pa, fixed, err := w.positionAngle()
	if err != nil {
		return err
	}
	w.pa = pa
	if fixed && w.s.Pointing != nil && !w.s.Corrector {
		z, q := w.s.Pointing.At(0)
		shift, err := photon.DifferentialRefraction(w.at, astro.Nm(guideNm), z, w.s.vapour())
		if err == nil {
			w.offArcsec = photon.Off(shift, astro.Deg(pa.Value).Minus(q)).Arcsec()
		}
	}
	return nil
}

// vapour is the air of the setting, or that of a high site.
func (s *Setting) vapour() photon.Vapour {
	if s.Vapour == (photon.Vapour{}) {
		return photon.DefaultVapour()
	}
	return s.Vapour
}
