package diagram

import (
	"math"
	"strconv"
)

// scale is how an axis is divided.
type scale int

const (
	evenScale scale = iota
	logScale        // coordinates are log10 of what is written
)

// tick is a place on an axis with what is written there.
type tick struct {
	at    float64 // in the coordinate of the axis
	label string
}

// division is one way to divide an axis: equal steps, or mantissas in every
// so many decades.
type division struct {
	step      float64   // of the value; on a log axis of the mantissa
	mantissas []float64 // log axes only
	decades   int
}

var (
	evenDivisions = []division{{step: 0.01}, {step: 0.02}, {step: 0.05}, {step: 0.1}, {step: 0.2}, {step: 0.5}, {step: 1}, {step: 2}, {step: 5}, {step: 10}}
	logDivisions  = []division{
		{step: 0.01, decades: 1}, {step: 0.02, decades: 1}, {step: 0.05, decades: 1}, {step: 0.1, decades: 1}, {step: 0.2, decades: 1}, {step: 0.5, decades: 1},
		{mantissas: []float64{1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8}, decades: 1}, {mantissas: []float64{1, 1.5, 2, 3, 5, 7}, decades: 1},
		{mantissas: []float64{1, 2, 3, 5, 7}, decades: 1}, {mantissas: []float64{1, 2, 5}, decades: 1}, {mantissas: []float64{1, 3}, decades: 1},
		{mantissas: []float64{1}, decades: 1}, {mantissas: []float64{1}, decades: 2}, {mantissas: []float64{1}, decades: 4},
	}
)

// ticks divides an axis as finely as its labels have room.
//
// Given:
//   - from, to: what stands at its ends.
//   - cells: its length.
//   - room: cells that a label takes, by its length, the gap to the next one
//     included.
func ticks(s scale, from, to float64, cells int, room func(label string) int) []tick {
	list := evenDivisions
	if s == logScale {
		list = logDivisions
	}
	var out []tick
	for _, d := range list {
		marks, ok := d.marks(s, math.Min(from, to), math.Max(from, to), cells)
		if !ok {
			continue
		}
		out = marks
		if fits(out, from, to, cells, room) {
			break
		}
	}
	if from > to {
		for i, j := 0, len(out)-1; i < j; i, j = i+1, j-1 {
			out[i], out[j] = out[j], out[i]
		}
	}
	return out
}

// fits tells whether no label runs into the next.
func fits(list []tick, from, to float64, cells int, room func(string) int) bool {
	for i := 1; i < len(list); i++ {
		apart := math.Abs(list[i].at-list[i-1].at) / math.Abs(to-from) * float64(cells)
		if apart < float64(room(list[i].label)+room(list[i-1].label))/2 {
			return false
		}
	}
	return len(list) <= cells
}

// marks lists the ticks of a division, rising; false: far too many.
func (d *division) marks(s scale, lo, hi float64, cells int) ([]tick, bool) {
	if !(hi-lo > 0) || hi-lo > 1e3 {
		return nil, false
	}
	if s == evenScale {
		if (hi-lo)/d.step > float64(cells) {
			return nil, false
		}
		var out []tick
		for k := math.Ceil(lo / d.step); k*d.step <= hi; k++ {
			v := k*d.step + 0 // no minus zero
			out = append(out, tick{v, strconv.FormatFloat(math.Round(v*1e6)/1e6+0, 'f', -1, 64)})
		}
		return out, true
	}
	mantissas := d.mantissas
	if d.step > 0 {
		if (hi-lo)*9/d.step > 40*float64(cells) {
			return nil, false
		}
		for k := range int(math.Round(9 / d.step)) {
			mantissas = append(mantissas, 1+float64(k)*d.step)
		}
	}
	var out []tick
	for e := int(math.Floor(lo)); e <= int(math.Floor(hi)); e++ {
		if e%d.decades != 0 {
			continue
		}
		for _, m := range mantissas {
			if at := float64(e) + math.Log10(m); at >= lo && at <= hi {
				out = append(out, tick{at, powerLabel(m, e)})
			}
		}
	}
	return out, true
}

// powerLabel writes m times 10^e, short.
func powerLabel(m float64, e int) string {
	m = math.Round(m*100) / 100
	if e >= 6 || e < -3 {
		return strconv.FormatFloat(m, 'f', -1, 64) + "e" + strconv.Itoa(e)
	}
	v := m * math.Pow10(e)
	return strconv.FormatFloat(v, 'f', max(decimals(m)-e, 0), 64)
}

// decimals is how many places a mantissa has behind the point.
func decimals(m float64) int {
	for n, f := 0, 1.0; n < 2; n, f = n+1, f*10 {
		if math.Abs(m*f-math.Round(m*f)) < 1e-6 {
			return n
		}
	}
	return 2
}
