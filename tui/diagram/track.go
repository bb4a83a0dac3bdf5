package diagram

import (
	"math"

	"evenfall/targets"
	"evenfall/targets/stage"
)

// track says whose life is to be drawn: a mass and a metallicity, in steps
// finer than they are known, so that neighbours share a line.
type track struct {
	mass, feh int16
	best      string // the stage that the mass holds for, where it is not the mass at birth
	ok        bool
}

// The steps.
const (
	massStep = 0.04 // dex: 10 per cent
	fehStep  = 0.25 // dex
)

// lost are the stages at which a star has lost much of what it was born with:
// its mass now does not tell its life, a life that ends in such a star does.
var lost = map[string]bool{string(targets.HB): true, string(targets.PAGB): true, string(targets.Neb): true, string(targets.CSPN): true,
	string(targets.SDB): true, string(targets.Dwarf): true}

// trackOf says whose life a judgement asks for.
func trackOf(v *stage.Verdict) track {
	if !(v.MassMsun > 0.01 && v.MassMsun < 1000) || v.Best == string(targets.ACC) {
		return track{}
	}
	t := track{mass: int16(math.Round(math.Log10(v.MassMsun) / massStep)), ok: true}
	if math.Abs(v.FeH) < 10 {
		t.feh = int16(math.Round(v.FeH / fehStep))
	}
	if lost[v.Best] {
		t.best = kernel(v.Best)
	}
	return t
}

// kernel puts a planetary nebula down to the star within.
func kernel(best string) string {
	if best == string(targets.Neb) {
		return string(targets.CSPN)
	}
	return best
}

func (t track) massMsun() float64 { return math.Pow(10, float64(t.mass)*massStep) }
func (t track) dex() float64      { return float64(t.feh) * fehStep }

// wanted is the mass to ask the models for.
func (t track) wanted() float64 {
	if !t.ok || t.best != "" {
		return 0
	}
	return t.massMsun()
}

// offBy is how far, in dex, the mass of a line may be from the one wanted.
const offBy = 0.15

// pick finds the line that is the life of the track; -1: there is none.
func (t track) pick(curves []stage.Curve) int {
	if !t.ok {
		return -1
	}
	best, least := -1, offBy
	for i := range curves {
		c := &curves[i]
		if c.Sort != stage.Life && !(c.Sort == stage.Cooling && t.best == string(targets.Dwarf)) {
			continue
		}
		m := t.massOn(c)
		if !(m > 0) {
			continue
		}
		if off := math.Abs(math.Log10(m / t.massMsun())); off < least {
			best, least = i, off
		}
	}
	return best
}

// massOn is the mass on a line that the track's own is compared with: at
// birth, or at the stage it has come to.
func (t track) massOn(c *stage.Curve) float64 {
	for k := range c.Points {
		p := &c.Points[k]
		if t.best == "" || kernel(string(p.Stage)) == t.best || c.Sort == stage.Cooling {
			return p.MassMsun
		}
	}
	return 0
}
