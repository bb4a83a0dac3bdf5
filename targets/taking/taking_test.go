package taking

import (
	"strings"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/exposure"
	"evenfall/targets/moment"
	"evenfall/targets/run"
)

// scene is the demonstration's site with its targets ready.
type scene struct {
	moment.Scene
	cfg  *run.Config
	list []*moment.Prepared
}

func newScene(t *testing.T, names ...string) scene {
	t.Helper()
	r, _ := run.Open(builtin.Demo(), "demonstration")
	n, err := moment.NewNight(r.Config.Site, astro.Date{Year: 2026, Month: 12, Day: 1}, r.Config.Limits, targets.Conditions{})
	if err != nil {
		t.Fatal(err)
	}
	at, err := timescale.At(time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC))
	if err != nil {
		t.Fatal(err)
	}
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	s := scene{Scene: moment.NewScene(n, at), cfg: r.Config}
	models := moment.NewModels()
	for _, name := range names {
		for i := range stars {
			if stars[i].Name == name {
				p := moment.Prepare(stars[i], nil, models)
				s.list = append(s.list, &p)
			}
		}
	}
	return s
}

// want is a request of the demonstration, or the default of a kind.
func (s *scene) want(t *testing.T, kind targets.Kind, standard string) moment.Want {
	t.Helper()
	q, ok := s.cfg.DefaultRequest(kind)
	if !ok {
		t.Fatal("no request")
	}
	q.Standard = standard
	w := moment.Want{Level: 0.8, Request: &q}
	w.Instrument, _ = s.cfg.Instrument(q.Instrument)
	w.Mode, _ = w.Instrument.Mode(q.Mode)
	g, err := exposure.GoalOf(&q, w.Instrument.Kind)
	if err != nil {
		t.Fatal(err)
	}
	w.Goal = &g
	return w
}

func joined(list []Line) string {
	var out []string
	for _, l := range list {
		out = append(out, l.Text)
	}
	return strings.Join(out, "\n")
}

// What each view says holds the figures of the moment.
func TestLines(t *testing.T) {
	s := newScene(t, "GD 50", "R Lep")
	for _, p := range s.list {
		w := s.want(t, p.Target.Kind, "")
		c := moment.Tonight(s.Night, p, w)
		m := moment.Of(&s.Scene, p, &c, w)
		if !m.ExposureOK {
			t.Fatalf("%s: %s", p.Target.Name, m.ExposureWhy)
		}
		text := joined(Exposure(&s.Scene, p, &m, w))
		for _, part := range append([]string{Frames(&m.Exposure), "S/N", "Sun below"}, m.Exposure.Words...) {
			if !strings.Contains(text, part) {
				t.Errorf("%s: %q is not in\n%s", p.Target.Name, part, text)
			}
		}
		if slit := w.Instrument.Kind == "slit"; strings.Contains(text, "position angle") != slit {
			t.Errorf("%s: the slit, %v, in\n%s", p.Target.Name, slit, text)
		}
		field := []targets.Target{{Name: "guide", Place: p.Target.Place, Mags: map[targets.Band]targets.Measure{"V": targets.Known(9)}}}
		field[0].Place.Dec = field[0].Place.Dec.Plus(astro.Arcsec(60))
		found := joined(Finding(&s.Scene, p, &m, w, field))
		if !strings.Contains(found, "from guide") || !strings.Contains(found, "2000.0") {
			t.Errorf("%s: finding says\n%s", p.Target.Name, found)
		}
		bare := moment.Of(&s.Scene, p, &c, moment.Want{})
		if Exposure(&s.Scene, p, &bare, moment.Want{}) != nil || Short(&bare) != nil {
			t.Error("an exposure nobody wanted")
		}
	}
}

// The short form begins with frames times seconds, or says why there is none.
func TestShort(t *testing.T) {
	s := newScene(t, "GD 50", "bet Cet")
	for _, p := range s.list {
		w := s.want(t, p.Target.Kind, "")
		c := moment.Tonight(s.Night, p, w)
		m := moment.Of(&s.Scene, p, &c, w)
		got := Short(&m)
		want := "Expose " + Frames(&m.Exposure)
		if !m.ExposureOK {
			want = "No exposure: saturates"
		}
		if len(got) == 0 || !strings.HasPrefix(got[0], want) {
			t.Errorf("%s: %q, wanted %q", p.Target.Name, got, want)
		}
	}
}

// A standard is chosen of the sort wanted, near the airmass of the target.
func TestStandard(t *testing.T) {
	s := newScene(t, "R Car", "LTT 3218", "GD 71", "GD 50")
	p := s.list[0]
	w := s.want(t, targets.WD, "flux")
	c := moment.Tonight(s.Night, p, w)
	m := moment.Of(&s.Scene, p, &c, w)
	got, ok, err := MatchStandard(&s.Scene, p, &m, w, s.list)
	if !ok || err != nil || !strings.HasPrefix(got.Name, "LTT 3218") {
		t.Errorf("%+v %v %v", got, ok, err)
	}
	if text := joined(Standards(&s.Scene, p, &m, w, s.list)); !strings.Contains(text, "flux: "+got.Name) {
		t.Errorf("it says %q", text)
	}
	all := []Wanted{{p, &m, w}, {p, &m, w}}
	if text := Serving(&s.Scene, "flux", w, all, s.list); m.InCan && !strings.Contains(text, "serves most: R Car") {
		t.Errorf("serving: %q", text)
	}
	if text := Serving(&s.Scene, "flux", w, all[:1], s.list); text != "" {
		t.Errorf("serving one: %q", text)
	}
	w = s.want(t, targets.WD, "none")
	if _, ok, err := MatchStandard(&s.Scene, p, &m, w, s.list); ok || err != nil {
		t.Errorf("a standard nobody wanted: %v", err)
	}
}

// Flats come in one order at dusk and in the reverse at dawn.
func TestFlatLines(t *testing.T) {
	s := newScene(t)
	var dusk, dawn []string
	for _, l := range Flats(s.Night, s.want(t, targets.LPV, "")) {
		part, rest, _ := strings.Cut(l.Text, " ")
		mode, _, _ := strings.Cut(rest, ":")
		if part == "dusk" {
			dusk = append(dusk, mode)
		} else {
			dawn = append([]string{mode}, dawn...)
		}
	}
	if len(dusk) < 4 || strings.Join(dusk, " ") != strings.Join(dawn, " ") {
		t.Errorf("dusk %v, dawn backwards %v", dusk, dawn)
	}
	if Flats(s.Night, moment.Want{}) != nil {
		t.Error("flats without an instrument")
	}
}

func TestSeconds(t *testing.T) {
	for s, want := range map[float64]string{0.2: "0.2 s", 1: "1 s", 12.54: "12.5 s", 30: "30 s", 250: "250 s", 1500: "25 min", 7200: "2.0 h", -1: "?"} {
		if got := Seconds(s); got != want {
			t.Errorf("%v s is written %q, wanted %q", s, got, want)
		}
	}
}
