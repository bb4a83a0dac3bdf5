package table

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode"

	"evenfall/astro/check"
	"evenfall/targets"
)

// Each file in testdata/bad/lists holds what people really hand in; beside it
// stands what must be said, and how many rows must load (the first line).
func TestReadBad(t *testing.T) {
	dir := filepath.Join(check.Root(t), "testdata", "bad", "lists")
	files, err := filepath.Glob(filepath.Join(dir, "*.csv"))
	if err != nil || len(files) < 12 {
		t.Fatalf("%d files in %s: %v", len(files), dir, err)
	}
	for _, file := range files {
		data, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		want, err := os.ReadFile(strings.TrimSuffix(file, ".csv") + ".txt")
		if err != nil {
			t.Fatal(err)
		}
		list, problems := Read(bytes.NewReader(data), filepath.Base(file))
		got := fmt.Sprintf("%d rows\n%s", len(list), Lines(problems))
		if got != string(want) {
			t.Errorf("%s:\n--- got\n%s--- want\n%s", filepath.Base(file), got, want)
		}
	}
}

// Sexagesimal in the usual notations: Vega, 18 36 56.336 +38 47 01.28.
func TestSexagesimal(t *testing.T) {
	for _, c := range []struct{ ra, dec string }{
		{"18 36 56.336", "+38 47 01.28"}, {"18:36:56.336", "+38:47:01.28"}, {"18h36m56.336s", "+38d47m01.28s"},
		{"18h 36m 56.336s", "38° 47′ 01.28″"}, {"279.2347333", "38.7836889"},
	} {
		list, problems := Read(strings.NewReader("name,ra,dec\nVega,"+c.ra+","+c.dec+"\n"), "x.csv")
		if len(list) != 1 || len(problems) != 0 {
			t.Errorf("%q %q: %d rows, %s", c.ra, c.dec, len(list), Lines(problems))
			continue
		}
		check.Near(t, list[0].Place.RA.Deg(), 279.2347333, 1e-6, "right ascension of %q", c.ra)
		check.Near(t, list[0].Place.Dec.Deg(), 38.7836889, 1e-6, "declination of %q", c.dec)
	}
	list, _ := Read(strings.NewReader("name,ra,dec\na,00 00 00,-00 30 00\n"), "x.csv")
	check.Near(t, list[0].Place.Dec.Deg(), -0.5, 1e-12, "declination -00 30 00")
}

func TestWindowsFile(t *testing.T) {
	text := "\xef\xbb\xbfname,ra_deg,dec_deg,notes\r\n# a comment\r\n\"R Lep\",74.9,-14.8,\"two\r\nlines, and a comma\"\r\n"
	list, problems := Read(strings.NewReader(text), "x.csv")
	if len(list) != 1 || len(problems) != 0 || list[0].Name != "R Lep" || list[0].Notes != "two lines, and a comma" {
		t.Errorf("%+v %s", list, Lines(problems))
	}
}

func TestAliasesAndCase(t *testing.T) {
	text := "source_id,ra,dec,parallax,parallax_error,pmra,pmdec,phot_g_mean_mag,ref_epoch,i,I,r,R,shape\n" +
		"4711,10.5,-20.25,5,0.1,30,-40,15.5,2016.0,1,2,3,4,round\n"
	list, problems := Read(strings.NewReader(text), "gaia.csv")
	if len(list) != 1 || len(problems) != 0 {
		t.Fatalf("%d rows, %s", len(list), Lines(problems))
	}
	x := list[0]
	if x.Name != "4711" || x.Place.Plx != targets.KnownErr(5, 0.1) || x.Place.PMDec.Value != -40 || !x.Place.EpochGiven || x.Place.EpochJyr != 2016 {
		t.Errorf("%+v", x)
	}
	for band, want := range map[targets.Band]float64{"G": 15.5, "i": 1, "I": 2, "r": 3, "R": 4} {
		check.Near(t, x.Mags[band].Value, want, 0, "band %s", band)
	}
	if len(x.Extra) != 1 || x.Extra[0] != (targets.Field{Name: "shape", Value: "round"}) {
		t.Errorf("extra columns %+v", x.Extra)
	}
	renamed, problems := ReaderWith(map[string]string{"Right": "ra_deg", "Up": "dec_deg"})(strings.NewReader("name,Right,Up\na,10,20\n"), "x.csv")
	if len(renamed) != 1 || len(problems) != 0 {
		t.Errorf("renamed columns: %d rows, %s", len(renamed), Lines(problems))
	}
}

func TestFirstFiftyThenTheCount(t *testing.T) {
	var b strings.Builder
	b.WriteString("name,ra_deg,dec_deg,V\n")
	for i := range 80 {
		fmt.Fprintf(&b, "s%d,%d,0,bright\n", i, i*4)
	}
	list, problems := Read(strings.NewReader(b.String()), "x.csv")
	if len(list) != 80 || len(problems) != 51 || !strings.Contains(problems[50].Error(), "and 30 more problems") {
		t.Errorf("%d rows, %d problems, last %v", len(list), len(problems), problems[len(problems)-1])
	}
	if problems[0].At != (targets.Where{File: "x.csv", Line: 2, Column: 8}) {
		t.Errorf("first at %v", problems[0].At)
	}
}

func TestKindInferred(t *testing.T) {
	for text, want := range map[string]targets.Kind{
		"M,": targets.LPV, "SRB,": targets.LPV, "RVA,": targets.PostAGB, "ZZA,DA4": targets.WD, ",DA3": targets.WD, "UGSU,": targets.Interacting,
		"NR,": targets.Interacting, "EA/WD,DA+M": targets.Interacting, ",K0III": targets.Giant, ",C5": targets.Giant, ",G2V": targets.Other,
	} {
		list, _ := Read(strings.NewReader("name,ra_deg,dec_deg,vartype,sptype\nx,1,2,"+text+"\n"), "x.csv")
		if len(list) != 1 || list[0].Kind != want || !list[0].KindInferred {
			t.Errorf("%q is taken for %+v, want %s", text, list, want)
		}
	}
}

func TestErrorsAssumedFromDigits(t *testing.T) {
	list, _ := Read(strings.NewReader("name,ra_deg,dec_deg,period_d,epoch_max_jd,e_epoch_d\na,1,2,331.96,2444839,\nb,3,4,0.0736,2450000.5,0.002\n"), "x.csv")
	p, e := list[0].Var.PeriodD, list[0].Var.EpochMaxJD
	if p.Err != 0.005 || !p.Assumed || e.Err != 0.5 || !e.Assumed {
		t.Errorf("period %+v epoch %+v", p, e)
	}
	if e := list[1].Var.EpochMaxJD; e.Err != 0.002 || e.Assumed {
		t.Errorf("epoch with its error given: %+v", e)
	}
	for text, want := range map[string]float64{"331.96": 0.005, "2444839": 0.5, "1e-3": 0.0005, "2.50e2": 0.5, "x": 0} {
		check.Near(t, LastDigitHalf(text), want, 1e-15, "half of the last digit of %s", text)
	}
}

func TestClean(t *testing.T) {
	for in, want := range map[string]string{
		"R Lep": "R Lep", "a\x1b[31mred\x1b[0mb": "aredb", "t\x1b]0;title\x07x": "tx", "a\u202eb\u200bc": "abc", "tab\tline\nend\x00": "tab line end",
		"\u009b31mz": "z", "\x1b": "", "π1 Gru": "π1 Gru", "a\xffb": "a\ufffdb", "x\x1bPq\x1b\\y": "xy",
	} {
		if got := Clean(in); got != want {
			t.Errorf("Clean(%q) = %q, want %q", in, got, want)
		}
	}
}

func TestMatch(t *testing.T) {
	list := []targets.Target{{ID: "r-lep", Name: "R Lep"}, {ID: "u-her", Name: "u Her"}, {ID: "x", Name: "U Her"}, {ID: "y", Name: "r-lep"}}
	for name, want := range map[string]int{"r_lep": 0, "R LEP": 0, "r-lep": 0, "x": 2} {
		if i, err := Match(list, name); err != nil || i != want {
			t.Errorf("%q finds %d, %v", name, i, err)
		}
	}
	if _, err := Match(list, "uher"); err == nil || !strings.Contains(err.Error(), "two targets") {
		t.Errorf("two of a name: %v", err)
	}
	if _, err := Match(list, "R Lup"); err == nil || !strings.Contains(err.Error(), "did you mean") {
		t.Errorf("a slip: %v", err)
	}
	if _, err := Match(list, "Betelgeuse"); err == nil {
		t.Error("found what is not there")
	}
}

// The facts that the built-in list was made from load as they are: 256 rows,
// kinds apart, which are words of their own there.
func TestFacts(t *testing.T) {
	path := check.Shared(t, "facts/evolved-stars.csv")
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	list, problems := Read(f, "evolved-stars.csv")
	if len(list) != 256 {
		t.Errorf("%d rows", len(list))
	}
	for _, p := range problems {
		if p.Field != "kind" && !p.Warning && !strings.Contains(p.Problem, "more problems") {
			t.Error(p)
		}
	}
}

func safe(t testing.TB, texts ...string) {
	t.Helper()
	for _, s := range texts {
		for _, r := range s {
			if unicode.IsControl(r) || hidden(r) {
				t.Fatalf("%q holds %U", s, r)
			}
		}
	}
}

func placed(t testing.TB, problems []*Error) {
	t.Helper()
	for _, p := range problems {
		if p.At.File == "" || p.At.Line < 0 || p.Problem == "" || (p.At.Column > 0 && p.At.Line == 0) {
			t.Fatalf("a problem without a place or words: %+v", p)
		}
		safe(t, p.Value, p.Problem, p.Fix, p.Field)
	}
}

func FuzzRead(f *testing.F) {
	f.Add([]byte("name,ra_deg,dec_deg\na,1,2\n"))
	f.Add([]byte("\xef\xbb\xbfid,name,kind,ra,dec,V,e_V,mag_min,unconfirmed,x\r\n1,\"a\x1b[2J\",wd:DA,1 2 3,-0 1 2,12.5:,0.1,<18,V x,y\r\n"))
	f.Add([]byte("name,ra_deg,dec_deg,notes\na,1,2,\"open\nb,3,4,x\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		list, problems := Read(bytes.NewReader(data), "f.csv")
		placed(t, problems)
		for _, x := range list {
			safe(t, x.Name, x.ID, x.Notes, x.Source, x.KindNote, x.Physics.SpType, x.Var.Type, x.Conflicts)
			for _, e := range x.Extra {
				safe(t, e.Name, e.Value)
			}
			if d := x.Place.Dec.Deg(); !(d >= -90 && d <= 90) || !(x.Place.RA.Deg() >= 0 && x.Place.RA.Deg() <= 360) {
				t.Fatalf("place %v %v", x.Place.RA, x.Place.Dec)
			}
		}
		var b bytes.Buffer
		if err := Write(&b, list); err != nil {
			t.Fatal(err)
		}
	})
}

func FuzzClean(f *testing.F) {
	f.Add("a\x1b]8;;x\x1b\\b\u202e")
	f.Fuzz(func(t *testing.T, s string) {
		c := Clean(s)
		safe(t, c)
		if Clean(c) != c {
			t.Fatalf("%q is cleaned to %q and that to %q", s, c, Clean(c))
		}
	})
}
