package desk_test

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"evenfall/targets/roster"
	"evenfall/tui/check"
)

// The diagram shows the star that is selected in the list, goes from star to
// star, and the list and the star's screen go with it; to and fro makes no
// pile of screens.
func TestDiagram(t *testing.T) {
	d := check.New(t, check.Source(t, 5), 80, 24)
	name := strings.Fields(d.Press("j").Selected())[2]
	d.Press("h").See("luminosity, Lsun", "[", name, "life of").Press(".", ".", "up", "left")
	line := d.Grid().Line(19)
	d.Press("enter").See("ICRS")
	star := d.Grid().Line(2)
	if !strings.HasPrefix(line, strings.TrimSpace(strings.Split(star, "  ")[0][:4])) {
		t.Errorf("the diagram shows %q, the star's screen %q", line, star)
	}
	for range 5 {
		d.Press("h", "enter")
	}
	d.Press("h", "h").See("M_G, mag").Press("h").See("temperature").Press("+", "+").See("zoom 4 x").Press("0").Not("zoom 4")
	d.Press("m").See("* ").Press("?").See("keys on the screen diagram").Press("q").Press("T").See("there is no log here").Press("esc", "v").See("theme")
	d.Press("q", "q").See("/52")
}

// The track comes when the user has rested on a star for a second, and the
// filter of the list holds on the diagram.
func TestDiagramFollows(t *testing.T) {
	d := check.New(t, check.Source(t, 1), 80, 24)
	d.Press("/").Type("kind=pn").Press("enter", "h").See("NNN").Not("PPP").Not("aa")
	d.Press(".", ".", ".")
	d.Wait(2 * time.Second).Not("follows")
	d.Press("esc", "/", "ctrl+u").Type("nosuchstar").Press("enter", "h").See("no star is selected")
	d.Press(".", "left", "+", "-", "h", "enter", "m")
}

// A list of thousands is placed in portions, the first of it.
func TestDiagramLong(t *testing.T) {
	src := check.Source(t, 1)
	stars := src.Roster
	var list []roster.Entry
	for i := range roster.Bulk + 3000 {
		e := *stars.Entry(i % stars.Len())
		e.Target.Name = fmt.Sprint(e.Target.Name, " ", i)
		list = append(list, e)
	}
	src.Roster = roster.New(list, sharedModels(), nil)
	d := check.New(t, src, 120, 40)
	d.Press("h").See("the first 5000 of 6000", "[")
	d.Press("esc", "G", "h").See("the first 5000 of 6000", "[").Press("left").See("[")
}

// A session comes back to the diagram.
func TestDiagramComesBack(t *testing.T) {
	src := check.Source(t, 5)
	d := check.New(t, src, 80, 24)
	d.Press("j", "j", "h")
	src.State = d.Desk.State()
	check.New(t, src, 80, 24).See("luminosity, Lsun", d.Grid().Line(19)[:20])
}
