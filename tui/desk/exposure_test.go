package desk_test

import (
	"context"
	"testing"

	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/taking"
	"evenfall/tui/check"
)

// A magnitude typed in at the star changes the exposure on the screen at once,
// to what the moment of the measured star says.
func TestMagnitudeExposes(t *testing.T) {
	src := check.Equipped(t, 1)
	book := check.Logged(t, &src, "observer 1")
	d := check.New(t, src, 120, 40)
	at, err := timescale.At(check.Start)
	if err != nil {
		t.Fatal(err)
	}
	date, err := moment.DateOfTonight(check.Site, at)
	if err != nil {
		t.Fatal(err)
	}
	night, err := src.Night(date)
	if err != nil {
		t.Fatal(err)
	}
	s := moment.NewScene(night, at)
	row := -1
	for i := range src.Roster.Len() {
		if m := src.Roster.Moment(&s, i); src.Roster.Entry(i).Target.Kind == targets.LPV && m.InCan && m.ExposureOK {
			row = i
			break
		}
	}
	if row < 0 {
		t.Fatal("no variable star with an exposure")
	}
	name := src.Roster.Entry(row).Target.Name
	d.Press("/").Type(name).Press("enter").See("  " + name + "  lpv")
	before := src.Roster.Moment(&s, row).Exposure
	d.See("Expose " + taking.Frames(&before))
	d.Press("M").Type("14.5").Press("enter").See("saved")
	mags, err := book.Magnitudes(context.Background())
	if err != nil || len(mags) != 1 {
		t.Fatalf("%v %v", mags, err)
	}
	taught := src.Roster.WithMagnitudes(map[int][]targets.Magnitude{row: mags})
	after := taught.Moment(&s, row).Exposure
	if after.BookedS <= 2*before.BookedS {
		t.Errorf("%s: booked %.2f s at %.1f, after V 14.5 %.2f s at %.1f", name, before.BookedS, before.Mag.Mags(), after.BookedS, after.Mag.Mags())
	}
	f := taught.Prepared(row).Light.At(at, light.Ask{Band: "V", Level: 0.8})
	if q, ok := f.Quantile(0.5); !ok || q != after.Mag {
		t.Errorf("the forecast says %.3f, the exposure is for %.3f", q.Mags(), after.Mag.Mags())
	}
	d.See("Expose " + taking.Frames(&after))
	d.Press("enter").See("Expose "+taking.Frames(&after), "take|", "s|")
}
