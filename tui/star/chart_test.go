package star

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/tui/kit"
)

// invented gives the chart what a test wants.
type invented struct {
	kit.Forecast
	at   func(days float64) light.Forecast
	past []light.Seen
	zero astro.Instant
}

func (i invented) Chart(_ *moment.Prepared, at []astro.Instant, _ light.Ask) []light.Forecast {
	out := make([]light.Forecast, len(at))
	for k := range at {
		out[k] = i.at(at[k].Sub(i.zero).Hours() / 24)
	}
	return out
}

func (i invented) Past(*moment.Prepared) []light.Seen { return i.past }

func nightOf(t testing.TB) *moment.Night {
	t.Helper()
	site := astro.Site{Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), Air: astro.DefaultWeather(2400)}
	n, err := moment.NewNight(site, astro.Date{Year: 2026, Month: 12, Day: 1}, targets.DefaultLimits(), targets.Conditions{})
	if err != nil {
		t.Fatal(err)
	}
	return n
}

func seen(n *moment.Night, days, mag float64, change func(*light.Seen)) light.Seen {
	s := light.Seen{At: n.Midnight.Add(time.Duration(days * 86400e9)), Used: true, Magnitude: targets.Magnitude{Band: "V", Mag: mag}}
	if change != nil {
		change(&s)
	}
	return s
}

// rowsOf draws a chart and returns its rows as text.
func rowsOf(c *chart) []string {
	_, h := c.raster.Size()
	out := make([]string, h)
	for r := range out {
		p := kit.NewPen(c.key.look, c.key.cols)
		c.raster.Row(p, r, nil)
		out[r] = p.String()
	}
	return out
}

// Brighter stands higher, the past on the left of tonight, each magnitude with
// its sign; the forecast begins tonight.
func TestChart(t *testing.T) {
	n := nightOf(t)
	from := invented{zero: n.Midnight, at: func(days float64) light.Forecast {
		m := 8 + days/100
		return light.Forecast{Band: "V", Known: true, Mag: astro.Mags(m), Lo: astro.Mags(m - 0.5), Hi: astro.Mags(m + 0.5), Level: 0.8, Basis: "invented"}
	}, past: []light.Seen{
		seen(n, -100, 7, nil), seen(n, -80, 11, nil), seen(n, -60, 9, func(s *light.Seen) { s.Limit = true }),
		seen(n, -40, 9, func(s *light.Seen) { s.Unlikely = true }), seen(n, -20, 9, func(s *light.Seen) { s.Used = false }),
		seen(n, -10, 9, func(s *light.Seen) { s.Band = "B" }), seen(n, -9, math.NaN(), nil), seen(n, 200, 9, nil)}}
	p := &moment.Prepared{}
	key := chartKey{p: p, night: n, ask: light.Ask{Band: "V"}, cols: 70, rows: 12, look: kit.NewLook(kit.PlainTheme, kit.NoAttributes, kit.ASCII)}
	c, err := makeChart(context.Background(), key, 3, from)
	if err != nil || c.raster == nil || c.row != 3 {
		t.Fatalf("%+v, %v", c, err)
	}
	rows := rowsOf(c)
	all := strings.Join(rows, "\n")
	now := strings.IndexByte(c.rule, '^')
	find := func(sign string) (row, col int) {
		for r, line := range rows {
			if col := strings.Index(line, sign); col >= 0 {
				return r, col
			}
		}
		return -1, -1
	}
	bright, c1 := find("o")
	if bright < 0 || strings.Count(all, "o") != 2 || c1 >= now {
		t.Errorf("measured ones at %d, %d\n%s", bright, c1, all)
	}
	last := -1
	for _, sign := range []string{"v", "?", "x"} {
		r, col := find(sign)
		if r <= bright || col <= last || col >= now || strings.Count(all, sign) != 1 {
			t.Errorf("%s at %d, %d\n%s", sign, r, col, all)
		}
		last = col
	}
	if r, col := find("="); col < now || r < bright {
		t.Errorf("the forecast begins at %d, tonight is %d", col, now)
	}
	if c.y[len(c.y)-1] != "" && c.y[0] >= c.y[len(c.y)-1] && len(c.y[0]) >= len(c.y[len(c.y)-1]) {
		t.Errorf("labels %q", c.y)
	}
	if want := "o measured|v fainter than|? unlikely, kept|x set aside|= median, . 80 %|1 in other bands"; strings.Join(c.legend, "|") != want {
		t.Errorf("legend %q", c.legend)
	}
	if !strings.HasPrefix(c.head, "tonight, 1 Dec 2026, V 8.0 7.5..8.5") || c.basis != "invented" {
		t.Errorf("%q, %q", c.head, c.basis)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := makeChart(ctx, key, 3, from); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
	from.at = func(float64) light.Forecast { return light.Forecast{Basis: "nothing known"} }
	from.past = nil
	if c, err := makeChart(context.Background(), key, 3, from); err != nil || c.raster != nil || c.basis != "nothing known" {
		t.Errorf("%+v, %v", c, err)
	}
}

// Whatever the forecast says and however small the paper, nothing panics and
// no row is wider than the paper.
func TestChartProperty(t *testing.T) {
	n := nightOf(t)
	number := rapid.OneOf(rapid.Float64Range(-5, 30), rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 1e300, -1e300, 0}))
	rapid.Check(t, func(r *rapid.T) {
		from := invented{zero: n.Midnight, at: func(float64) light.Forecast {
			return light.Forecast{Band: "V", Known: rapid.Bool().Draw(r, "known"), Mag: astro.Mags(number.Draw(r, "mag")),
				Lo: astro.Mags(number.Draw(r, "lo")), Hi: astro.Mags(number.Draw(r, "hi"))}
		}}
		for range rapid.IntRange(0, 5).Draw(r, "past") {
			from.past = append(from.past, seen(n, rapid.Float64Range(-9000, 9000).Draw(r, "days"), number.Draw(r, "seen"), func(s *light.Seen) { s.Limit = rapid.Bool().Draw(r, "limit") }))
		}
		p := &moment.Prepared{}
		p.Target.Var.PeriodD = targets.Measure{Known: rapid.Bool().Draw(r, "period"), Value: number.Draw(r, "P")}
		glyphs := rapid.SampledFrom([]kit.Glyphs{kit.ASCII, kit.Unicode, kit.Braille}).Draw(r, "glyphs")
		key := chartKey{p: p, night: n, cols: rapid.IntRange(0, 60).Draw(r, "cols"), rows: rapid.IntRange(0, 20).Draw(r, "rows"), look: kit.NewLook(kit.PlainTheme, kit.NoAttributes, glyphs)}
		c, err := makeChart(context.Background(), key, 0, from)
		if err != nil {
			r.Fatal(err)
		}
		if c.raster == nil {
			return
		}
		if len(c.rule) != key.cols || len(c.dates) > key.cols {
			r.Fatalf("axis %q, %q on %d columns", c.rule, c.dates, key.cols)
		}
		for _, row := range rowsOf(c) {
			if w := len([]rune(row)); w > key.cols {
				r.Fatalf("a row of %d cells on %d", w, key.cols)
			}
		}
	})
}
