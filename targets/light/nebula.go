package light

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/cite"
	"evenfall/targets"
)

// The lines that nebulae are given in.
const (
	LineO3 targets.Band = "O3"
	LineHb targets.Band = "Hb"
	LineHa targets.Band = "Ha"
)

// fluxErrDex is one sigma of a line flux whose error is not listed.
const fluxErrDex = 0.1

// largeArcsec is the diameter from which fluxes of a nebula differ by a tenth
// of a dex with the aperture, whatever error is quoted. A choice.
const largeArcsec = 60.0

// lineZero turns a flux into a magnitude: m = -2.5 log F - 13.74, F in
// erg/s/cm2.
//
// Source: [cite.Jacoby1989], for 5007; used for every line here.
const lineZero = -13.74

// LineMag returns the magnitude of a line flux.
//
//	m = -2.5 log10 F - 13.74     F in erg/s/cm2
//
// Source: [cite.Jacoby1989].
//
// Checked: TestNebula: log F = -10 gives 11.26.
func LineMag(logF float64) astro.Mag { return astro.Mags(-2.5*logF + lineZero) }

// nebula is an extended object that shines in lines.
type nebula struct{ t targets.Target }

func newNebula(t targets.Target) model { return &nebula{t} }

func (n *nebula) flux(b targets.Band) targets.Measure {
	switch b {
	case LineHa:
		return n.t.Nebula.LogFHa
	case LineHb:
		return n.t.Nebula.LogFHb
	case LineO3:
		return n.t.Nebula.LogF5007
	}
	return targets.Measure{}
}

func (n *nebula) tick() float64 { return forever }

func (n *nebula) judge(k int) []verdict {
	out := make([]verdict, k)
	for i := range out {
		out[i].why = "nebulae are forecast from their line fluxes"
	}
	return out
}

func (n *nebula) at(q query) Forecast {
	line := q.band
	if line != LineHa && line != LineHb && line != LineO3 {
		line = ""
		for _, b := range []targets.Band{LineO3, LineHb, LineHa} {
			if usable(n.flux(b)) {
				line = b
				break
			}
		}
	}
	f := n.flux(line)
	if !usable(f) {
		why := "no line flux listed"
		if v := n.t.Nebula.CspnV; usable(v) {
			why += fmt.Sprintf("; central star V = %.2f", v.Value)
		}
		return unknown(line, why)
	}
	err, said := f.Err, "listed"
	if !(err > 0) {
		err, said = fluxErrDex, "assumed"
	}
	if d := n.t.Nebula.DiamArcsec; said == "listed" && usable(d) && d.Value >= largeArcsec {
		err, said = math.Hypot(err, fluxErrDex), fmt.Sprintf("with %.1f dex for its size", fluxErrDex)
	}
	out := Forecast{Band: line, Basis: fmt.Sprintf("line flux 10^%.2f erg/s/cm2, error %.2g dex %s; constant", f.Value, err, said)}
	m := LineMag(f.Value).Mags()
	out.fill(mixture{{1, m, 2.5 * err}}, q.level)
	out.Steps = []Step{{"line magnitude", "-2.5 log F - 13.74", fmt.Sprintf("log F(%s) = %.2f", line, f.Value),
		fmt.Sprintf("%.2f", m), cite.Jacoby1989.String()}}
	if v := n.t.Nebula.CspnV; usable(v) {
		out.Steps = append(out.Steps, Step{"central star", "as listed; a tenth to a fifth are close binaries and vary",
			"the list", fmt.Sprintf("V = %.2f", v.Value), fromMemory})
	}
	n.surface(&out)
	return out
}

// surface adds the surface brightness where the size is listed.
//
//	m + 2.5 log10(pi/4 a b)     a, b: full axes, arcsec
func (n *nebula) surface(f *Forecast) {
	a, b := n.t.Nebula.DiamArcsec, n.t.Nebula.Diam2Arcsec
	if !usable(a) || a.Value <= 0 {
		f.Basis += "; no diameter listed, so no surface brightness"
		return
	}
	minor := a.Value
	if usable(b) && b.Value > 0 {
		minor = b.Value
	}
	area := math.Pi / 4 * a.Value * minor
	d := 2.5 * math.Log10(area)
	f.SB = &Surface{astro.MagArcsec2(f.Mag.Mags() + d), astro.MagArcsec2(f.Lo.Mags() + d), astro.MagArcsec2(f.Hi.Mags() + d)}
	f.Steps = append(f.Steps, Step{"surface brightness in the line", "m + 2.5 log(pi/4 a b), a and b the full axes",
		fmt.Sprintf("a %.1f, b %.1f arcsec", a.Value, minor), fmt.Sprintf("%.2f mag per square arcsec", f.SB.Value.MagArcsec2()),
		"common practice, no source"})
}
