package wander

import (
	"encoding/csv"
	"hash/fnv"
	"math"
	"os"
	"regexp"
	"sort"
	"strconv"
	"testing"

	"evenfall/astro/check"
	"evenfall/targets"
)

// measuredStar is a star with its catalogue elements and its magnitudes.
type measuredStar struct {
	name string
	e    Elements
	all  []Obs // every night
	thin []Obs // five days apart or more
}

// sheet reads a table kept beside the repository.
func sheet(t testing.TB, name string) []map[string]string {
	t.Helper()
	file, err := os.Open(check.Shared(t, "data/"+name))
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, row := range rows[1:] {
		m := map[string]string{}
		for i, h := range rows[0] {
			m[h] = row[i]
		}
		out = append(out, m)
	}
	return out
}

func number(t testing.TB, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

var carbonSpectrum = regexp.MustCompile(`^(C|N|R[0-9])`)

const apartD = 5 // days between magnitudes that are used

// measuredStars reads elements and light curves of ASAS-3.
func measuredStars(t testing.TB, file string) []*measuredStar {
	t.Helper()
	byName := map[string]*measuredStar{}
	var out []*measuredStar
	for _, r := range sheet(t, file+"_elements.csv") {
		s := &measuredStar{name: r["star"]}
		s.e = Elements{PeriodD: number(t, r["gcvs_period_d"]), EpochMaxJD: number(t, r["gcvs_epoch_max_jd"]), HasEpoch: true,
			MagMax: number(t, r["gcvs_max"]), MagMin: number(t, r["gcvs_min"]), Band: targets.Band(r["system"]),
			Carbon: carbonSpectrum.MatchString(r["sptype"])}
		if r["gcvs_rise_pct"] != "" {
			s.e.RiseFraction = number(t, r["gcvs_rise_pct"]) / 100
		}
		byName[s.name] = s
		out = append(out, s)
	}
	for _, r := range sheet(t, file+".csv") {
		s := byName[r["star"]]
		s.all = append(s.all, Obs{JD: number(t, r["hjd"]), Mag: number(t, r["V"]), Err: number(t, r["e_V"])})
	}
	for _, s := range out {
		sort.Slice(s.all, func(i, j int) bool { return s.all[i].JD < s.all[j].JD })
		for _, o := range s.all {
			if n := len(s.thin); n == 0 || o.JD >= s.thin[n-1].JD+apartD {
				s.thin = append(s.thin, o)
			}
		}
	}
	return out
}

// aside tells whether a star of the larger set is among the half that is kept
// for the scores.
func aside(name string) bool {
	h := fnv.New32a()
	h.Write([]byte(name))
	return h.Sum32()%2 == 0
}

// near returns the magnitude nearest to a date, if within so many days.
func near(obs []Obs, jd, within float64) (Obs, bool) {
	k := sort.Search(len(obs), func(i int) bool { return obs[i].JD >= jd })
	best, found := Obs{}, false
	for i := max(k-1, 0); i <= k && i < len(obs); i++ {
		if d := math.Abs(obs[i].JD - jd); d <= within && (!found || d < math.Abs(best.JD-jd)) {
			best, found = obs[i], true
		}
	}
	return best, found
}

// crps is the continuous ranked probability score of a forecast, mag:
// the integral of (F(x) - 1[x >= y])^2, as [cite.GneitingRaftery2007], from
// memory.
func crps(f Forecast, y float64) float64 {
	lo, hi := f.mix.ends()
	lo, hi = math.Min(lo, y), math.Max(hi, y)
	square := func(a, b float64, above float64) float64 {
		const panels = 120
		sum, h := 0.0, (b-a)/panels
		for i := range panels {
			d := f.CDF(a+(float64(i)+0.5)*h) - above
			sum += d * d * h
		}
		return sum
	}
	return square(lo, y, 0) + square(y, hi, 1)
}

// crpsSample is the same for a sample of equal weights:
// mean |x - y| - mean |x - x'| / 2.
func crpsSample(obs []Obs, y float64) float64 {
	n := float64(len(obs))
	a, b := 0.0, 0.0
	for _, o := range obs {
		a += math.Abs(o.Mag - y)
		for _, p := range obs {
			b += math.Abs(o.Mag - p.Mag)
		}
	}
	return a/n - b/(2*n*n)
}

// crpsNormal is the same for a normal distribution, in closed form.
func crpsNormal(mean, sd, y float64) float64 {
	z := (y - mean) / sd
	pdf := math.Exp(-z*z/2) / math.Sqrt(2*math.Pi)
	return sd * (z*math.Erf(z/math.Sqrt2) + 2*pdf - 1/math.Sqrt(math.Pi))
}

// The three ways to the score agree where they must: a normal distribution.
func TestScore(t *testing.T) {
	f := Forecast{mix: mixture{{1, 10, 0.7}}}
	for _, y := range []float64{8, 9.9, 10, 12.5} {
		check.Near(t, crps(f, y), crpsNormal(10, 0.7, y), 1e-3, "score at %g", y)
	}
	var sample []Obs
	for i := range 400 {
		sample = append(sample, Obs{Mag: f.Quantile((float64(i) + 0.5) / 400)})
	}
	check.Near(t, crpsSample(sample, 9.5), crpsNormal(10, 0.7, 9.5), 2e-3, "score of a sample")
}
