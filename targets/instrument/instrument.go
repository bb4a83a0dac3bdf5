// Package instrument describes telescopes, cameras and their modes as
// run.toml gives them: apertures, detectors, bands, slits, overheads. It holds
// what was configured and fills in defaults; it computes no exposure.
package instrument

import (
	"evenfall/astro"
	"evenfall/targets"
)

// The kinds of instrument.
const (
	Imager = "imager"
	Slit   = "slit"
	Fast   = "fast"
)

// Slew is what a move costs: the longest of telescope, dome and readout, then
// settling and acquisition.
type Slew struct {
	RateDegS, SettleS, DomeDegS, AcquireS float64
}

// DefaultSlew returns what is assumed where run.toml is silent (common
// practice, no source).
func DefaultSlew() Slew { return Slew{RateDegS: 1.5, SettleS: 15, DomeDegS: 1, AcquireS: 120} }

// Instrument is one instrument on its telescope.
type Instrument struct {
	Name, Kind         string
	ApertureM          float64
	ObstructionM       float64
	PixelArcsec        float64
	FieldArcmin        float64
	ReadNoiseE         float64
	GainEADU           float64
	DarkES             float64
	FullWellE          float64
	LinearE            float64
	BiasADU            float64
	ADCBits            float64
	Pixels             [2]int
	DeadS              float64
	ShutterMinS        float64
	ShutterErrorS      float64
	SlitLengthArcsec   float64
	ImageQualityArcsec float64
	RotationDeg        float64
	Flip               bool
	Change             string // night or day: when it can be put on
	Modes              []Mode
	Limits             targets.Limits // the site's, with this instrument's own keys over them
	Slew               Slew
}

// Mode is one way to use an instrument.
type Mode struct {
	Name             string
	Band             targets.Band
	RangeNm          [2]float64 // 0, 0 where Band is given
	ZeroPointES      targets.Measure
	Throughput       targets.Measure
	ThroughputAt     [][2]float64 // nm, fraction; linear between
	SlitArcsec       []float64
	SlitScalePixel   float64 // pixels per arcsec of slit
	DispersionNm     float64 // nm per pixel
	ArcS, ChangeS    float64
	With             []string
	MaxSunAltitude   astro.Angle
	MaxSunAltitudeOK bool
	Use              string // science, flat, ...; "" is science
}

// Mode returns the named mode, or false.
func (i *Instrument) Mode(name string) (*Mode, bool) {
	for k := range i.Modes {
		if i.Modes[k].Name == name {
			return &i.Modes[k], true
		}
	}
	return nil, false
}
