package sweep

import (
	"math"
	"math/rand"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
	"evenfall/astro/meeusfence"
	"evenfall/astro/timescale"
)

const many = 360_000

var here = astro.Site{Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), HeightM: 2400}

// catalogue makes random places all over the sky, with a motion and a parallax.
func catalogue(n int, seed int64) ([]frame.Catalogue, []frame.Star) {
	r := rand.New(rand.NewSource(seed))
	cat := make([]frame.Catalogue, n)
	stars := make([]frame.Star, n)
	for i := range cat {
		cat[i] = frame.Catalogue{
			RA: astro.Deg(360 * r.Float64()), Dec: astro.Rad(math.Asin(2*r.Float64() - 1)), EpochJyr: 2016,
			PMRA: astro.Arcsec(2 * r.NormFloat64()), PMDec: astro.Arcsec(2 * r.NormFloat64()),
			Parallax: astro.Arcsec(0.2 * r.Float64()), RVKms: 50 * r.NormFloat64(),
		}
		stars[i] = frame.NewStar(cat[i])
	}
	return cat, stars
}

func instant(t testing.TB, utc time.Time) astro.Instant {
	at, err := timescale.At(utc)
	if err != nil {
		t.Fatal(err)
	}
	return at
}

// BenchmarkSweep and BenchmarkPlain belong together: ns/star of the first
// must be at most a 300th of the second's.
func BenchmarkSweep(b *testing.B) {
	_, stars := catalogue(many, 1)
	mid := frame.At(here, instant(b, time.Date(2026, 12, 2, 5, 0, 0, 0, time.UTC)))
	sky, cols := New(&mid, stars), NewColumns(many)
	at := instant(b, time.Date(2026, 12, 2, 8, 0, 0, 0, time.UTC))
	for b.Loop() {
		f := frame.At(here, at)
		moon := ephem.Moon(&f)
		sky.At(&f, moon.Dir, cols)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/many, "ns/star")
}

func BenchmarkPlain(b *testing.B) {
	cat, _ := catalogue(many/10, 1)
	at := instant(b, time.Date(2026, 12, 2, 8, 0, 0, 0, time.UTC))
	f := frame.At(here, at)
	moon := ephem.Moon(&f)
	sum := 0.0
	for b.Loop() {
		p := meeusfence.NewPlain(here, at)
		for i := range cat {
			az, alt := p.Horizontal(cat[i].RA, cat[i].Dec)
			sum += young(alt.Sin()) + astro.Separation(astro.Direction(az, alt), moon.Dir).Rad()
		}
	}
	if math.IsInf(sum, 0) {
		b.Fatal("no sum")
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(cat)), "ns/star")
}
