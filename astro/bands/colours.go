package bands

import (
	"fmt"
	"math"
	"strings"

	"evenfall/astro/numeric"
)

// oneColour returns the one BP - RP that all relations of a star are taken at:
// that of least error, or where it and another differ by more than their errors
// together the weighted mean.
//
//	c = sum(c_i/e_i^2)/W;  e^2 = 1/W + sum((c_i - c)^2/e_i^2)/W;  W = sum(1/e_i^2)
//
// Source: that the disagreement counts whole: a choice.
//
// Checked: TestOneColour.
func oneColour(list []colour) (colour, bool) {
	if len(list) == 0 {
		return colour{}, false
	}
	best := list[0]
	for _, c := range list {
		if c.err < best.err {
			best = c
		}
	}
	weights, mean, differ := 0.0, 0.0, false
	for _, c := range list {
		w := 1 / math.Max(c.err*c.err, 1e-6)
		weights += w
		mean += w * c.c
		differ = differ || math.Abs(c.c-best.c) > math.Hypot(c.err, best.err)
	}
	if !differ {
		return best, true
	}
	mean /= weights
	variance := 1 / weights
	out := colour{c: mean}
	var ways []string
	for _, c := range list {
		variance += (c.c - mean) * (c.c - mean) / math.Max(c.err*c.err, 1e-6) / weights
		ways = append(ways, fmt.Sprintf("%.2f", c.c))
		out.source = joined(out.source, c.source)
		out.byType = out.byType || c.byType
	}
	out.err = math.Sqrt(variance)
	out.how = fmt.Sprintf("BP-RP %.2f +- %.2f where ways disagree (%s)", mean, out.err, strings.Join(ways, ", "))
	return out, true
}

// colours lists what BP - RP may be, by up to three ways.
func (k *carrier) colours() []colour {
	var out []colour
	bp, okBP := k.known[BP]
	rp, okRP := k.known[RP]
	if okBP && okRP {
		c := bp.Mag - rp.Mag
		eb, _ := errOf(bp)
		er, _ := errOf(rp)
		return []colour{{c, math.Hypot(eb, er), fmt.Sprintf("BP-RP %.2f", c), "", false}}
	}
	if k.lum == WhiteDwarf {
		return nil
	}
	v, okV := k.known[V]
	i, okI := k.known[I]
	if x := v.Mag - i.Mag; okV && okI && x >= colorFromVI.lo && x <= colorFromVI.hi {
		ev, _ := errOf(v)
		ei, _ := errOf(i)
		c, slope := colorFromVI.at(x)
		out = append(out, colour{c, math.Hypot(colorFromVI.scatter, slope*math.Hypot(ev, ei)), fmt.Sprintf("BP-RP %.2f from V-I %.2f", c, x), gaiaSource, false})
		off, gs := gFromVI.at(x)
		k.edges = append(k.edges, edge{V, G, off, gFromVI.scatter*gFromVI.scatter + gs*gs*(ev*ev+ei*ei),
			func() string { return fmt.Sprintf("G-V from V-I %.2f (scatter %.3f mag)", x, gFromVI.scatter) }, gaiaSource, "", false})
	}
	if c, ok := k.pair(); ok {
		out = append(out, c)
	}
	if c, ok := k.meanColour(); ok && k.typed {
		out = append(out, c)
	}
	return out
}

// meanColour returns BP - RP of giants of the type: as averaged, or from their
// mean V - I where no average is known.
func (k *carrier) meanColour() (colour, bool) {
	if c, sd, ok := typeColors[2].of(k.t, k.av()); ok {
		return colour{c, sd, fmt.Sprintf("BP-RP %.2f of giants of type %s", c, k.t), typeColors[2].source.String(), true}, true
	}
	v, sd, ok := typeColors[1].of(k.t, k.av())
	if !ok || v < colorFromVI.lo || v > colorFromVI.hi {
		return colour{}, false
	}
	c, slope := colorFromVI.at(v)
	return colour{c, math.Hypot(colorFromVI.scatter, slope*sd), fmt.Sprintf("BP-RP %.2f from V-I %.2f of giants of type %s", c, v, k.t),
		joined(gaiaSource, typeColors[1].source.String()), true}, true
}

// pair returns the best BP - RP that two known bands give.
func (k *carrier) pair() (best colour, ok bool) {
	best.err = math.Inf(1)
	for n, x := range All {
		for _, y := range All[n+1:] {
			mx, okX := k.known[x]
			my, okY := k.known[y]
			rx, hasX := relations[x]
			ry, hasY := relations[y]
			if !okX || !okY || !hasX || !hasY || !monotone[[2]Band{x, y}] {
				continue
			}
			c, slope, found := solve(&rx, &ry, mx.Mag-my.Mag)
			if !found || rx.holds(x, c, k.lum) != nil || ry.holds(y, c, k.lum) != nil {
				continue
			}
			ex, _ := errOf(mx)
			ey, _ := errOf(my)
			err := math.Sqrt(ex*ex+ey*ey+rx.scatter*rx.scatter+ry.scatter*ry.scatter) / math.Abs(slope)
			if err < best.err {
				best = colour{c, err, fmt.Sprintf("BP-RP %.2f from %s-%s %.2f", c, x, y, mx.Mag-my.Mag), gaiaSource, false}
				ok = true
			}
		}
	}
	return best, ok && best.err < worstColour
}

// worstColour is the error of BP - RP above which a colour is none; leastSlope
// how much a pair's colour must change with BP - RP to tell it.
const worstColour, leastSlope = 0.5, 0.1

// monotone are the pairs of bands whose distance changes with BP - RP in one
// sense all over their common range.
var monotone = func() map[[2]Band]bool {
	out := map[[2]Band]bool{}
	for x, rx := range relations {
		for y, ry := range relations {
			lo, hi := math.Max(rx.lo, ry.lo), math.Min(rx.hi, ry.hi)
			sign, one := 0.0, x != y
			for i := range 41 {
				c := lo + (hi-lo)*float64(i)/40
				_, a := rx.at(c)
				_, b := ry.at(c)
				if i == 0 {
					sign = math.Copysign(1, b-a)
				}
				one = one && (b-a)*sign >= leastSlope
			}
			out[[2]Band{x, y}] = one
		}
	}
	return out
}()

// solve returns the BP - RP at which two bands are as far apart as measured,
// and the change of the distance with it.
func solve(rx, ry *relation, diff float64) (c, slope float64, ok bool) {
	lo, hi := math.Max(rx.lo, ry.lo), math.Min(rx.hi, ry.hi)
	c, err := numeric.Root(func(c float64) float64 { // X - Y
		a, _ := rx.at(c)
		b, _ := ry.at(c)
		return b - a - diff
	}, lo, hi, 1e-6)
	if err != nil {
		return 0, 0, false
	}
	_, a := rx.at(c)
	_, b := ry.at(c)
	return c, b - a, true
}

// byColour ties every pair of bands that hold at a colour.
func (k *carrier) byColour(c colour) {
	rw, ok := relations[k.want]
	if ok {
		if no := rw.holds(k.want, c.c, k.lum); no != nil {
			k.refuse(no)
		}
	}
	for _, x := range All {
		rx, okX := relations[x]
		if !okX || rx.holds(x, c.c, k.lum) != nil {
			continue
		}
		for _, y := range All {
			ry, okY := relations[y]
			if x == y || !okY || ry.holds(y, c.c, k.lum) != nil {
				continue
			}
			fx, dx := rx.at(c.c)
			fy, dy := ry.at(c.c)
			s := math.Hypot(rx.scatter, ry.scatter)
			v := s*s + (dx-dy)*(dx-dy)*c.err*c.err
			k.edges = append(k.edges, edge{x, y, fx - fy, v,
				func() string { return fmt.Sprintf("%s-%s %+.2f at %s (scatter %.3f mag)", y, x, fx-fy, c.how, s) },
				gaiaSource, c.source, c.byType})
		}
	}
	if c.err > 0 { // BP and RP from each other
		v := c.err * c.err
		words := func() string { return c.how }
		k.edges = append(k.edges, edge{RP, BP, c.c, v, words, c.source, "", c.byType}, edge{BP, RP, -c.c, v, words, c.source, "", c.byType})
	}
}
