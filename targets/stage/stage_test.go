package stage

import (
	"math"
	"math/rand"
	"slices"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/builtin"
)

func sums(t testing.TB, v Verdict) {
	t.Helper()
	sum := 0.0
	for _, s := range targets.Stages {
		p := v.P[s]
		if math.IsNaN(p) || p < 0 || p > 1 {
			t.Fatalf("probability of %s is %v", s, p)
		}
		sum += p
	}
	if math.Abs(sum-1) > 1e-12 || len(v.P) != len(targets.Stages) {
		t.Fatalf("probabilities of %d stages sum to %.15f", len(v.P), sum)
	}
}

// What each kind of the built-in list must come out as: common practice, no
// source, as the catalogue's own classification is.
var agrees = map[string][]string{
	"giant:subgiant":                {"SG"},
	"giant:red giant branch":        {"RGB", "RGB|EAGB"},
	"giant:red clump":               {"RC"},
	"giant:horizontal branch":       {"HB"},
	"giant:early AGB":               {"EAGB", "RGB|EAGB"},
	"giant:carbon star":             {"TPAGB"},
	"giant:S star":                  {"TPAGB"},
	"giant:barium giant":            {"RGB", "RC"},
	"giant:R Coronae Borealis":      {"PAGB"},
	"giant:massive red supergiant":  {"RSG"},
	"giant:asymptotic giant branch": {"TPAGB", "EAGB", "RGB|EAGB"},
	"lpv":                           {"TPAGB"}, "postagb": {"PAGB"}, "pn": {"PN"}, "wd": {"WD"}, "interacting": {"ACC"},
}

// mayDiffer bounds how many of the 256 may come out otherwise than the
// catalogue has them; each must have evidence that explains it.
const mayDiffer = 30

func TestJudgeBuiltin(t *testing.T) {
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	m, differ := NewModels(), 0
	for i := range stars {
		s := &stars[i]
		v := m.Judge(*s)
		sums(t, v)
		want, ok := agrees[string(s.Kind)+":"+s.KindNote]
		if !ok {
			want = agrees[string(s.Kind)]
		}
		if slices.Contains(want, v.Best) {
			continue
		}
		differ++
		if len(v.Evidence) == 0 {
			t.Errorf("%s (%s %s) comes out as %s without evidence", s.Name, s.Kind, s.KindNote, v.Best)
			continue
		}
		t.Logf("%s, listed as %s %s, comes out as %s: %s", s.Name, s.Kind, s.KindNote, v.Best, v.Evidence[0].What)
	}
	if differ > mayDiffer {
		t.Errorf("%d of %d differ from the catalogue, at most %d may", differ, len(stars), mayDiffer)
	}
}

// Shares of stages-and-brightness 3.1: Miras 0.97 on the thermally pulsing
// AGB and none on the red giant branch; semiregulars by period.
func TestJudgeShares(t *testing.T) {
	m := NewModels()
	mira := m.Judge(targets.Target{Name: "a", Var: targets.Variability{Type: "M"}})
	if mira.Best != "TPAGB" || mira.P[targets.TPAGB] < 0.95 || mira.P[targets.RGB] > 0.005 {
		t.Errorf("a Mira comes out as %s, %v", mira.Best, mira.P)
	}
	long := m.Judge(targets.Target{Name: "a", Var: targets.Variability{Type: "SRB", PeriodD: targets.Known(120)}})
	check.Near(t, long.P[targets.TPAGB], 0.6, 0.05, "share of TP-AGB, semiregular of 120 d")
	short := m.Judge(targets.Target{Name: "a", Var: targets.Variability{Type: "SRB", PeriodD: targets.Known(40)}})
	check.Near(t, short.P[targets.RGB], 0.5, 0.05, "share of RGB, semiregular of 40 d")
}

// A white dwarf at M_G = -2 cannot be one.
func TestContradiction(t *testing.T) {
	v := NewModels().Judge(targets.Target{Name: "a", Kind: targets.WD,
		Place: targets.Place{Plx: targets.KnownErr(10, 0.1)},
		Mags:  map[targets.Band]targets.Measure{"G": targets.Known(3)}})
	sums(t, v)
	if v.Best == "WD" || v.P[targets.Dwarf] > 0.7 {
		t.Errorf("comes out as %s with p(WD) = %.2f", v.Best, v.P[targets.Dwarf])
	}
	if !slices.ContainsFunc(v.Evidence, func(e targets.Evidence) bool { return len(e.What) > 13 && e.What[:13] == "contradiction" }) {
		t.Errorf("no line names the contradiction: %v", v.Evidence)
	}
}

// Red clump of Hawkins et al. 2017: a K0 III star at M_Ks = -1.61.
func TestClump(t *testing.T) {
	v := NewModels().Judge(targets.Target{Name: "a", Kind: targets.Giant, Physics: targets.Physics{SpType: "K0III"},
		Place: targets.Place{Plx: targets.KnownErr(10, 0.1)},
		Mags:  map[targets.Band]targets.Measure{"K": targets.Known(3.39)}})
	if v.Best != "RC" {
		t.Errorf("a K0 III star at clump brightness comes out as %s %v", v.Best, v.P)
	}
}

func FuzzJudge(f *testing.F) {
	f.Add("wd", "DA", "ZZA", 10.0, 0.1, 12.0, 11.0, 8.0, 10000.0)
	f.Add("giant", "K0III", "", -5.0, 1.0, math.Inf(1), math.NaN(), -3.0, 1e300)
	f.Add("pn", "", "", 2.0, 0.3, -11.0, 13.0, 0.2, 90000.0)
	f.Add("", "", "", 3.0, 0.2, 9.0, 7.0, 2.4, 4700.0)
	m := NewModels()
	f.Fuzz(func(t *testing.T, kind, sp, vt string, plx, e, g, k, logg, teff float64) {
		tg := targets.Target{Name: "x", Kind: targets.Kind(kind),
			Physics: targets.Physics{SpType: sp, LogG: targets.Known(logg), TeffK: targets.Known(teff), EBV: targets.Known(e), FeH: targets.Known(logg),
				NumaxUHz: targets.Known(teff / 100), DnuUHz: targets.Known(g), DistPc: targets.KnownErr(k, e), Cluster: "M67"},
			Var:   targets.Variability{Type: vt, PeriodD: targets.Known(plx)},
			Place: targets.Place{Plx: targets.KnownErr(plx, e)},
			Nebula: targets.Nebula{DiamArcsec: targets.Known(k), LogFHa: targets.Known(g), LogFHb: targets.Known(g - e), LogF5007: targets.Known(g + e),
				CHb: targets.Known(logg), VexpKms: targets.Known(plx), CspnV: targets.Known(k)},
			Mags: map[targets.Band]targets.Measure{"G": targets.Known(g), "K": targets.Known(k), "BP": targets.Known(g + logg/10), "RP": targets.Known(k), "J": targets.Known(plx)}}
		v := m.Judge(tg)
		sums(t, v)
		if v.Best == "" {
			t.Fatal("no answer")
		}
		for _, ev := range v.Evidence {
			if math.IsNaN(ev.Log10Odds) || ev.Source == "" || ev.What == "" {
				t.Fatalf("evidence without figure or source: %+v", ev)
			}
		}
		p := &v.Place
		if p.HROK && (!p.LogT.Valid() || !p.LogL.Valid()) || p.CMDOK && (!p.Colour.Valid() || !p.AbsG.Valid()) {
			t.Fatalf("place %+v", p)
		}
		st := m.Study(tg, &v)
		for _, q := range st.Quantities {
			if math.IsNaN(q.Value) || math.IsInf(q.Value, 0) || q.Method == "" || q.Source == "" || q.Lo > q.Value || q.Hi < q.Value {
				t.Fatalf("quantity %+v", q)
			}
		}
	})
}

func BenchmarkJudge(b *testing.B) {
	r := rand.New(rand.NewSource(1))
	m := NewModels()
	tg := targets.Target{Name: "x", Kind: targets.Giant, Physics: targets.Physics{SpType: "K0III"},
		Place: targets.Place{RA: astro.Deg(10), Plx: targets.KnownErr(10, 0.1)},
		Mags:  map[targets.Band]targets.Measure{"G": targets.Known(5 + r.Float64())}}
	for b.Loop() {
		m.Judge(tg)
	}
}

// Budget: 200 microseconds a star once the models are made.
func BenchmarkJudgeGiant(b *testing.B) {
	m := NewModels()
	tg := targets.Target{Name: "x", Kind: targets.Giant, Physics: targets.Physics{SpType: "K0III", FeH: targets.KnownErr(-0.1, 0.1), EBV: targets.Known(0.05)},
		Place: targets.Place{Plx: targets.KnownErr(2, 0.05), PlxFrom: "gaia_dr3"},
		Mags:  map[targets.Band]targets.Measure{"G": targets.Known(9.2), "BP": targets.Known(9.8), "RP": targets.Known(8.5), "K": targets.Known(6.9)}}
	m.Judge(tg)
	for b.Loop() {
		m.Judge(tg)
	}
}

func BenchmarkJudgeDwarf(b *testing.B) {
	m := NewModels()
	tg := targets.Target{Name: "x", Kind: targets.WD, Place: targets.Place{Plx: targets.KnownErr(10, 0.1), PlxFrom: "gaia_dr3"},
		Mags: map[targets.Band]targets.Measure{"G": targets.Known(17.17), "BP": targets.Known(17.2), "RP": targets.Known(17.06)}}
	m.Judge(tg)
	for b.Loop() {
		m.Judge(tg)
	}
}

func BenchmarkJudgePoor(b *testing.B) {
	m := NewModels()
	tg := targets.Target{Name: "x", Place: targets.Place{Plx: targets.KnownErr(0.2, 0.3), PlxFrom: "gaia_dr3"},
		Mags: map[targets.Band]targets.Measure{"G": targets.Known(15.17), "BP": targets.Known(15.7), "RP": targets.Known(14.06)}}
	m.Judge(tg)
	for b.Loop() {
		m.Judge(tg)
	}
}
