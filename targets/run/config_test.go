package run

import (
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
	"testing/fstest"
	"time"
	_ "time/tzdata"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/table"
)

const minimal = "[site]\nlatitude_deg = -29.26\nlongitude_deg = -70.73\nelevation_m = 2400\n"

// whole is an instrument with all that exposures need.
const whole = "[[instrument]]\nname = \"a\"\nkind = \"imager\"\naperture_m = 1.5\npixel_arcsec = 0.35\nread_noise_e = 5\n"

// A file and what must be said of it, in order.
func TestConfigBad(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"nothing", "", "run.toml: site: missing; write [site] with latitude_deg and longitude_deg\n"},
		{"no longitude", "[site]\nlatitude_deg = 10\n", "run.toml:1:2: site.longitude_deg: missing; write longitude_deg in degrees, east and north positive\n"},
		{"pole", "[site]\nlatitude_deg = -129.26\nlongitude_deg = 5\n",
			"run.toml:2:16: site.latitude_deg \"-129.26\": out of range; write -90 to 90 deg, e.g. latitude_deg = -29.26\n"},
		{"text for a number", minimal + "temperature_c = \"cold\"\n",
			"run.toml:5:17: site.temperature_c \"cold\": not a number; write temperature_c = 10\n"},
		{"slip of the pen", minimal + "time_zon = \"UTC\"\n", "run.toml:5:1: site.time_zon: no such key; did you mean time_zone\n"},
		{"no zone", minimal + "time_zone = \"Atlantis\"\n",
			"run.toml:5:13: site.time_zone \"Atlantis\": no time zone; write an IANA name, e.g. America/Santiago, or UTC\n"},
		{"unknown table", minimal + "[limts]\nmoon_deg = 3\n", "run.toml:5:2: limts: no such key; did you mean limits\n"},
		{"mount", minimal + "[limits]\nmount = \"dobson\"\n",
			"run.toml:6:9: limits.mount \"dobson\": not one of the words for it; use one of altaz, equatorial\n"},
		{"order", minimal + "[limits]\nhour_angle_h = [5, -5]\n",
			"run.toml:6:1: limits.hour_angle_h: leaves nothing of the sky; the default is taken; write the smaller bound first\n"},
		{"list", minimal + "[limits]\nhour_angle_h = 5\n",
			"run.toml:6:16: limits.hour_angle_h \"5\": not a list of numbers; write hour_angle_h = [-6, 6]\n"},
		{"kind of instrument", minimal + "[[instrument]]\nname = \"a\"\nkind = \"camera\"\naperture_m = 1\n",
			"run.toml:7:8: instrument[1].kind \"camera\": not one of the words for it; use one of imager, slit, fast\n"},
		{"obstruction", minimal + "[[instrument]]\nname = \"a\"\nkind = \"imager\"\naperture_m = 1\nobstruction_m = 2\npixel_arcsec = 1\nread_noise_e = 1\n",
			"run.toml:5:3: instrument[1].obstruction_m \"2\": not smaller than the aperture; write the diameter of the shadow in metres\n"},
		{"mode without band", minimal + whole + "[[instrument.mode]]\nname = \"x\"\n",
			"run.toml:11:3: instrument[1].mode[1] \"x\": neither band nor range_nm; it is left out; write band = \"V\" or range_nm = [340, 930]\n"},
		{"no detector", minimal + "[[instrument]]\nname = \"a\"\nkind = \"imager\"\n",
			"run.toml:5:3: warning: instrument[1] \"a\": neither telescope nor detector are described: no exposures are worked out for it; " +
				"write aperture_m, pixel_arcsec, read_noise_e and, for each mode, zero_point_e_s or throughput\n"},
		{"no read noise", minimal + "[[instrument]]\nname = \"a\"\nkind = \"imager\"\naperture_m = 1\npixel_arcsec = 0.5\n",
			"run.toml:5:3: instrument[1].read_noise_e: missing; no exposures are worked out for a; write read_noise_e = 5, electrons a pixel\n"},
		{"read noise 0", minimal + strings.Replace(whole, "read_noise_e = 5", "read_noise_e = 0", 1),
			"run.toml:10:16: instrument[1].read_noise_e \"0\": out of range; write 0.01 to 1000 e, e.g. read_noise_e = 5\n"},
		{"negative dark current", minimal + whole + "dark_e_s = -0.1\n",
			"run.toml:11:12: instrument[1].dark_e_s \"-0.1\": out of range; write 0 to 1000 e/s, e.g. dark_e_s = 0.002\n"},
		{"no zero point", minimal + whole + "[[instrument.mode]]\nname = \"V\"\nband = \"V\"\nthroughput = 0.4\n[[instrument.mode]]\nname = \"I\"\nband = \"I\"\n",
			"run.toml:15:3: instrument[1].mode[2].zero_point_e_s: no zero point for band I; no exposures are worked out in it; write zero_point_e_s or throughput\n"},
		{"a band without zero point", minimal + whole + "[[instrument.mode]]\nname = \"w\"\nband = \"W1\"\nthroughput = 0.4\n",
			"run.toml:11:3: instrument[1].mode[1].zero_point_e_s: band W1 has no zero point of its own; no exposures are worked out in it; write zero_point_e_s, e/s at magnitude 0\n"},
		{"seeing 0", minimal + "[sky]\nseeing_arcsec = 0\n",
			"run.toml:6:17: sky.seeing_arcsec \"0\": out of range; write 0.1 to 10 arcsec, e.g. seeing_arcsec = 1.0\n"},
		{"date", minimal + "[[night]]\ndate = \"2026-13-01\"\n",
			"run.toml:6:8: night[1].date \"2026-13-01\": no day of the calendar; the night is left out; write YYYY-MM-DD, the date of its evening\n"},
		{"time", minimal + "[[night]]\ndate = 2026-12-01\nfrom_utc = \"late\"\n",
			"run.toml:7:12: night[1].from_utc \"late\": no time; write \"04:30\" or 2026-12-02T04:30:00Z, UTC\n"},
		{"hand-over", minimal + "[handover]\norder = [\"name\", \"colour\"]\n",
			"run.toml:6:1: handover.order \"colour\": no such field; use name, ra, dec, frame, epoch, pmra, pmdec\n"},
		{"two mistakes, good keys", "title = \"T\"\n" + minimal + "pressure_hpa = 5000\ndut1_s = 2\n",
			"run.toml:6:16: site.pressure_hpa \"5000\": out of range; write 0 to 1100 hPa, e.g. pressure_hpa = 756\n" +
				"run.toml:7:10: site.dut1_s \"2\": out of range; write -0.9 to 0.9 s, e.g. dut1_s = -0.05\n"},
	} {
		cfg, problems := ParseConfig([]byte(c.text), "run.toml")
		got := table.Lines(problems)
		if c.name != "kind of instrument" && got != c.want || !strings.Contains(got, c.want) {
			t.Errorf("%s:\n got %s want %s", c.name, got, c.want)
		}
		if strings.Contains(c.text, minimal) {
			if cfg == nil || cfg.Site.Lat.Deg() > -29.25 || cfg.Site.HeightM != 2400 {
				t.Errorf("%s: the good keys are lost: %+v", c.name, cfg)
			}
		}
	}
}

func TestSyntaxErrorsCostOneLine(t *testing.T) {
	cfg, problems := ParseConfig([]byte("title = \"T\"\nthis is no TOML\n"+minimal), "run.toml")
	if cfg == nil || cfg.Title != "T" || len(problems) != 1 || problems[0].At.Line != 2 {
		t.Errorf("%+v\n%s", cfg, table.Lines(problems))
	}
}

func TestDefaults(t *testing.T) {
	cfg, problems := ParseConfig([]byte(minimal), "run.toml")
	if len(problems) != 0 {
		t.Fatal(table.Lines(problems))
	}
	check.Near(t, cfg.Site.Air.PressureHPa, 756.26, 0.01, "pressure at 2400 m, hPa (ISA)")
	l := cfg.Limits
	for what, v := range map[string][2]float64{
		"min": {l.MinAltitude.Deg(), 20}, "wish": {l.WishAltitude.Deg(), 30}, "max": {l.MaxAltitude.Deg(), 88}, "airmass": {l.WishAirmass, 2},
		"moon": {l.Moon.Deg(), 15}, "sun": {l.Sun.Deg(), 45}, "wind": {l.WindMS, 12}, "focus": {cfg.Upkeep.FocusEveryH, 2}, "slew": {cfg.Slew.RateDegS, 1.5},
	} {
		check.Near(t, v[0], v[1], 1e-9, "default of %s", what)
	}
	eq, _ := ParseConfig([]byte(minimal+"[limits]\nmount = \"equatorial\"\n"), "run.toml")
	check.Near(t, eq.Limits.MaxAltitude.Deg(), 90, 1e-9, "highest altitude of an equatorial mount")
}

// keyLine is a key of the template, commented out or not.
var keyLine = regexp.MustCompile(`^# ?((\[\[?[a-z.]+\]\]?|[a-z0-9_]+ = .*))$`)

// With every comment that holds a key taken off, the template is a whole
// configuration: no key is unknown, none wrong, and nothing that the parser
// asks for is missing from it.
func TestTemplateIsWhole(t *testing.T) {
	data, err := template.ReadFile("template/run.toml")
	if err != nil {
		t.Fatal(err)
	}
	var lines []string
	for _, line := range strings.Split(fill(string(data), Place{Name: "Here", LatDeg: 1, LonDeg: 2, ElevM: 3, Zone: "Europe/Berlin"}), "\n") {
		if m := keyLine.FindStringSubmatch(line); m != nil {
			line = m[1]
		}
		lines = append(lines, line)
	}
	text := strings.Join(lines, "\n")
	_, problems := ParseConfig([]byte(text), "run.toml")
	for _, p := range problems {
		t.Error(p)
	}
	tr := &tree{name: "x", data: []byte(text)}
	c, _ := ParseConfig([]byte(text), "run.toml")
	if len(c.Instruments) != 2 || len(c.Nights) != 5 || len(c.Limits.Horizon) != 2 {
		t.Errorf("%d instruments, %d nights, %d corners", len(c.Instruments), len(c.Nights), len(c.Limits.Horizon))
	}
	root := tr.parse()
	tr.ask(root)
	for _, key := range missingKeys(root) {
		t.Errorf("the template does not show %s", key)
	}
}

// ask lets the parser ask for everything.
func (t *tree) ask(root *block) {
	c := &Config{Limits: targets.DefaultLimits()}
	t.site(root, c)
	t.sky(root, c)
	limits, _ := t.sub(root, "limits")
	t.limits(limits, &c.Limits, true)
	slew, _ := t.sub(root, "slew")
	t.slew(slew, &c.Slew)
	t.nights(root, c)
	t.upkeep(root, c)
	t.handOver(root, c)
}

// missingKeys lists keys that were asked for in a block that stands there and
// were not in it.
func missingKeys(b *block) []string {
	var out []string
	for _, key := range b.asked {
		n, ok := b.keys[key]
		if !ok {
			if b.path != "" || key == "site" {
				out = append(out, b.field(key))
			}
			continue
		}
		if sub, isBlock := n.value.(*block); isBlock && key != "defaults" {
			out = append(out, missingKeys(sub)...)
		}
	}
	return out
}

func TestNewIsClean(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	if err := New(dir, Place{Name: `Odd "Place"`, LatDeg: -24.6, LonDeg: -70.4, ElevM: 2600, Zone: "America/Santiago"}); err != nil {
		t.Fatal(err)
	}
	r, problems := Open(os.DirFS(dir), dir)
	if len(problems) != 0 {
		t.Error(table.Lines(problems))
	}
	if r.Config.Site.Name != `Odd "Place"` || len(r.Targets) != 8 || len(r.Requests) != 4 {
		t.Errorf("%q, %d targets, %d requests", r.Config.Site.Name, len(r.Targets), len(r.Requests))
	}
	before, err := os.ReadFile(filepath.Join(dir, "run.toml"))
	if err != nil {
		t.Fatal(err)
	}
	if err := New(dir, Place{}); err == nil || !strings.Contains(err.Error(), "nothing was written") {
		t.Errorf("a second New into the folder: %v", err)
	}
	after, err := os.ReadFile(filepath.Join(dir, "run.toml"))
	if err != nil || string(before) != string(after) {
		t.Error("the second New changed run.toml")
	}
	blank := filepath.Join(t.TempDir(), "blank")
	if err := New(blank, Place{}); err != nil {
		t.Fatal(err)
	}
	if _, problems := Open(os.DirFS(blank), blank); len(problems) != 0 {
		t.Error(table.Lines(problems))
	}
}

func TestOpenBad(t *testing.T) {
	fsys := fstest.MapFS{
		"run.toml":         {Data: []byte(minimal + "[[instrument]]\nname = \"imager\"\nkind = \"imager\"\n[[instrument.mode]]\nname = \"B\"\nband = \"B\"\n[[instrument.mode]]\nname = \"V\"\nband = \"V\"\n")},
		"targets/a.csv":    {Data: []byte("name,ra_deg,dec_deg\nR Lep,74.9,-14.8\n")},
		"targets/b.csv":    {Data: []byte("name,ra_deg,dec_deg\nr lep,74.9,-14.8\n")},
		"targets/c.vot":    {Data: []byte("<VOTABLE/>")},
		"requests.csv":     {Data: []byte("request,target,instrument,mode,band\n1,R Dor,imager,V,V\n1,R Lep,spectrograph,,\n2,R Lep,imager,V,Rc\n")},
		"magnitudes/m.csv": {Data: []byte("target,jd,band,mag\nNobody,2461376.5,V,8\n")},
	}
	r, problems := Open(fsys, "myrun")
	got := table.Lines(problems)
	for _, want := range []string{
		`myrun/targets/c.vot: warning: this format is not read yet; save it as CSV`,
		`myrun/targets/b.csv:2: warning: name "r lep": also at myrun/targets/a.csv:2; give each target a name of its own`,
		`myrun/requests.csv:2: target "R Dor": no target "R Dor"`,
		`myrun/requests.csv:3: request "1": also at myrun/requests.csv:2; give each request a name of its own`,
		`myrun/requests.csv:3: instrument "spectrograph": no such instrument; use one of imager`,
		`myrun/requests.csv:4: band "Rc": instrument "imager" has modes B, V; use one of these or add a mode`,
		`myrun/magnitudes/m.csv:2: warning: target "Nobody": no target "Nobody"`,
	} {
		if !strings.Contains(got, want) {
			t.Errorf("missing %q in\n%s", want, got)
		}
	}
	if len(r.Targets) != 2 || len(r.Requests) != 3 || len(r.Magnitudes) != 1 {
		t.Errorf("%d targets, %d requests, %d magnitudes", len(r.Targets), len(r.Requests), len(r.Magnitudes))
	}
	if _, problems := Open(fstest.MapFS{}, "x"); len(problems) < 2 {
		t.Errorf("an empty folder: %s", table.Lines(problems))
	}
}

func TestAllocatedOn(t *testing.T) {
	cfg, problems := ParseConfig([]byte(minimal+"[[night]]\ndate = 2026-12-01\nuntil_utc = \"04:45\"\n[[night]]\ndate = 2026-12-02\nfrom_utc = \"2026-12-03T04:45:00Z\"\n[[night]]\ndate = 2026-12-03\n"), "run.toml")
	if len(problems) != 0 {
		t.Fatal(table.Lines(problems))
	}
	span := func(day int) astro.Span {
		from, err := timescale.At(time.Date(2026, 12, day, 16, 42, 55, 0, time.UTC))
		if err != nil {
			t.Fatal(err)
		}
		return astro.Span{From: from, Until: from.Add(24 * time.Hour)}
	}
	first := cfg.AllocatedOn(span(1), astro.Date{Year: 2026, Month: 12, Day: 1})
	if len(first) != 1 || first[0].Until.UTC().Format(time.RFC3339) != "2026-12-02T04:45:00Z" || first[0].From != span(1).From {
		t.Errorf("first half: %+v", first)
	}
	second := cfg.AllocatedOn(span(2), astro.Date{Year: 2026, Month: 12, Day: 2})
	if len(second) != 1 || second[0].From.UTC().Format(time.RFC3339) != "2026-12-03T04:45:00Z" {
		t.Errorf("second half: %+v", second)
	}
	for _, day := range []int{3, 4} {
		if got := cfg.AllocatedOn(span(day), astro.Date{Year: 2026, Month: 12, Day: day}); got != nil {
			t.Errorf("whole or unlisted night %d: %+v", day, got)
		}
	}
}

func TestDefaultRequest(t *testing.T) {
	text := minimal + "[[instrument]]\nname = \"img\"\nkind = \"imager\"\n[[instrument.mode]]\nname = \"B\"\nband = \"B\"\n[[instrument.mode]]\nname = \"V\"\nband = \"V\"\n[[instrument.mode]]\nname = \"ha\"\nband = \"Ha\"\n" +
		"[[instrument]]\nname = \"spec\"\nkind = \"slit\"\n[[instrument.mode]]\nname = \"low\"\nrange_nm = [340, 930]\n" +
		"[[instrument]]\nname = \"quick\"\nkind = \"fast\"\n[[instrument.mode]]\nname = \"g\"\nband = \"g\"\n[defaults.wd]\nsnr = 60\nweight = 2\n"
	cfg, problems := ParseConfig([]byte(text), "run.toml")
	for _, p := range problems {
		if !p.Warning { // that the instruments are not described
			t.Fatal(p)
		}
	}
	for kind, want := range map[targets.Kind]string{
		targets.Giant: "spec low 100", targets.PostAGB: "spec low 100", targets.Standard: "spec low 100", targets.WD: "spec low 60",
		targets.LPV: "img V 50", targets.PN: "img ha 30", targets.Interacting: "quick g 0",
	} {
		r, ok := cfg.DefaultRequest(kind)
		if got := fmt.Sprintf("%s %s %g", r.Instrument, r.Mode, r.SNR.Value); !ok || got != want {
			t.Errorf("%s: %q, want %q", kind, got, want)
		}
	}
	if r, _ := cfg.DefaultRequest(targets.Interacting); r.DurationMin.Value != 60 {
		t.Errorf("interacting: %+v", r.DurationMin)
	}
	bare, _ := ParseConfig([]byte(minimal), "run.toml")
	if _, ok := bare.DefaultRequest(targets.WD); ok {
		t.Error("a request without an instrument")
	}
	if !slices.Contains(handOverFields, "frame") {
		t.Error("the frame can no longer be handed over")
	}
}

func FuzzParseConfig(f *testing.F) {
	f.Add([]byte(minimal))
	f.Add([]byte("[[instrument]]\nname='a'\n[instrument.x]\n[[instrument.mode]]\nthroughput_at=[[1,2],[3]]\n[a.b]\nc={d=[1,{e=2}]}\n"))
	f.Add([]byte("title = \"\"\"\nopen\n[site\nlatitude_deg=1e999\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		_, problems := ParseConfig(data, "run.toml")
		for _, p := range problems {
			if p.At.File != "run.toml" || p.Problem == "" || p.At.Line < 0 || (p.At.Column > 0) != (p.At.Line > 0) {
				t.Fatalf("a problem without a place or words: %+v", p)
			}
		}
	})
}
