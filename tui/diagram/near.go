package diagram

import (
	"math"

	"evenfall/tui/kit"
)

// widthToHeight is how wide the diagram is for its height on most terminals;
// distances are taken as the eye takes them, whatever the size.
const widthToHeight = 2.2

// near finds the star that stands nearest on one side of a point.
//
// Given:
//   - from: the selected star's place in the order of the spots; -1: none,
//     anyone will do.
//   - x, y: where it stands, or the middle of the window.
//   - dir: which side.
//
// Returns:
//   - the place of the star found; -1: there is none that way.
//
// Notes:
//  1. First those within 45 degrees of the direction are looked at, then all
//     on that side. Of stars in the very same place those later in the order
//     are to the right and below.
func near(a *axes, w window, spots []spot, from int, x, y float64, dir kit.Action) int {
	best, least := -1, math.Inf(1)
	fx, fy := w.frac(x, y)
	back := dir == kit.NearLeft || dir == kit.NearUp
	for i := range spots {
		px, py, ok := a.place(&spots[i].v.Place)
		if !ok || i == from {
			continue
		}
		gx, gy := w.frac(px.Mid, py.Mid)
		along, across := turned((gx-fx)*widthToHeight, gy-fy, dir)
		if from < 0 {
			along, across = math.Hypot(along, across), 0
		}
		if along == 0 && across == 0 && from >= 0 {
			if (i < from) != back {
				continue
			}
			// the next of those in one place, before all others
			along = 1e-12 * (1 + math.Abs(float64(i-from)))
		}
		if along <= 0 && from >= 0 {
			continue
		}
		cost := math.Hypot(along, 2*across)
		if across > along { // out of the cone: only where nothing is in it
			cost += 1e3
		}
		if cost < least || cost == least && back { // so that all in one place are come by
			best, least = i, cost
		}
	}
	return best
}

// turned returns how far along a direction a step leads and how far aside.
func turned(dx, dy float64, dir kit.Action) (along, across float64) {
	switch dir {
	case kit.NearLeft:
		return -dx, math.Abs(dy)
	case kit.NearRight:
		return dx, math.Abs(dy)
	case kit.NearUp:
		return -dy, math.Abs(dx)
	}
	return dy, math.Abs(dx)
}
