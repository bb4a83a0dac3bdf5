package diagram

import (
	"slices"

	"evenfall/targets"
	"evenfall/targets/stage"
	"evenfall/tui/kit"
)

// picKey is what a picture was drawn for.
type picKey struct {
	placed     *placed
	axes       int
	win        window
	cols, rows int
	look       *kit.Look
	track      track
	marks      uintptr // which map of marks; the picture keeps the map
}

// picture is the plot without the selected star: lines, track, letters. It is
// drawn in the background and does not change.
type picture struct {
	key    picKey
	marks  map[int]bool
	raster *kit.Raster
	taken  []bool   // cells that are letters or track
	count  []uint16 // stars by cell
	x, y   []tick
	beyond int // stars outside the window
	curves []stage.Curve
	life   string // the name of the line that is the track; "": none
	source string
}

// draw makes a picture. Curves that were fetched for the same life are used
// again.
func draw(key picKey, marks map[int]bool, lives kit.Lives, before *picture) *picture {
	a := &pairs[key.axes]
	p := &picture{key: key, marks: marks}
	if before != nil && before.key.placed.roster == key.placed.roster && before.key.track.wanted() == key.track.wanted() && before.key.track.feh == key.track.feh {
		p.curves = before.curves
	} else {
		p.curves = lives.Curves(key.placed.roster, key.track.wanted(), key.track.dex())
	}
	b := newBoard(a, key.win, key.cols, key.rows, key.look.Glyphs)
	chosen := key.track.pick(p.curves)
	b.lines(p.curves, chosen)
	var steps []step
	if chosen >= 0 {
		c := &p.curves[chosen]
		p.life, p.source = lifeName(c), c.Source
		steps = b.trail(c.Points)
	}
	p.count = make([]uint16, key.cols*key.rows)
	p.beyond = b.stars(key.placed.spots, marks, p.count)
	b.titles()
	if chosen >= 0 {
		b.phases(&p.curves[chosen], steps, p.life)
	}
	b.names(p.curves, chosen)
	p.x = ticks(a.xScale, key.win.left, key.win.right, key.cols, func(s string) int { return len(s) + 2 })
	p.y = ticks(a.yScale, key.win.top, key.win.bottom, key.rows, func(string) int { return 2 })
	p.raster, p.taken = b.canvas.Raster(key.look), b.taken
	return p
}

// lifeName says whose line it is.
func lifeName(c *stage.Curve) string {
	if c.Sort == stage.Cooling {
		return "cooling, " + c.Name
	}
	return "life of " + c.Name
}

// roomForLives tells whether the lives of other stars have room: as sparse as
// their dots are, without fine ones they are dust on a small screen.
func (b *board) roomForLives() bool { return b.rows >= 44 || b.rows >= 26 && b.glyphs == kit.Braille }

// strokes is every how many dots a line has one, with dots as fine as braille
// and without.
var strokes = map[stage.Sort][2]int{stage.ZeroAge: {2, 1}, stage.Life: {5, 6}, stage.Cooling: {3, 1}, stage.Strip: {4, 2}, stage.ClumpBox: {1, 1}}

// lines draws all lines but the track.
func (b *board) lines(curves []stage.Curve, but int) {
	rough := 1
	if b.glyphs == kit.Braille {
		rough = 0
	}
	for i := range curves {
		c := &curves[i]
		if i == but || c.Sort == stage.Life && !b.roomForLives() {
			continue
		}
		ink := kit.Dim
		if c.Sort == stage.Life {
			ink = kit.Dark
		}
		b.line(c.Points, max(strokes[c.Sort][rough], 1), ink)
	}
}

// sign is a star's letter in a cell.
type sign struct {
	cell   int32
	letter byte
	marked bool
}

// stars draws the letters; it counts stars by cell and those outside.
func (b *board) stars(spots []spot, marks map[int]bool, count []uint16) (beyond int) {
	list := make([]sign, 0, len(spots))
	for i := range spots {
		x, y, ok := b.axes.place(&spots[i].v.Place)
		if !ok {
			continue
		}
		col, row, in := b.win.cell(x.Mid, y.Mid, b.cols, b.rows)
		if !in {
			beyond++
			continue
		}
		cell := row*b.cols + col
		count[cell]++
		list = append(list, sign{int32(cell), spots[i].sign, marks[int(spots[i].row)]})
	}
	slices.SortFunc(list, func(a, b sign) int {
		if a.cell != b.cell {
			return int(a.cell - b.cell)
		}
		return int(a.letter) - int(b.letter)
	})
	covered := b.covered(list)
	for i := 0; i < len(list); {
		j, top, most, run, marked := i, byte(0), 0, 0, false
		for ; j < len(list) && list[j].cell == list[i].cell; j++ {
			if j > i && list[j].letter == list[j-1].letter {
				run++
			} else {
				run = 1
			}
			if run > most {
				most, top = run, list[j].letter
			}
			marked = marked || list[j].marked
		}
		b.letter(int(list[i].cell), top, j-i, marked, covered)
		i = j
	}
	return beyond
}

// letter draws what stands in one cell. In a crowd the track goes over the
// letters, so that it can still be followed.
func (b *board) letter(cell int, letter byte, n int, marked, crowd bool) {
	if n > 1 {
		letter = kit.Several(letter)
	}
	ink, onTrack := kit.Text, b.taken[cell]
	switch {
	case marked:
		letter, ink = '*', kit.Mark
	case onTrack && crowd:
		return
	case onTrack:
		ink = kit.Curve
	}
	b.canvas.Text(cell%b.cols, cell/b.cols, ink, string(letter))
	b.taken[cell] = true
}

// covered tells whether letters hide more than a third of the track.
func (b *board) covered(list []sign) bool {
	track, under := 0, 0
	for _, t := range b.taken {
		if t {
			track++
		}
	}
	for i := range list {
		if b.taken[list[i].cell] && (i == 0 || list[i].cell != list[i-1].cell) {
			under++
		}
	}
	return 3*under > track
}

// titles names the axes where they end: in the corners that stars leave free.
func (b *board) titles() {
	if b.cols < 40 || b.rows < 6 {
		return
	}
	b.write(1, 0, kit.Dim, b.axes.yTitle)
	b.write(b.cols-len(b.axes.xTitle)-1, b.rows-1, kit.Dim, b.axes.xTitle)
}

// phases writes along the track where each stage begins, its marks, and at its
// end whose life it is.
func (b *board) phases(c *stage.Curve, steps []step, name string) {
	if len(steps) == 0 {
		return
	}
	last := &steps[len(steps)-1]
	if b.cols < 40 || !b.beside(last.col, last.row, kit.Curve, name) && !b.beside(steps[0].col, steps[0].row, kit.Curve, name) {
		middle := &steps[len(steps)/2]
		b.beside(middle.col, middle.row, kit.Curve, name)
	}
	now := targets.Stage("")
	for i := range steps {
		if s := c.Points[steps[i].point].Stage; s != now {
			now = s
			if s != "" {
				// in the middle of what is drawn of it, where the eye looks for it
				j := i
				for j+1 < len(steps) && c.Points[steps[j+1].point].Stage == s {
					j++
				}
				k := min(i+2, (i+j)/2)
				b.beside(steps[k].col, steps[k].row, kit.Curve, string(s))
			}
		}
	}
	b.marks(c.Points, kit.Curve)
}

// marks writes what stands beside points.
func (b *board) marks(points []stage.Point, ink kit.Role) {
	for i := range points {
		if m := points[i].Mark; m != "" {
			x, y := b.axes.point(&points[i])
			if col, row, in := b.win.cell(x, y, b.cols, b.rows); in {
				b.beside(col, row, ink, m)
			}
		}
	}
}

// names writes the names of lines at their ends, and the marks along them.
func (b *board) names(curves []stage.Curve, but int) {
	if b.cols < 40 {
		return
	}
	said := map[string]bool{} // two edges of a strip share a name
	for _, want := range []stage.Sort{stage.ZeroAge, stage.ClumpBox, stage.Cooling, stage.Strip, stage.Life} {
		for i := range curves {
			c := &curves[i]
			if i == but || c.Sort != want || c.Sort == stage.Life && !b.roomForLives() {
				continue
			}
			key := string(rune('0'+int(c.Sort))) + c.Name
			if c.Name != "" && !said[key] && b.name(c) {
				said[key] = true
			}
			if c.Sort != stage.Life {
				b.marks(c.Points, kit.Dim)
			}
		}
	}
}

// name writes a line's name at its end, else at its beginning.
func (b *board) name(c *stage.Curve) bool {
	var first, last [2]int
	seen := false
	b.walk(c.Points, func(x, y, _ int, _ bool) {
		last = [2]int{x / 2, y / 4}
		if !seen {
			first, seen = last, true
		}
	})
	ends := [2][2]int{last, first}
	if c.Sort == stage.Strip || c.Sort == stage.ZeroAge { // strips are open above, and there it is less crowded
		ends = [2][2]int{first, last}
		if first[1] > last[1] {
			ends = [2][2]int{last, first}
		}
	}
	if c.Sort == stage.Life { // all lives end among the white dwarfs
		ends = [2][2]int{first, first}
	}
	return seen && (b.beside(ends[0][0], ends[0][1], kit.Dim, c.Name) || b.beside(ends[1][0], ends[1][1], kit.Dim, c.Name))
}
