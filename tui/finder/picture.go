package finder

import (
	"fmt"
	"math"
	"slices"
	"strconv"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/finding"
	"evenfall/targets/instrument"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// picture is a field, drawn in the background; it does not change.
type picture struct {
	key    picKey
	raster *kit.Raster
	notes  []note
}

// note is a line of words.
type note struct {
	role kit.Role
	text string
	rank int // the first first
}

// The ranks of notes.
const (
	ofInstrument = iota
	ofGuide
	ofMotion
	ofCompanion
	ofNebula
	ofOthers
)

// asking is what a picture is made of.
type asking struct {
	key      picKey
	snap     *roster.Snapshot
	field    []targets.Target
	requests []targets.Request
}

// noField is the side of the picture without an instrument, arcsec. Common
// practice, no source.
const noField = 600

// sketch is a picture being drawn.
type sketch struct {
	canvas     *kit.Canvas
	cols, rows int
	camera     finding.Camera // as it is shown
	perDot     float64        // arcsec
	taken      []bool
	notes      []note
}

// draw makes the picture.
func (a *asking) draw() *picture {
	k := &a.key
	t := &a.snap.Roster.Entry(k.row).Target
	at := a.snap.Scene.Instant
	i := a.snap.Roster.Want(k.night, k.row).Instrument
	mode := a.snap.Roster.Want(k.night, k.row).Mode
	m := a.snap.Row(k.row)
	request := a.request(t)
	camera := finding.Camera{WidthArcsec: noField, HighArcsec: noField}
	slit := i != nil && i.Kind == instrument.Slit
	if i != nil {
		camera = finding.CameraOf(&exposure.Setting{Instrument: i})
	}
	if slit {
		camera.WidthArcsec, camera.HighArcsec = i.SlitLengthArcsec, i.SlitLengthArcsec
	}
	if !(camera.WidthArcsec > 0 && camera.HighArcsec > 0) {
		camera.WidthArcsec, camera.HighArcsec = noField, noField
	}
	near := a.near(t, 2*math.Max(camera.WidthArcsec, camera.HighArcsec)*math.Pow(2, float64(max(-k.zoom, 0))))
	found := finding.Tonight(t, at)
	guides := finding.OffsetStars(t, near, at, finding.Rule{Most: 3})
	s := newSketch(k, camera, guides)
	s.instrument(i, slit)
	if slit {
		s.slit(i, mode, request, m.Place.Parallact.Deg())
	} else if i != nil {
		s.outline(camera)
	}
	s.nebula(t, request, at)
	s.search(&found)
	s.compass()
	s.target(t)
	s.guides(guides)
	s.neighbours(near, &found, at)
	s.companion(t)
	s.words(&found, guides, len(a.field), len(near))
	slices.SortStableFunc(s.notes, func(a, b note) int { return a.rank - b.rank })
	return &picture{key: *k, raster: s.canvas.Raster(k.look), notes: s.notes}
}

// request is the target's first; nil: none.
func (a *asking) request(t *targets.Target) *targets.Request {
	for i := range a.requests {
		if key := targets.Key(a.requests[i].Target); key != "" && (key == targets.Key(t.Name) || key == targets.Key(t.ID)) {
			return &a.requests[i]
		}
	}
	return nil
}

// near returns the field stars around a target: within a distance and what
// they may have moved.
func (a *asking) near(t *targets.Target, arcsec float64) []targets.Target {
	var out []targets.Target
	here := astro.Direction(t.Place.RA, t.Place.Dec)
	limit := astro.Arcsec(math.Max(arcsec, 700) + 300)
	for i := range a.field {
		p := &a.field[i].Place
		if !limit.Less(astro.Separation(here, astro.Direction(p.RA, p.Dec))) {
			out = append(out, a.field[i])
		}
	}
	return out
}

func newSketch(k *picKey, camera finding.Camera, guides []finding.Guide) *sketch {
	s := &sketch{canvas: kit.NewCanvas(k.cols, k.rows), cols: k.cols, rows: k.rows, camera: camera, taken: make([]bool, k.cols*k.rows)}
	if k.northUp {
		s.camera.RotationDeg, s.camera.Flip = 0, false
	}
	half := math.Max(camera.WidthArcsec, camera.HighArcsec) / 2
	if k.northUp {
		half = math.Hypot(camera.WidthArcsec, camera.HighArcsec) / 2
	}
	if len(guides) > 0 && guides[0].From.SepArcsec < 3*half { // the first is to be seen
		half = math.Max(half, guides[0].From.SepArcsec)
	}
	s.perDot = 1.12 * 2 * half / math.Min(float64(2*k.cols), float64(4*k.rows)) / math.Pow(2, float64(k.zoom))
	return s
}

// dot returns the dot of an offset from the target, arcsec.
func (s *sketch) dot(east, north float64) (x, y int) {
	right, up, _ := s.camera.On(finding.Offset{EastArcsec: east, NorthArcsec: north})
	limit := func(v float64) int { return int(math.Floor(math.Max(-1e6, math.Min(v, 1e6)))) }
	return limit(float64(s.cols) + right/s.perDot), limit(float64(2*s.rows) - up/s.perDot)
}

// write puts text at the cell of a dot; false: outside, or there is another.
func (s *sketch) write(x, y int, ink kit.Role, text string) bool {
	if x < 0 || y < 0 || x >= 2*s.cols || y >= 4*s.rows {
		return false
	}
	return s.put(x/2, y/4, ink, text)
}

func (s *sketch) put(col, row int, ink kit.Role, text string) bool {
	if col < 0 || row < 0 || row >= s.rows || col+len(text) > s.cols {
		return false
	}
	for c := col; c < col+len(text); c++ {
		if s.taken[row*s.cols+c] {
			return false
		}
	}
	s.canvas.Text(col, row, ink, text)
	for c := col; c < col+len(text); c++ {
		s.taken[row*s.cols+c] = true
	}
	return true
}

// ring joins offsets, arcsec, by dots.
func (s *sketch) ring(ink kit.Role, every int, n int, at func(k int) (east, north float64)) {
	count := 0
	for k := range n {
		e0, n0 := at(k)
		e1, n1 := at(k + 1)
		x0, y0 := s.dot(e0, n0)
		x1, y1 := s.dot(e1, n1)
		steps := max(abs(x1-x0), abs(y1-y0), 1)
		for j := range min(steps, 4000) {
			if count++; count%every == 0 {
				s.canvas.Dot(x0+(x1-x0)*j/steps, y0+(y1-y0)*j/steps, ink)
			}
		}
	}
}

func abs(n int) int {
	if n < 0 {
		return -n
	}
	return n
}

// box draws a rectangle that lies on the sky as a camera does.
func (s *sketch) box(c finding.Camera, ink kit.Role) {
	w, h := c.WidthArcsec/2, c.HighArcsec/2
	corners := [5][2]float64{{-w, -h}, {w, -h}, {w, h}, {-w, h}, {-w, -h}}
	s.ring(ink, 1, 4, func(k int) (float64, float64) { return c.Corner(corners[k][0], corners[k][1]) })
}

func (s *sketch) outline(c finding.Camera) { s.box(c, kit.Dim) }

// slit draws the slit at its position angle.
func (s *sketch) slit(i *instrument.Instrument, mode *instrument.Mode, q *targets.Request, parallactic float64) {
	pa, how := parallactic, "parallactic angle now"
	if q != nil {
		if v, err := strconv.ParseFloat(q.PositionAngle, 64); err == nil && !math.IsNaN(v) && !math.IsInf(v, 0) {
			pa, how = v, "as requested"
		}
	}
	wide := 1.0
	switch {
	case q != nil && q.SlitArcsec.Known && q.SlitArcsec.Value > 0:
		wide = q.SlitArcsec.Value
	case mode != nil && len(mode.SlitArcsec) > 0:
		wide = mode.SlitArcsec[0]
	}
	s.box(finding.Camera{RotationDeg: pa, WidthArcsec: wide, HighArcsec: i.SlitLengthArcsec}, kit.Curve)
	pa = math.Mod(math.Mod(pa, 180)+180, 180)
	s.say(ofInstrument, kit.Text, fmt.Sprintf("slit %.1f x %.0f arcsec at %.0f deg, %s", wide, i.SlitLengthArcsec, pa, how))
}

// nebula draws the listed ellipse, the aim and the place for the sky.
func (s *sketch) nebula(t *targets.Target, q *targets.Request, at astro.Instant) {
	d := t.Nebula.DiamArcsec
	if !d.Known || !(d.Value > 0) || math.IsInf(d.Value, 0) {
		return
	}
	minor := d.Value
	if m := t.Nebula.Diam2Arcsec; m.Known && m.Value > 0 && m.Value <= d.Value {
		minor = m.Value
	}
	pa := astro.Deg(0)
	if p := t.Nebula.PADeg; p.Known && !math.IsNaN(p.Value) && !math.IsInf(p.Value, 0) {
		pa = astro.Deg(p.Value)
	}
	s.ring(kit.Dim, 2, 72, func(k int) (float64, float64) {
		f := astro.Deg(float64(5 * k))
		along, across := d.Value/2*f.Cos(), minor/2*f.Sin()
		return along*pa.Sin() + across*pa.Cos(), along*pa.Cos() - across*pa.Sin()
	})
	east, north := 0.0, 0.0
	if q != nil && q.AimEArcsec.Known && q.AimNArcsec.Known {
		east, north = q.AimEArcsec.Value, q.AimNArcsec.Value
	}
	aim := finding.AimAt(t, at, east, north)
	if east != 0 || north != 0 {
		x, y := s.dot(east, north)
		s.write(x, y, kit.Curve, "x")
		s.say(ofNebula, kit.Text, fmt.Sprintf("x: aim %.1f east, %.1f north", east, north))
	}
	x, y := s.dot(aim.Sky.EastArcsec, aim.Sky.NorthArcsec)
	s.write(x, y, kit.Dim, "s")
	for _, w := range aim.Words {
		s.say(ofNebula, kit.Dim, "s: "+w)
	}
}

// search draws how far round to look.
func (s *sketch) search(f *finding.Found) {
	if f.SearchArcsec < 2*s.perDot {
		return
	}
	s.ring(kit.Warn, 3, 72, func(k int) (float64, float64) {
		a := astro.Deg(float64(5 * k))
		return f.SearchArcsec * a.Sin(), f.SearchArcsec * a.Cos()
	})
}

func (s *sketch) say(rank int, role kit.Role, text string) {
	s.notes = append(s.notes, note{role, text, rank})
}

func (s *sketch) instrument(i *instrument.Instrument, slit bool) {
	turned := fmt.Sprintf("up is at %.0f deg", s.camera.RotationDeg)
	if s.camera.RotationDeg == 0 {
		turned = "north up"
	}
	if s.camera.Flip {
		turned += ", mirrored"
	}
	switch {
	case i == nil:
		s.say(ofInstrument, kit.Dim, fmt.Sprintf("no instrument is set: %.0f arcmin, %s", s.camera.WidthArcsec/60, turned))
	case slit:
		s.say(ofInstrument, kit.Text, i.Name+", "+turned)
	default:
		s.say(ofInstrument, kit.Text, fmt.Sprintf("%s %.1f x %.1f arcmin, %s", i.Name, s.camera.WidthArcsec/60, s.camera.HighArcsec/60, turned))
	}
}
