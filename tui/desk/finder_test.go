package desk_test

import (
	"fmt"
	"testing"

	"pgregory.net/rapid"

	"evenfall/targets"
	"evenfall/targets/instrument"
	"evenfall/targets/roster"
	"evenfall/tui/check"
	"evenfall/tui/kit"
)

// The field shows neighbours, stars to offset from with figures, scale, north
// and east; zoom and orientation; without neighbours it says where to put them.
func TestFinder(t *testing.T) {
	src := check.Source(t, 5)
	d := check.New(t, src, 80, 24)
	d.Press("p").See("[+]", "no neighbours are known", "no instrument is set", "N", "E", "ICRS tonight")
	src.Field = neighbours(check.Field(src))
	d = check.New(t, src, 80, 24)
	d.Press("j", "p").See("(1)", "arcsec", "position angle", "from n1", " 2' =")
	d.Press("+").See(" 1' =").Press("-", "-").See(" 5' =").Press("0").See(" 2' =").Press("y").See("north up, east left").Press("y").See("as the camera")
	d.Press("j", "k", ".", ",", "m").See("* ").Press("?").See("keys on the screen finder").Press("q", "enter").See("ICRS").Press("p", "z", "p").See("[+]")
	src.State = d.Desk.State()
	check.New(t, src, 80, 24).See("[+]")
	check.New(t, src, 80, 24).Press("q", "q", "/").Type("nosuchstar").Press("enter", "p").See("no star is selected").Press("j", "+", "y", "enter")
}

// with gives every target of a source an instrument.
func with(src *instrument.Instrument, m *instrument.Mode, r *roster.Roster) *roster.Roster {
	var list []roster.Entry
	for i := range r.Len() {
		e := *r.Entry(i)
		e.Want.Instrument, e.Want.Mode = src, m
		list = append(list, e)
	}
	return roster.New(list, sharedModels(), nil)
}

// The camera is drawn as it is turned and mirrored, a slit at the angle asked
// for.
func TestFinderInstruments(t *testing.T) {
	src := check.Source(t, 5)
	src.Field = neighbours(check.Field(src))
	plain := src.Roster
	src.Roster = with(&instrument.Instrument{Name: "imager", Kind: instrument.Imager, FieldArcmin: 8, RotationDeg: 30, Flip: true, Limits: targets.DefaultLimits()}, nil, plain)
	check.New(t, src, 120, 40).Press("j", "p").See("imager 8.0 x 8.0", "mirrored").Press("y").See("north up")
	src.Roster = with(&instrument.Instrument{Name: "slit", Kind: instrument.Slit, SlitLengthArcsec: 300, Limits: targets.DefaultLimits()}, &instrument.Mode{SlitArcsec: []float64{1.5}}, plain)
	d := check.New(t, src, 120, 40)
	d.Press("p").See("slit 1.5 x 300 arcsec", "parallactic")
	src.Requests = []targets.Request{{Target: plain.Entry(plain.Len() - 1).Target.Name, PositionAngle: "45", SlitArcsec: targets.Known(2)}}
	for i := range plain.Len() {
		src.Requests = append(src.Requests, targets.Request{Target: plain.Entry(i).Target.Name, PositionAngle: "225", SlitArcsec: targets.Known(2), AimEArcsec: targets.Known(5), AimNArcsec: targets.Known(3)})
	}
	check.New(t, src, 120, 40).Press("p").See("slit 2.0 x 300 arcsec at 45 deg, as requested")
	check.New(t, src, 120, 40).Press("/").Type("kind=pn").Press("enter", "p").See("x: aim 5.0 east, 3.0 north", "sky")
}

// Whatever is done to the field, at any size, the picture has the size of the
// screen.
func TestFinderProperty(t *testing.T) {
	src := check.Source(t, 21)
	src.Field = neighbours(check.Field(src))
	keys := []string{"p", "j", "k", "+", "-", "0", "y", "enter", "[", "]", "}", "<", ".", "m", "esc", "q", "n", "?", "z", ",", "v"}
	rapid.Check(t, func(r *rapid.T) {
		src := src
		src.Look = kit.NewLook(kit.DarkTheme, kit.Colours256, rapid.SampledFrom([]kit.Glyphs{kit.ASCII, kit.Unicode, kit.Braille}).Draw(r, "glyphs"))
		d := check.New(t, src, 80, 24)
		d.Press("p")
		anywhere(r, d, keys)
	})
}

// BenchmarkFinder draws the field: wanted under 200 microseconds.
func BenchmarkFinder(b *testing.B) {
	for _, size := range [][2]int{{80, 24}, {200, 60}} {
		b.Run(fmt.Sprintf("%dx%d", size[0], size[1]), func(b *testing.B) {
			src := check.Source(b, 5)
			src.Field = neighbours(check.Field(src))
			src.Look = kit.NewLook(kit.DarkTheme, kit.Colours256, kit.Braille)
			d := check.New(b, src, size[0], size[1])
			d.Press("p")
			b.ResetTimer()
			for range b.N {
				d.Desk.View()
			}
		})
	}
}

// neighbours gives the same stars whenever it is asked.
func neighbours(list []targets.Target) func() []targets.Target {
	return func() []targets.Target { return list }
}
