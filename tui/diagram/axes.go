package diagram

import (
	"math"

	"evenfall/astro"
	"evenfall/targets/stage"
)

// window is the part of the diagram that is shown: what stands at each edge.
// An axis may run either way.
type window struct{ left, right, top, bottom float64 }

// frac returns where a point stands, 0 to 1 from the left and from the top
// within the window.
func (w window) frac(x, y float64) (fx, fy float64) {
	return (x - w.left) / (w.right - w.left), (y - w.top) / (w.bottom - w.top)
}

// zoomed returns the window that shows 1/2^times of each axis about a point.
func (w window) zoomed(x, y float64, times int) window {
	f := math.Ldexp(0.5, -times)
	dx, dy := f*(w.right-w.left), f*(w.bottom-w.top)
	return window{x - dx, x + dx, y - dy, y + dy}
}

// margin is how near to an edge of a zoomed window the selected star may
// stand before the window moves after it.
const margin = 0.06

// holds tells whether a point is well inside.
func (w window) holds(x, y float64) bool {
	fx, fy := w.frac(x, y)
	return fx >= margin && fx <= 1-margin && fy >= margin && fy <= 1-margin
}

// mostZoom is how often the diagram may be doubled.
const mostZoom = 6

// axes is one pair of axes.
type axes struct {
	name           string
	xTitle, yTitle string
	all            window // what is always shown
	widest         window // what is shown where stars stand there
	xScale, yScale scale
	place          func(*stage.Placing) (x, y astro.Interval, ok bool)
	point          func(*stage.Point) (x, y float64)
}

// pairs are the two pairs of axes.
var pairs = [2]axes{
	{
		name: "luminosity and temperature", xTitle: "temperature, K", yTitle: "luminosity, Lsun",
		all: window{5.3, 3.35, 5.6, -4.6}, widest: window{6, 2.5, 8, -8}, xScale: logScale, yScale: logScale,
		place: func(p *stage.Placing) (x, y astro.Interval, ok bool) {
			return p.LogT, p.LogL, p.HROK && sound(p.LogT) && sound(p.LogL)
		},
		point: func(p *stage.Point) (x, y float64) { return p.LogT, p.LogL },
	},
	{
		name: "colour and absolute magnitude", xTitle: "BP-RP, mag", yTitle: "M_G, mag",
		all: window{-0.9, 5.1, -7, 16.5}, widest: window{-3, 10, -16, 26}, xScale: evenScale, yScale: evenScale,
		place: func(p *stage.Placing) (x, y astro.Interval, ok bool) {
			return p.Colour, p.AbsG, p.CMDOK && sound(p.Colour) && sound(p.AbsG)
		},
		point: func(p *stage.Point) (x, y float64) { return p.Colour, p.AbsG },
	},
}

// sound tells whether a value can be drawn.
func sound(i astro.Interval) bool { return !math.IsNaN(i.Mid) && math.Abs(i.Mid) < 1e3 }

// around returns the whole diagram, wide enough for all that stand on it, but
// never wider than widest.
func (a *axes) around(list []spot) window {
	w := a.all
	for i := range list {
		x, y, ok := a.place(&list[i].v.Place)
		if !ok {
			continue
		}
		w.left, w.right = stretch(w.left, w.right, a.widest.left, a.widest.right, x.Mid)
		w.top, w.bottom = stretch(w.top, w.bottom, a.widest.top, a.widest.bottom, y.Mid)
	}
	return w
}

// stretch moves the ends of an axis outwards to hold a value, by whole halves
// and no further than the outermost.
func stretch(from, to, outFrom, outTo, v float64) (float64, float64) {
	sign := 1.0
	if to < from {
		sign = -1
	}
	if s := sign * v; s < sign*from+0.05 {
		from = sign * math.Max(math.Floor(2*(s-0.05))/2, sign*outFrom)
	} else if s > sign*to-0.05 {
		to = sign * math.Min(math.Ceil(2*(s+0.05))/2, sign*outTo)
	}
	return from, to
}
