package astro

import "math"

// Site is a place of observation and the air above it.
type Site struct {
	Name     string
	Lat, Lon Angle   // geodetic, WGS84; longitude east positive
	HeightM  float64 // above the ellipsoid, metres
	Air      Weather
	DUT1     float64 // UT1 - UTC, seconds, -0.9 to 0.9; 0 where not given
	Zone     string  // IANA name of the zone for display; "" is UTC
}

// Weather is what refraction depends on.
type Weather struct {
	PressureHPa  float64 // at the site, hPa; 0: no air, no refraction
	TemperatureC float64 // degrees Celsius
	Humidity     float64 // relative, 0 to 1
	Colour       Wavelength
}

// StandardPressure returns the pressure of the ISA atmosphere at a height.
//
//	P = 1013.25 (1 - 2.25577e-5 H)^5.25588
//
// Given:
//   - heightM: height above sea level, metres, -1000 to 11000.
//
// Returns:
//   - hPa.
//
// Source: [cite.ISO2533]; the constants as commonly printed.
//
// Checked: TestStandardPressure, 0.01 hPa.
func StandardPressure(heightM float64) float64 {
	return 1013.25 * math.Pow(1-2.25577e-5*heightM, 5.25588)
}

// DefaultWeather returns what is assumed where nothing is known: pressure from
// the height, 10 C, humidity 0.3, 0.55 micrometres.
func DefaultWeather(heightM float64) Weather {
	return Weather{StandardPressure(heightM), 10, 0.3, Micron(0.55)}
}
