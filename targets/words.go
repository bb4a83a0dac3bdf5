package targets

import (
	"fmt"
	"time"

	"evenfall/astro"
)

// Where is a position in a file. Line and column count from 1, columns in
// characters; 0 means the whole line or the whole file.
type Where struct {
	File         string
	Line, Column int
}

// String writes file:line:column, leaving out what is 0.
func (w Where) String() string {
	switch {
	case w.Line == 0:
		return w.File
	case w.Column == 0:
		return fmt.Sprintf("%s:%d", w.File, w.Line)
	}
	return fmt.Sprintf("%s:%d:%d", w.File, w.Line, w.Column)
}

// Evidence is one reason for a judgement: what was seen, how strongly it
// speaks for the stage named (log10 of the odds against the rest), and the
// published source of that strength, or how else it is known.
type Evidence struct {
	What      string
	Log10Odds float64
	Source    string
}

// Magnitude is one measured brightness, the observer's own or another's.
type Magnitude struct {
	Target    string
	JD        float64 // day, in TimeScale
	TimeScale string  // JD_UTC unless given
	Band      Band
	Mag       float64
	Err       float64 // one sigma; 0: not given
	Limit     bool    // "<": fainter than Mag, not seen
	Source    string
	At        Where
}

// Request is what is wanted of a target. A number that is not Known was not
// asked for.
type Request struct {
	ID, Target, Programme  string
	Instrument, Mode       string
	Band                   Band
	AtNm                   Measure
	Line                   string
	SNR                    Measure
	SNRPer                 string // pixel, element, frame, total
	ExposureS              Measure
	Frames                 int
	AreaArcsec2            Measure
	AimEArcsec, AimNArcsec Measure
	PositionAngle          string // parallactic, any, or degrees
	Visits                 int    // 1 where not given
	MinGapH                Measure
	EveryD, EveryTolD      Measure
	PhaseFrom, PhaseTo     Measure
	Event                  string
	EventEpoch             Measure
	BeforeMin, AfterMin    Measure
	DurationMin            Measure
	PhaseSpread            bool
	SlitArcsec             Measure
	Binning                string
	Acquisition            string // direct, offset
	Earliest, Latest       time.Time
	MinAltDeg, MaxAirmass  Measure
	MinMoonSepDeg          Measure
	MaxSeeingArcsec        Measure
	SkyAtLeast             Measure // mag/arcsec2
	Photometric            bool
	MaxExtinctionMag       Measure
	Weight                 float64 // 1 where not given
	Bonus                  float64
	Backup                 bool
	Standard               string // none, flux, telluric, velocity
	Arc                    string // "", yes, no
	Notes                  string
	Extra                  []Field
	At                     Where
}

// Limits is where a telescope can point (hard) and where one wants it to
// (wished). The safety of the telescope is the observatory's: these are copies
// of its rules.
type Limits struct {
	AzimuthRateDegS   float64 // greatest rate of the azimuth drive, deg/s
	AzimuthAccelDegS2 float64
	RotatorDeg        Measure // range of the rotator each way
	Humidity          float64 // 0 to 1
	DewMarginC        float64
	WindMS            float64
	MinAltitude       astro.Angle // refracted
	WishAltitude      astro.Angle // refracted
	MaxAltitude       astro.Angle
	WishAirmass       float64
	HourAngleH        [2]float64 // hours, east negative; -12..12 is no limit
	DeclinationDeg    [2]float64
	Moon, Sun         astro.Angle // least distances
	WindSector        astro.Angle // width kept away from the wind
	Mount             string      // altaz or equatorial
	FlipMin           float64     // minutes a flip at the meridian takes
	Horizon           []HorizonPoint
}

// HorizonPoint is one corner of the site's horizon; corners are joined by
// straight lines in azimuth and altitude.
type HorizonPoint struct{ Azimuth, Altitude astro.Angle }

// DefaultLimits returns what is assumed where run.toml is silent, for an
// alt-azimuth mount.
//
// Source: common practice, no source, save that each number is the default of
// the run folder's format.
func DefaultLimits() Limits {
	return Limits{
		AzimuthRateDegS: 1.5, AzimuthAccelDegS2: 0.05,
		Humidity: 0.85, DewMarginC: 2, WindMS: 12,
		MinAltitude: astro.Deg(20), WishAltitude: astro.Deg(30), MaxAltitude: astro.Deg(88),
		WishAirmass: 2, HourAngleH: [2]float64{-6, 6}, DeclinationDeg: [2]float64{-90, 90},
		Moon: astro.Deg(15), Sun: astro.Deg(45), WindSector: astro.Deg(90), Mount: "altaz",
	}
}

// Conditions is what the sky and the dome are like now, as far as known.
type Conditions struct {
	Closed      bool    // the dome is shut
	CloudFrom   Measure // azimuths between which it is cloudy, deg,
	CloudTo     Measure // from through to, eastward
	WindFromDeg Measure
	WindMS      Measure
	Seeing      Measure // arcsec
	Extinction  Measure // of thin cloud on top of the air, mag
	Hazy        bool    // said not to be photometric
}

// Code names a limit or a reason in the words of the JSON contract.
type Code string

// The codes of blocked_by, ends_by and left_out.
const (
	CodeDaylight    Code = "daylight"
	CodeSun         Code = "sun"
	CodeBelow       Code = "below_horizon"
	CodeAltitude    Code = "altitude"
	CodeHorizon     Code = "horizon"
	CodeHourAngle   Code = "hour_angle"
	CodeDeclination Code = "declination"
	CodeZenith      Code = "zenith"
	CodeFlip        Code = "flip"
	CodeMoon        Code = "moon"
	CodeWind        Code = "wind"
	CodeCloud       Code = "cloud"
	CodeSeeing      Code = "seeing"
	CodeSky         Code = "sky"
	CodeExtinction  Code = "extinction"
	CodeSaturates   Code = "saturates"
	CodeTooFaint    Code = "too_faint"
	CodeInstrument  Code = "instrument"
	CodeWindow      Code = "window"
	CodeEvent       Code = "event"
	CodeDone        Code = "done"
	CodeClosed      Code = "closed"
	CodeNoPosition  Code = "no_position"
)
