package tracks

import (
	"errors"
	"math"
	"math/rand"
	"testing"

	"evenfall/astro/check"
	"evenfall/targets"
)

func grid(t testing.TB, corrected bool) *Grid {
	t.Helper()
	r := Disc()
	r.Corrected = corrected
	g, err := NewGrid(r)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

func seen(teffK, logL float64) Seen {
	return Seen{LogT: math.Log10(teffK), LogTErr: 0.008, LogL: logL, LogLErr: 0.06, FeH: 0, FeHErr: 0.2, HasFeH: true}
}

func TestGoldenPosteriors(t *testing.T) {
	g := grid(t, false)
	for _, c := range []struct {
		teffK, logL float64
		want        map[targets.Stage]float64
	}{
		{4800, 1.75, map[targets.Stage]float64{targets.RC: 0.89, targets.RGB: 0.11}},
		{4300, 2.2, map[targets.Stage]float64{targets.RC: 0.65, targets.RGB: 0.32, targets.EAGB: 0.03}},
		{4600, 1.4, map[targets.Stage]float64{targets.RGB: 1}},
		{5000, 1.75, map[targets.Stage]float64{targets.RC: 0.97}},
		{3600, 3.3, map[targets.Stage]float64{targets.RGB: 0.61, targets.EAGB: 0.39}},
		{3300, 3.8, map[targets.Stage]float64{targets.TPAGB: 0.99}},
		{5300, 0.8, map[targets.Stage]float64{targets.SG: 0.76, targets.RGB: 0.24}},
	} {
		p := g.Posterior(seen(c.teffK, c.logL))
		t.Logf("%g K, log L %g: %v weight %.2e chi2 %.2f mass %.2f age %.0f", c.teffK, c.logL, p.P, p.Weight, p.Chi2, p.Mass, p.Age)
		for s, want := range c.want {
			if got := p.P[s]; math.Abs(got-want) > 0.05 {
				t.Errorf("%g K, log L %g: %s has %.3f, want %.2f", c.teffK, c.logL, s, got, want)
			}
		}
	}
}

func BenchmarkNewGrid(b *testing.B) {
	for i := 0; i < b.N; i++ {
		grid(b, true)
	}
}

func BenchmarkPosterior(b *testing.B) {
	g := grid(b, true)
	for name, e := range map[string][2]float64{"typical": {0.008, 0.06}, "clump floor": {0.01, 0.1}, "wide": {0.3, 0.3}, "T .03 L .13": {0.033, 0.133}, "T wide": {0.3, 0.05}, "T .13 L .13": {0.13, 0.13}} {
		b.Run(name, func(b *testing.B) {
			s := seen(4700, 1.75)
			s.LogTErr, s.LogLErr, s.Floor = e[0], e[1], true
			for i := 0; i < b.N; i++ {
				g.Posterior(s)
			}
		})
	}
}

// Shares of the giants above 10 suns and below 5500 K by the time spent there:
// published nowhere, computed alongside with the same formulas: RGB 45 per
// cent, core helium 53, early AGB 1.6, pulsing 0.4. That grid spreads its
// masses otherwise, so 4 points.
func TestGridShares(t *testing.T) {
	g := grid(t, false)
	sum, all := map[targets.Stage]float64{}, 0.0
	for row := 0; row < cellsL; row++ {
		if lowL+cellL*float64(row) < 1 {
			continue
		}
		for _, c := range g.levels[0].cells[g.levels[0].first[row]:g.levels[0].first[row+1]] {
			if s := stages[c.code]; lowT+cellT*float64(c.t) < math.Log10(5500) && s != targets.SG && s != targets.MS {
				sum[s] += float64(c.weight)
				all += float64(c.weight)
			}
		}
	}
	for s, want := range map[targets.Stage]float64{targets.RGB: 0.45, targets.RC: 0.53, targets.EAGB: 0.016, targets.TPAGB: 0.004} {
		check.Near(t, sum[s]/all, want, math.Max(0.04*math.Min(1, want*10), 0.001), "share of %s", s)
	}
}

func TestBorn(t *testing.T) {
	near(t, born(1), 1, 1e-12, "stars at 1 Msun")
	near(t, born(2), math.Pow(2, -2.3), 1e-12, "stars at 2 Msun")
	near(t, born(0.4999999), born(0.5), 1e-5, "the two slopes meet")
	near(t, born(0.1)/born(0.2), math.Pow(2, 1.3), 1e-12, "slope below 0.5 Msun")
}

// The clump's median lands where measured ones are, and giants move by the
// measured offsets.
func TestCorrect(t *testing.T) {
	f := formulas(t, 0.02)
	l, tt := f.correct(&Point{Phase: PhaseClump, Mass: 1.2, LogL: 1.891, LogT: 3.66}, 0, 0)
	check.Near(t, l, 1.739, 1e-12, "log L of the clump")
	check.Near(t, tt, 3.6635, 1e-12, "log T of the clump")
	l, tt = f.correct(&Point{Phase: PhaseRGB, Mass: 1.2, LogL: 1.75, LogT: 3.66}, -0.3, -0.3)
	check.Near(t, l, 1.75, 1e-12, "log L of a giant")
	check.Near(t, tt, 3.66+0.0047-0.0111, 1e-12, "log T of a giant")
	for _, p := range []Point{{Phase: PhaseRGB, LogL: 0.4, LogT: 3.7}, {Phase: PhaseRGB, LogL: 3.1, LogT: 3.5},
		{Phase: PhaseHB, Mass: 0.6, LogL: 1.6, LogT: 4}, {Phase: PhaseMS, LogL: 1.5, LogT: 3.9}, {Phase: PhaseSecondClump, Mass: 2.5, LogL: 1.5, LogT: 3.7}} {
		if l, tt := f.correct(&p, 0.1, 0.1); l != p.LogL || tt != p.LogT {
			t.Errorf("%s at log L %g moves", p.Phase, p.LogL)
		}
	}
}

// Cells taken together give what the finest give, where a star is on the
// tracks.
func TestLevelsAgree(t *testing.T) {
	g := grid(t, true)
	fine := *g
	fine.levels = []level{g.levels[0], g.levels[0], g.levels[0], g.levels[0], g.levels[0], g.levels[0]}
	r := rand.New(rand.NewSource(3))
	worst := 0.0
	for i := 0; i < 200; i++ {
		s := Seen{LogT: 3.55 + 0.25*r.Float64(), LogL: 0.5 + 3*r.Float64(), LogTErr: 0.005 + 0.3*r.Float64()*r.Float64(),
			LogLErr: 0.02 + 0.4*r.Float64()*r.Float64(), FeH: 0.2 * r.NormFloat64(), FeHErr: 0.2, HasFeH: i%2 == 0, Floor: i%3 == 0}
		p, q := g.Posterior(s), fine.Posterior(s)
		for _, st := range stages {
			if d := math.Abs(p.P[st] - q.P[st]); q.Chi2 < 9 && d > worst {
				worst = d
			}
		}
	}
	if t.Logf("worst difference %.4f", worst); worst > 0.03 {
		t.Errorf("larger cells change a probability by %.3f", worst)
	}
}

// proper demands what holds for every answer.
func proper(t *testing.T, p Posterior) {
	t.Helper()
	if p.P == nil {
		if !math.IsInf(p.Chi2, 1) || p.Weight != 0 {
			t.Errorf("nothing near, yet %+v", p)
		}
		return
	}
	sum := 0.0
	for _, v := range p.P {
		sum += v
	}
	if !(math.Abs(sum-1) < 1e-9) || !(p.Weight >= 0 && p.Weight <= 1.0001) || !(p.Chi2 >= 0 && p.Chi2 < 1e7) {
		t.Errorf("sum %g, weight %g, chi² %g", sum, p.Weight, p.Chi2)
	}
	if !p.Mass.Valid() || !p.Age.Valid() || p.Mass.Lo < 0.08 || p.Mass.Hi > 9 || p.Age.Hi > 15000 {
		t.Errorf("mass %v, age %v", p.Mass, p.Age)
	}
	for s, g := range p.ByStage {
		if !g.Mass.Valid() || !g.Age.Valid() {
			t.Errorf("%s: mass %v, age %v", s, g.Mass, g.Age)
		}
	}
}

func TestPosteriorProperty(t *testing.T) {
	g := grid(t, true)
	r := rand.New(rand.NewSource(5))
	for i := 0; i < 3000; i++ {
		proper(t, g.Posterior(Seen{LogT: 3.2 + 2.3*r.Float64(), LogL: -6 + 12*r.Float64(), LogTErr: r.ExpFloat64() * 0.05, LogLErr: r.ExpFloat64() * 0.2,
			FeH: r.NormFloat64(), FeHErr: r.ExpFloat64() * 0.2, HasFeH: i%2 == 0, Floor: i%3 == 0}))
	}
	for _, s := range []Seen{{LogT: math.NaN()}, {LogT: 3.7, LogL: math.Inf(1)}, {LogT: 3.7, LogL: 1, LogTErr: -1}, {LogT: 9, LogL: 1},
		{LogT: 3.7, LogL: 1, HasFeH: true, FeH: math.NaN()}, {LogT: 3.7, LogL: 1, HasFeH: true, FeHErr: math.Inf(1)}} {
		if p := g.Posterior(s); p.P != nil || !math.IsInf(p.Chi2, 1) {
			t.Errorf("%+v: %+v", s, p)
		}
	}
	sun := g.Posterior(Seen{LogT: math.Log10(5772), LogTErr: 0.005, LogL: 0, LogLErr: 0.02, HasFeH: true, FeHErr: 0.05, Floor: true})
	if sun.P[targets.MS] < 0.99 || sun.Mass.Lo > 1 || sun.Mass.Hi < 1 || sun.Age.Lo > 4570 || sun.Age.Hi < 4570 {
		t.Errorf("the Sun: %+v", sun)
	}
	dwarf := g.Posterior(Seen{LogT: math.Log10(10000), LogTErr: 0.01, LogL: -2.4, LogLErr: 0.05})
	if dwarf.P[targets.Dwarf] < 0.99 {
		t.Errorf("a white dwarf: %+v", dwarf)
	}
}

func FuzzPosterior(f *testing.F) {
	g := grid(f, true)
	f.Add(3.68, 0.01, 1.7, 0.05, 0., 0.1, true)
	f.Add(math.NaN(), 0., 1e300, -1., math.Inf(1), 0., false)
	f.Fuzz(func(t *testing.T, lt, et, ll, el, fe, ef float64, has bool) {
		proper(t, g.Posterior(Seen{lt, et, ll, el, fe, ef, has, !has}))
	})
}

func TestRecipes(t *testing.T) {
	bad := []func(*Recipe){
		func(r *Recipe) { r.FeH = nil }, func(r *Recipe) { r.FeH = []float64{0, 0} }, func(r *Recipe) { r.ToMyr = 0 },
		func(r *Recipe) { r.Masses = 0 }, func(r *Recipe) { r.SigFeH = math.NaN() }, func(r *Recipe) { r.Eta = 9 }, func(r *Recipe) { r.ToMass = 100 },
	}
	for i, spoil := range bad {
		r := Disc()
		spoil(&r)
		if _, err := NewGrid(r); !errors.Is(err, ErrRecipe) {
			t.Errorf("recipe %d: %v", i, err)
		}
	}
	get := Lazily(Old())
	g, err := get()
	if err != nil {
		t.Fatal(err)
	}
	if h, _ := get(); h != g {
		t.Error("made twice")
	}
	// a horizontal-branch star, and a giant of the halo
	if p := g.Posterior(Seen{LogT: 3.645, LogTErr: 0.015, LogL: 2.6, LogLErr: 0.1}); p.P[targets.RGB]+p.P[targets.EAGB] < 0.95 || p.Age.Lo < 9000 {
		t.Errorf("halo giant: %+v", p)
	}
}

func TestLines(t *testing.T) {
	f := formulas(t, 0.02)
	line := f.ZAMSLine(10, 0.2, 50)
	if len(line) != 50 || line[0].Mass > 0.2001 {
		t.Fatalf("%d points from %g", len(line), line[0].Mass)
	}
	for i := 1; i < len(line); i++ {
		if line[i].LogL <= line[i-1].LogL || line[i].LogT <= line[i-1].LogT {
			t.Errorf("the main sequence turns at %g Msun", line[i].Mass)
		}
	}
	if n := len(f.ZAMSLine(math.NaN(), math.Inf(1), -3)); n != 2 {
		t.Errorf("%d points", n)
	}
	tr := track(t, f, 1.5, 0.4)
	thin := tr.Line(200)
	if len(thin) < 150 || len(thin) > 260 {
		t.Errorf("%d points of 200", len(thin))
	}
	seen := map[Phase]bool{}
	for _, p := range thin {
		seen[p.Phase] = true
	}
	for _, p := range tr.Points {
		if !seen[p.Phase] {
			t.Errorf("%s is lost", p.Phase)
		}
	}
	if (&Track{}).Line(10) != nil {
		t.Error("a line of nothing")
	}
}

// The published fit at the metallicities of its models stays as it is; between
// them radii lie between, and giants cool steadily with metallicity.
func TestSmooth(t *testing.T) {
	at := func(f *Formulas) float64 { return logTeff(1.75, math.Log10(f.giantRadius(1, pow10(1.75)))) }
	for _, z := range []float64{1e-4, 1e-3, 0.004, 0.02, 0.03} {
		f, err := NewSmoothFormulas(z)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, at(f), at(formulas(t, z)), 1e-9, "log T of a giant at Z %g", z)
	}
	last := 9.
	for z := 1e-4; z <= 0.03; z *= 1.1 {
		f, err := NewSmoothFormulas(z)
		if err != nil {
			t.Fatal(err)
		}
		if x := at(f); x > last {
			t.Errorf("giants get hotter with metals at Z %g", z)
		} else {
			last = x
		}
		sound(t, track(t, f, 1.5, 0.4))
	}
	// what it is for: the fit itself swings
	if at(formulas(t, 0.005)) < at(formulas(t, 0.0025))+0.04 {
		t.Error("the published fit no longer swings between its models")
	}
	if _, err := NewSmoothFormulas(0.05); !errors.Is(err, ErrMetallicity) {
		t.Error(err)
	}
}

func TestMetals(t *testing.T) {
	for _, c := range [][3]float64{{0, 0.02, 0}, {-0.5, 0.02 / math.Sqrt(10), -0.5}, {0.3, 0.03, math.Log10(1.5)}, {-9, 1e-4, math.Log10(0.005)}} {
		z, feH := Metals(c[0])
		near(t, z, c[1], 1e-12, "Z at [Fe/H] %g", c[0])
		check.Near(t, feH, c[2], 1e-12, "[Fe/H] there")
	}
}
