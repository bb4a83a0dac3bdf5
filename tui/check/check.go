// Package check is for tests of the screens alone: a terminal to draw them
// on, and a driver that presses keys without terminal, goroutine or sleep.
package check

import (
	"fmt"
	"image/color"
	"math"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/charmbracelet/x/ansi"
	"github.com/charmbracelet/x/vt"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/targets/store"
	"evenfall/tui/desk"
	"evenfall/tui/kit"
)

// models are made once for all tests of a package.
var models = sync.OnceValue(moment.NewModels)

// Grid is what a terminal shows.
type Grid struct {
	*vt.Emulator
	W, H int
}

// Draw puts a picture on a new terminal.
func Draw(view string, w, h int) *Grid {
	g := &Grid{vt.NewEmulator(max(w, 1), max(h, 1)), w, h}
	g.WriteString(strings.ReplaceAll(view, "\n", "\r\n"))
	return g
}

// Line returns the text of a line, blanks at its end cut.
func (g *Grid) Line(y int) string {
	var b strings.Builder
	for x := 0; x < g.W; x++ {
		c := g.CellAt(x, y)
		switch {
		case c == nil || c.Content == "":
			if c == nil || c.Width > 0 {
				b.WriteByte(' ')
			}
		default:
			b.WriteString(c.Content)
		}
	}
	return strings.TrimRight(b.String(), " ")
}

// Text returns all lines.
func (g *Grid) Text() string {
	lines := make([]string, g.H)
	for y := range lines {
		lines[y] = g.Line(y)
	}
	return strings.Join(lines, "\n")
}

// Golden writes the grid for a file: NN|text for each line, then the roles of
// what is not plain text, as drawn with kit.Numbered.
func (g *Grid) Golden() string {
	var b strings.Builder
	for y := range g.H {
		fmt.Fprintf(&b, "%02d|%s\n", y, g.Line(y))
	}
	for y := range g.H {
		from, role := 0, kit.Text
		for x := 0; x <= g.W; x++ {
			r := kit.Text
			if x < g.W {
				r = g.role(x, y)
			}
			if r != role {
				if role != kit.Text {
					fmt.Fprintf(&b, "style %02d:%d-%d %s\n", y, from, x-1, kit.RoleNames[role])
				}
				from, role = x, r
			}
		}
	}
	return b.String()
}

func (g *Grid) role(x, y int) kit.Role {
	c := g.CellAt(x, y)
	if c == nil || strings.TrimSpace(c.Content) == "" {
		return kit.Text
	}
	if n, ok := c.Style.Fg.(ansi.IndexedColor); ok {
		if r, known := kit.NumberedRole(int(n)); known {
			return r
		}
	}
	return kit.Text
}

// Inks calls f with the colours of each cell that shows something.
func (g *Grid) Inks(f func(x, y int, content string, fg, bg color.Color)) {
	for y := range g.H {
		for x := range g.W {
			if c := g.CellAt(x, y); c != nil && (strings.TrimSpace(c.Content) != "" || c.Style.Bg != nil) {
				f(x, y, c.Content, c.Style.Fg, c.Style.Bg)
			}
		}
	}
}

// Driver is a desk with somebody at it who waits for every task.
type Driver struct {
	T    testing.TB
	Desk *desk.Desk
	Now  time.Time
	W, H int
	Held []desk.Task // tasks kept back while Hold is set
	Hold bool
}

// Site is where the tests observe.
var Site = astro.Site{Name: "test site", Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), HeightM: 2400, Air: astro.DefaultWeather(2400)}

// Start is the moment at which they begin.
var Start = time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC)

// Source is the built-in list, every n-th star of it, at the test site; the
// places on the diagram are invented.
func Source(t testing.TB, every int) desk.Source {
	t.Helper()
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	var list []roster.Entry
	for i := 0; i < len(stars); i += every {
		list = append(list, roster.Entry{Target: stars[i], Want: moment.Want{Weight: 1, Level: 0.8}})
	}
	return desk.Source{Site: Site, Zone: time.UTC, Level: 0.8, Roster: roster.New(list, models(), nil), Every: time.Second,
		Look: kit.Numbered(kit.ASCII), Limits: targets.DefaultLimits(), Lives: Lives{}, Lights: Lights{},
		Night: nights()}
}

// Field is invented neighbours of every target of a source, the same each time:
// their offsets go round the target like the seeds of a sunflower.
func Field(src desk.Source) []targets.Target {
	var out []targets.Target
	for i := range src.Roster.Len() {
		t := &src.Roster.Entry(i).Target
		for k := 1; k <= 24; k++ {
			turn, far := astro.Deg(137.5*float64(k)), astro.Arcsec(70*math.Sqrt(float64(k)))
			p := targets.Place{RA: t.Place.RA.Plus(astro.Rad(far.Rad() * turn.Sin() / math.Max(t.Place.Dec.Cos(), 0.01))), Dec: t.Place.Dec.Plus(far.Times(turn.Cos())),
				EpochJyr: 2016, EpochGiven: true}
			if k%4 != 0 {
				p.PMRA, p.PMDec = targets.Known(float64(k)), targets.Known(-float64(k))
			}
			out = append(out, targets.Target{Name: fmt.Sprintf("n%d", k), Kind: targets.Other, Place: p,
				Mags: map[targets.Band]targets.Measure{"V": targets.Known(9 + math.Mod(3.7*float64(k), 9))}})
		}
	}
	return out
}

// nights prepares nights and keeps them, as the program does.
func nights() func(astro.Date) (*moment.Night, error) {
	var mu sync.Mutex
	kept := map[astro.Date]*moment.Night{}
	return func(d astro.Date) (*moment.Night, error) {
		mu.Lock()
		defer mu.Unlock()
		if n, ok := kept[d]; ok {
			return n, nil
		}
		n, err := moment.NewNight(Site, d, targets.DefaultLimits(), targets.Conditions{})
		if err == nil {
			kept[d] = n
		}
		return n, err
	}
}

// Logged gives a source a log of its own, in memory, with a clock that the
// driver moves.
func Logged(t testing.TB, src *desk.Source, observer string) *logbook.Book {
	t.Helper()
	db, err := store.Memory()
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { db.Close() })
	src.Book, src.Observer, src.Session = logbook.Open(db, func() time.Time { return Start }, ""), observer, "session of the test"
	src.Every = time.Minute
	return src.Book
}

// New sits down at a desk.
func New(t testing.TB, src desk.Source, w, h int) *Driver {
	t.Helper()
	d := &Driver{T: t, Now: Start, W: w, H: h}
	var tasks []desk.Task
	d.Desk, tasks = desk.New(src, Start)
	d.run(append(tasks, d.Desk.Resize(w, h)...))
	return d
}

func (d *Driver) run(tasks []desk.Task) {
	if d.Hold {
		d.Held = append(d.Held, tasks...)
		return
	}
	for len(tasks) > 0 {
		tasks = append(tasks[1:], d.Desk.Apply(tasks[0].Run())...)
	}
}

// Release runs what was held back, in the order given, the last first if
// backwards.
func (d *Driver) Release(backwards bool) {
	tasks := d.Held
	d.Held, d.Hold = nil, false
	if backwards {
		for i := len(tasks) - 1; i >= 0; i-- {
			d.run(tasks[i : i+1 : i+1])
		}
		return
	}
	d.run(tasks)
}

// Press presses keys.
func (d *Driver) Press(keys ...string) *Driver {
	for _, k := range keys {
		d.run(d.Desk.Key(k))
	}
	return d
}

// Type presses the keys of a text.
func (d *Driver) Type(text string) *Driver {
	for _, r := range text {
		d.Press(string(r))
	}
	return d
}

// Paste pastes.
func (d *Driver) Paste(text string) { d.run(d.Desk.Paste(text)) }

// Wait lets the clock go on, second by second.
func (d *Driver) Wait(by time.Duration) *Driver {
	for end := d.Now.Add(by); d.Now.Before(end); {
		d.Now = d.Now.Add(time.Second)
		d.run(d.Desk.Tick(d.Now))
	}
	return d
}

// Resize changes the size.
func (d *Driver) Resize(w, h int) *Driver {
	d.W, d.H = w, h
	d.run(d.Desk.Resize(w, h))
	return d
}

// Grid returns what is on the screen.
func (d *Driver) Grid() *Grid { return Draw(d.Desk.View(), d.W, d.H) }

// See demands a text on the screen.
func (d *Driver) See(texts ...string) *Driver {
	d.T.Helper()
	all := d.Grid().Text()
	for _, text := range texts {
		if !strings.Contains(all, text) {
			d.T.Errorf("no %q on the screen:\n%s", text, all)
		}
	}
	return d
}

// Not demands that a text is not on the screen.
func (d *Driver) Not(text string) *Driver {
	d.T.Helper()
	if all := d.Grid().Text(); strings.Contains(all, text) {
		d.T.Errorf("%q is on the screen:\n%s", text, all)
	}
	return d
}

// Selected returns the line that carries the cursor.
func (d *Driver) Selected() string {
	for _, line := range strings.Split(d.Grid().Text(), "\n") {
		if strings.HasPrefix(line, ">") {
			return line
		}
	}
	return ""
}
