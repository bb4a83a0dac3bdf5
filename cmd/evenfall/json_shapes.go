package main

import (
	"encoding/json"
	"io"
	"math"
	"time"

	"evenfall/astro"
	"evenfall/targets"
)

// The shapes below are the JSON that scripts rely on: names carry their units,
// what is unknown is absent.

type jsonSite struct {
	Name string  `json:"name"`
	Lat  float64 `json:"lat_deg"`
	Lon  float64 `json:"lon_deg"`
	Elev float64 `json:"elev_m"`
}

type jsonAltAz struct {
	Az  float64 `json:"az_deg"`
	Alt float64 `json:"alt_deg"`
}

type jsonMoon struct {
	jsonAltAz
	DistanceKm  float64 `json:"distance_km"`
	Illuminated float64 `json:"illuminated"`
	PhaseAngle  float64 `json:"phase_angle_deg"`
}

type jsonList struct {
	Demonstration bool         `json:"demonstration,omitempty"`
	Site          jsonSite     `json:"site"`
	At            string       `json:"at_utc"`
	AtJD          float64      `json:"at_jd"`
	Night         string       `json:"night"`
	LST           float64      `json:"lst_h"`
	Sun           jsonAltAz    `json:"sun"`
	Moon          jsonMoon     `json:"moon"`
	Targets       []jsonTarget `json:"targets"`
}

type jsonTarget struct {
	ID            string      `json:"id,omitempty"`
	Name          string      `json:"name"`
	Kind          string      `json:"kind"`
	KindNote      string      `json:"kind_note,omitempty"`
	KindInferred  bool        `json:"kind_inferred,omitempty"`
	RA            float64     `json:"ra_deg"`
	Dec           float64     `json:"dec_deg"`
	ApparentRA    float64     `json:"apparent_ra_deg"`
	ApparentDec   float64     `json:"apparent_dec_deg"`
	Az            float64     `json:"az_deg"`
	Alt           float64     `json:"alt_deg"`
	AltRefracted  float64     `json:"alt_refracted_deg"`
	HA            float64     `json:"ha_h"`
	Parallactic   float64     `json:"parallactic_deg"`
	Airmass       *float64    `json:"airmass"`
	Rising        bool        `json:"rising"`
	MoonSep       float64     `json:"moon_sep_deg"`
	SunSep        float64     `json:"sun_sep_deg"`
	RVCorrection  float64     `json:"rv_correction_kms"`
	BJD           float64     `json:"bjd_tdb"`
	SkyMag        *float64    `json:"sky_mag_arcsec2,omitempty"`
	SkyBand       string      `json:"sky_band,omitempty"`
	Stage         jsonStage   `json:"stage"`
	Expect        jsonExpect  `json:"expect"`
	Can           []jsonSpan  `json:"can"`
	Should        []jsonSpan  `json:"should"`
	EndsBy        string      `json:"ends_by,omitempty"`
	BestUTC       string      `json:"best_utc,omitempty"`
	BestAirmass   *float64    `json:"best_airmass,omitempty"`
	Exposure      *jsonExpose `json:"exposure,omitempty"`
	ExposureWhy   string      `json:"exposure_why,omitempty"`
	BlockedBy     []jsonBlock `json:"blocked_by"`
	Rank          *int        `json:"rank"`
	Unconfirmed   []string    `json:"unconfirmed"`
	Conflicts     string      `json:"conflicts,omitempty"`
	PosUncertain  *float64    `json:"position_uncertain_arcsec,omitempty"`
	MissingOrWhys []string    `json:"why,omitempty"`
}

type jsonSpan struct {
	From  string `json:"from_utc"`
	Until string `json:"until_utc"`
}

// jsonExpose is what is booked for a target in the mode wanted.
type jsonExpose struct {
	Instrument  string   `json:"instrument"`
	Mode        string   `json:"mode"`
	Band        string   `json:"band,omitempty"`
	AtNm        *float64 `json:"at_nm,omitempty"`
	BookedS     float64  `json:"booked_s"`
	Frames      int      `json:"frames"`
	EachS       float64  `json:"each_s"`
	ClockS      float64  `json:"clock_s"`
	MedianS     *float64 `json:"median_s"`
	UpToS       *float64 `json:"up_to_s"`
	PReached    *float64 `json:"p_reached"`
	SaturatesAt *float64 `json:"saturates_at_mag"`
	LimitedBy   string   `json:"limited_by,omitempty"`
	SNR         *float64 `json:"snr"`
	Per         string   `json:"snr_per,omitempty"`
	PA          *float64 `json:"position_angle_deg"`
	Standard    *string  `json:"standard"`
	Words       []string `json:"words,omitempty"`
}

type jsonBlock struct {
	Code  string  `json:"code"`
	Words string  `json:"words"`
	Until *string `json:"until_utc"`
}

type jsonStage struct {
	Best     string             `json:"best"`
	P        map[string]float64 `json:"p"`
	Evidence []jsonEvidence     `json:"evidence"`
}

type jsonEvidence struct {
	What      string  `json:"what"`
	Log10Odds float64 `json:"log10_odds"`
	Source    string  `json:"source"`
}

type jsonExpect struct {
	Band   string      `json:"band,omitempty"`
	Mag    *float64    `json:"mag"`
	Lo     *float64    `json:"lo"`
	Hi     *float64    `json:"hi"`
	Level  float64     `json:"level"`
	Basis  string      `json:"basis"`
	Phase  *jsonPhase  `json:"phase,omitempty"`
	States []jsonState `json:"states,omitempty"`
	SB     *float64    `json:"sb_mag_arcsec2,omitempty"`
	SBLo   *float64    `json:"sb_lo,omitempty"`
	SBHi   *float64    `json:"sb_hi,omitempty"`
}

type jsonPhase struct {
	Value  *float64 `json:"value"`
	Sigma  *float64 `json:"sigma"`
	Status string   `json:"status"`
}

type jsonState struct {
	Name string  `json:"name"`
	P    float64 `json:"p"`
	Mag  float64 `json:"mag"`
	Lo   float64 `json:"lo"`
	Hi   float64 `json:"hi"`
}

// round keeps a number to so many decimals: enough for its accuracy, and the
// same on every machine.
func round(v float64, decimals int) float64 {
	scale := math.Pow(10, float64(decimals))
	return math.Round(v*scale) / scale
}

// rounded is round for numbers that may be missing: NaN is absent.
func rounded(v float64, decimals int) *float64 {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return nil
	}
	r := round(v, decimals)
	return &r
}

// Decimals of what is printed: a ten-thousandth of an arcsecond for places,
// milliseconds of the day, thousandths of magnitudes.
const (
	placeDigits = 7
	jdDigits    = 8
	magDigits   = 3
	airDigits   = 4
)

// stamp writes an instant as RFC 3339 with milliseconds.
func stamp(t astro.Instant) string {
	return t.UTC().Round(time.Millisecond).Format("2006-01-02T15:04:05.000Z")
}

func stampOrNil(t *astro.Instant) *string {
	if t == nil {
		return nil
	}
	s := stamp(*t)
	return &s
}

func spans(list []astro.Span) []jsonSpan {
	out := make([]jsonSpan, len(list))
	for i, s := range list {
		out[i] = jsonSpan{stamp(s.From), stamp(s.Until)}
	}
	return out
}

func siteShape(s astro.Site) jsonSite {
	return jsonSite{s.Name, round(s.Lat.Deg(), 6), round(s.Lon.Signed().Deg(), 6), round(s.HeightM, 1)}
}

func evidenceShape(list []targets.Evidence) []jsonEvidence {
	out := make([]jsonEvidence, len(list))
	for i, e := range list {
		out[i] = jsonEvidence{e.What, round(e.Log10Odds, 2), e.Source}
	}
	return out
}

// printJSON writes one object, indented, with a final line end.
func printJSON(w io.Writer, v any) error {
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", " ")
	return enc.Encode(v)
}
