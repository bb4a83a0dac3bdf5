package sweep

import (
	"math"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/check"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
)

// agreement is how far sweep and frame may differ in altitude, seconds of arc.
// What the sweep leaves out (the change of parallax, motion and deflection over
// half a day, second order in the change of velocity) is below 0.02 but beside
// the Sun, where deflection changes faster; the demand is 1.
const agreement = 0.1

// The sweep keeps the place of the night's middle; over the whole night, noon
// to noon, at all latitudes, it must agree with the full place.
func TestSweepAgreesWithFrame(t *testing.T) {
	_, stars := catalogue(400, 7)
	worst := 0.0
	for _, lat := range []float64{-89.9, -67, -29.26, 0, 19.8, 52, 70, 90} {
		site := astro.Site{Lat: astro.Deg(lat), Lon: astro.Deg(-70.73), HeightM: 2400}
		for _, month := range []time.Month{1, 4, 7, 10} {
			middle := instant(t, time.Date(2027, month, 11, 5, 0, 0, 0, time.UTC))
			mid := frame.At(site, middle)
			sky, cols := New(&mid, stars), NewColumns(len(stars))
			for h := -12.0; h <= 12; h += 4 {
				f := frame.At(site, middle.Add(time.Duration(h*3600e9)))
				moon := ephem.Moon(&f)
				sky.At(&f, moon.Dir, cols)
				for i := range stars {
					p := f.Horizontal(&stars[i])
					off := math.Abs(p.Alt.Minus(Altitude(cols.SinAlt[i])).Arcsec())
					// the sine says little at the zenith: 1e-16 there is 0.003 arcsec
					worst = math.Max(worst, off)
					if off > agreement {
						t.Errorf("star %d lat %g month %d hour %+g: altitudes differ by %.3f arcsec", i, lat, month, h, off)
					}
					checkColumns(t, &p, moon.Dir, cols, i)
				}
			}
		}
	}
	t.Logf("greatest difference in altitude %.4f arcsec", worst)
}

func checkColumns(t *testing.T, p *frame.Place, moon astro.Vec, c *Columns, i int) {
	t.Helper()
	sep := astro.Separation(p.Dir, moon)
	check.Near(t, float64(c.CosMoon[i]), sep.Cos(), 4e-6, "cosine of the Moon's distance")
	if p.Alt.Deg() < 3 {
		return
	}
	x, err := air.MassYoung(p.Alt)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, float64(c.Airmass[i]), float64(x), 2e-6*float64(x), "airmass at %.2f deg", p.Alt.Deg())
}
