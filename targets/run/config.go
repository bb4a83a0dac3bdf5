// Package run opens a run folder: the configuration in run.toml, lists,
// requests and magnitudes. It says what is wrong with them, where, and what to
// write; what is right still counts. It makes new run folders. It computes
// nothing about the sky.
package run

import (
	"time"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/instrument"
	"evenfall/targets/table"
)

// Config is run.toml.
type Config struct {
	Title       string
	Site        astro.Site
	Sky         Sky
	Limits      targets.Limits // of the site, with its horizon
	Slew        instrument.Slew
	Instruments []instrument.Instrument
	Nights      []NightPlan
	Upkeep      Upkeep
	Defaults    map[targets.Kind]Default
	HandOver    HandOver
	Population  targets.Population // that giants are taken for
}

// Sky is what is known of the sky of the site; measured values take precedence
// over models.
type Sky struct {
	DarkMagArcsec2  map[string]float64 // by band
	ExtinctionMag   map[string]float64 // by band, mag per airmass
	LightPollution  map[string]float64 // by band, mag/arcsec2; "" all bands
	SolarActivity   float64            // F10.7 in MJy
	SeeingArcsec    float64            // zenith, 500 nm
	SolarGiven      bool
	SeeingGiven     bool
	ExtinctionGiven bool
}

// NightPlan is one night of the allocation.
type NightPlan struct {
	Date             astro.Date
	From, Until      string // HH:MM or RFC 3339, UTC; "" the night's own end
	Instruments      []string
	ClearProbability float64
	At               targets.Where
}

// Upkeep is recurring work that a plan leaves room for.
type Upkeep struct {
	FocusEveryH, FocusS  float64
	PointingCheckEveryH  targets.Measure
	ArcWithEach, Flats   bool
	FlatsText            string // what is said of flats where it is not yes or no
	FocusGiven, ArcGiven bool
}

// Default is what is asked of targets of a kind without a request.
type Default struct {
	Instrument, Mode string
	Band             targets.Band
	SNR, ExposureS   targets.Measure
	Weight           float64
	Given            bool // run.toml says something of the kind
}

// HandOver is how coordinates are given to the operator.
type HandOver struct {
	Motion, Format, Separator string
	Order                     []string
}

// ParseConfig reads run.toml.
//
// Returns:
//   - the configuration, with defaults where the file is silent or wrong; nil
//     where it gives no usable position of the site.
//   - every problem, with line and column.
//
// Checked: TestConfigBad, TestTemplateIsWhole, FuzzParseConfig.
func ParseConfig(data []byte, name string) (*Config, []*table.Error) {
	t := &tree{name: name, data: append([]byte(nil), data...)}
	root := t.parse()
	c := &Config{Limits: targets.DefaultLimits(), Slew: instrument.DefaultSlew()}
	t.word(root, "title", &c.Title, "Run of December")
	placed := t.site(root, c)
	t.sky(root, c)
	limits, _ := t.sub(root, "limits")
	t.limits(limits, &c.Limits, true)
	t.horizon(root, c)
	slew, _ := t.sub(root, "slew")
	t.slew(slew, &c.Slew)
	t.instruments(root, c)
	t.nights(root, c)
	t.upkeep(root, c)
	t.defaults(root, c)
	t.handOver(root, c)
	t.population(root, c)
	t.leftovers(root)
	if !placed {
		return nil, t.problems
	}
	return c, t.problems
}

// site reads [site]; false: there is no position.
func (t *tree) site(root *block, c *Config) bool {
	b, ok := t.sub(root, "site")
	if !ok {
		t.problem(targets.Where{File: t.name}, "site", "", "missing", "write [site] with latitude_deg and longitude_deg")
	}
	var lat, lon, elev float64
	hasLat := t.number(b, "latitude_deg", &lat, bounds{-90, 90, "deg", "-29.26"})
	hasLon := t.number(b, "longitude_deg", &lon, bounds{-360, 360, "deg, east positive", "-70.73"})
	t.number(b, "elevation_m", &elev, bounds{-500, 9000, "m", "2400"})
	c.Site = astro.Site{Lat: astro.Deg(lat), Lon: astro.Deg(lon), HeightM: elev, Air: astro.DefaultWeather(elev)}
	t.word(b, "name", &c.Site.Name, "my observatory")
	t.number(b, "pressure_hpa", &c.Site.Air.PressureHPa, bounds{0, 1100, "hPa", "756"})
	t.number(b, "temperature_c", &c.Site.Air.TemperatureC, bounds{-90, 60, "C", "10"})
	t.number(b, "humidity", &c.Site.Air.Humidity, bounds{0, 1, "", "0.3"})
	t.number(b, "dut1_s", &c.Site.DUT1, bounds{-0.9, 0.9, "s", "-0.05"})
	var zone string
	if t.word(b, "time_zone", &zone, "America/Santiago") {
		if _, err := time.LoadLocation(zone); err != nil {
			t.problem(b.keys["time_zone"].at, "site.time_zone", zone, "no time zone", "write an IANA name, e.g. America/Santiago, or UTC")
		} else if zone != "UTC" {
			c.Site.Zone = zone
		}
	}
	for key, has := range map[string]bool{"latitude_deg": hasLat, "longitude_deg": hasLon} {
		if _, there := b.keys[key]; ok && !has && !there {
			t.problem(b.at, "site."+key, "", "missing", "write "+key+" in degrees, east and north positive")
		}
	}
	return hasLat && hasLon
}

// bandNumbers reads a table of numbers by band, or one number for all.
func (t *tree) bandNumbers(b *block, key string, may bounds) map[string]float64 {
	n, ok := b.ask(key)
	if !ok {
		return nil
	}
	if v, single := n.value.(float64); single {
		if v < may.lo || v > may.hi {
			t.problem(n.at, b.field(key), n.text, "out of range", "write "+key+" = "+may.example)
			return nil
		}
		return map[string]float64{"": v}
	}
	s, ok := n.value.(*block)
	if !ok {
		t.wrong(b, key, n, "a table by band", may.example)
		return nil
	}
	out := map[string]float64{}
	for _, band := range s.order {
		var v float64
		one := may
		one.example = "0.13"
		if t.number(s, band, &v, one) {
			out[band] = v
		}
	}
	return out
}

func (t *tree) sky(root *block, c *Config) {
	b, _ := t.sub(root, "sky")
	c.Sky = Sky{SolarActivity: 0.8, SeeingArcsec: 1.0}
	c.Sky.DarkMagArcsec2 = t.bandNumbers(b, "dark_mag_arcsec2", bounds{5, 26, "", "{V = 21.9}"})
	c.Sky.ExtinctionMag = t.bandNumbers(b, "extinction_mag", bounds{0, 5, "", "{V = 0.13}"})
	c.Sky.LightPollution = t.bandNumbers(b, "light_pollution_mag_arcsec2", bounds{5, 40, "", "{V = 25.0}"})
	c.Sky.SolarGiven = t.number(b, "solar_activity", &c.Sky.SolarActivity, bounds{0.5, 4, "MJy", "0.8"})
	c.Sky.SeeingGiven = t.number(b, "seeing_arcsec", &c.Sky.SeeingArcsec, bounds{0.1, 10, "arcsec", "1.0"})
	c.Sky.ExtinctionGiven = len(c.Sky.ExtinctionMag) > 0
}

func (t *tree) horizon(root *block, c *Config) {
	for _, b := range t.each(root, "horizon") {
		var az, alt float64
		ok1 := t.number(b, "azimuth_deg", &az, bounds{0, 360, "deg, north through east", "90"})
		ok2 := t.number(b, "altitude_deg", &alt, bounds{-5, 90, "deg", "12"})
		if ok1 && ok2 {
			c.Limits.Horizon = append(c.Limits.Horizon, targets.HorizonPoint{Azimuth: astro.Deg(az), Altitude: astro.Deg(alt)})
			continue
		}
		t.problem(b.at, b.path, "", "a corner wants azimuth_deg and altitude_deg; it is left out", "write both")
	}
}

func (t *tree) slew(b *block, s *instrument.Slew) {
	t.number(b, "rate_deg_s", &s.RateDegS, bounds{0.01, 50, "deg/s", "1.5"})
	t.number(b, "settle_s", &s.SettleS, bounds{0, 3600, "s", "15"})
	t.number(b, "dome_deg_s", &s.DomeDegS, bounds{0.01, 50, "deg/s", "1"})
	t.number(b, "acquire_s", &s.AcquireS, bounds{0, 3600, "s", "120"})
}

// limits reads the keys of [limits]; an instrument's own keys go over the
// site's.
func (t *tree) limits(b *block, l *targets.Limits, site bool) {
	given := t.word(b, "mount", &l.Mount, "altaz", "altaz", "equatorial")
	if site || given {
		l.MaxAltitude = astro.Deg(88)
		if l.Mount == "equatorial" {
			l.MaxAltitude = astro.Deg(90)
		}
	}
	angle := func(key string, into *astro.Angle, may bounds) {
		v := into.Deg()
		if t.number(b, key, &v, may) {
			*into = astro.Deg(v)
		}
	}
	t.number(b, "azimuth_rate_deg_s", &l.AzimuthRateDegS, bounds{0.001, 50, "deg/s", "1.5"})
	t.number(b, "azimuth_accel_deg_s2", &l.AzimuthAccelDegS2, bounds{0.0001, 50, "deg/s2", "0.05"})
	t.measure(b, "rotator_deg", &l.RotatorDeg, bounds{0, 720, "deg", "200"})
	t.number(b, "humidity_limit", &l.Humidity, bounds{0, 1, "", "0.85"})
	t.number(b, "dew_margin_c", &l.DewMarginC, bounds{0, 30, "C", "2"})
	t.number(b, "wind_limit_ms", &l.WindMS, bounds{0, 100, "m/s", "12"})
	angle("min_altitude_deg", &l.MinAltitude, bounds{-2, 90, "deg", "20"})
	angle("wish_altitude_deg", &l.WishAltitude, bounds{-2, 90, "deg", "30"})
	angle("max_altitude_deg", &l.MaxAltitude, bounds{0, 90, "deg", "88"})
	t.number(b, "wish_airmass", &l.WishAirmass, bounds{1, 40, "", "2"})
	if v, ok := t.numbers(b, "hour_angle_h", 2, "[-6, 6]"); ok {
		l.HourAngleH = [2]float64{v[0], v[1]}
	}
	if v, ok := t.numbers(b, "declination_deg", 2, "[-90, 90]"); ok {
		l.DeclinationDeg = [2]float64{v[0], v[1]}
	}
	angle("moon_deg", &l.Moon, bounds{0, 180, "deg", "15"})
	angle("sun_deg", &l.Sun, bounds{0, 180, "deg", "45"})
	angle("wind_sector_deg", &l.WindSector, bounds{0, 360, "deg", "90"})
	t.number(b, "flip_min", &l.FlipMin, bounds{0, 600, "min", "5"})
	t.order(b, l)
}

// order reports limits that leave nothing.
func (t *tree) order(b *block, l *targets.Limits) {
	refuse := func(key string, reset func()) {
		if n, ok := b.keys[key]; ok {
			t.problem(n.at, b.field(key), n.text, "leaves nothing of the sky; the default is taken", "write the smaller bound first")
			reset()
		}
	}
	d := targets.DefaultLimits()
	if !l.MinAltitude.Less(l.MaxAltitude) {
		for _, key := range []string{"min_altitude_deg", "max_altitude_deg"} {
			refuse(key, func() { l.MinAltitude, l.MaxAltitude = d.MinAltitude, d.MaxAltitude })
		}
	}
	if l.HourAngleH[0] >= l.HourAngleH[1] {
		refuse("hour_angle_h", func() { l.HourAngleH = d.HourAngleH })
	}
	if l.DeclinationDeg[0] >= l.DeclinationDeg[1] {
		refuse("declination_deg", func() { l.DeclinationDeg = d.DeclinationDeg })
	}
}
