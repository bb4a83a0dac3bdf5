package moment

import (
	"sync"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/builtin"
)

var testSite = func() astro.Site {
	return astro.Site{Name: "test", Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), HeightM: 2400, Air: astro.DefaultWeather(2400)}
}()

func testNight(t testing.TB, limits targets.Limits) *Night {
	t.Helper()
	n, err := NewNight(testSite, astro.Date{Year: 2026, Month: 12, Day: 1}, limits, targets.Conditions{})
	if err != nil {
		t.Fatal(err)
	}
	return n
}

func testInstant(t testing.TB, s string) astro.Instant {
	t.Helper()
	utc, err := time.Parse(time.RFC3339, s)
	if err != nil {
		t.Fatal(err)
	}
	at, err := timescale.At(utc)
	if err != nil {
		t.Fatal(err)
	}
	return at
}

func testStars(t testing.TB) []Prepared {
	t.Helper()
	return preparedStars()
}

// preparedStars are the built-in stars, made once; nobody changes them.
var preparedStars = sync.OnceValue(func() []Prepared {
	stars, err := builtin.Stars()
	if err != nil {
		panic(err)
	}
	out := make([]Prepared, len(stars))
	for i := range stars {
		out[i] = Prepare(stars[i], nil, sharedModels())
	}
	return out
})

func BenchmarkPrepare(b *testing.B) {
	stars, err := builtin.Stars()
	if err != nil {
		b.Fatal(err)
	}
	models := NewModels()
	for i := 0; b.Loop(); i++ {
		Prepare(stars[i%len(stars)], nil, models)
	}
}

func BenchmarkTonight(b *testing.B) {
	n, stars := testNight(b, targets.DefaultLimits()), testStars(b)
	for i := 0; b.Loop(); i++ {
		Tonight(n, &stars[i%len(stars)], Want{})
	}
}

func BenchmarkOf(b *testing.B) {
	n, stars := testNight(b, targets.DefaultLimits()), testStars(b)
	s := NewScene(n, testInstant(b, "2026-12-02T04:00:00Z"))
	courses := make([]Course, len(stars))
	for i := range stars {
		courses[i] = Tonight(n, &stars[i], Want{})
	}
	for i := 0; b.Loop(); i++ {
		k := i % len(stars)
		Of(&s, &stars[k], &courses[k], Want{})
	}
}
