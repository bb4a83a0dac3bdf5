package finding

import (
	"fmt"
	"math"
	"slices"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/exposure"
)

// CameraOf returns how a setting's instrument lies on the sky: its square field,
// or that of its pixels.
func CameraOf(s *exposure.Setting) Camera {
	i := s.Instrument
	if i == nil {
		return Camera{}
	}
	c := Camera{RotationDeg: i.RotationDeg, Flip: i.Flip, WidthArcsec: i.FieldArcmin * 60, HighArcsec: i.FieldArcmin * 60}
	if i.Pixels[0] > 0 && i.Pixels[1] > 0 && i.PixelArcsec > 0 {
		c.WidthArcsec, c.HighArcsec = float64(i.Pixels[0])*i.PixelArcsec, float64(i.Pixels[1])*i.PixelArcsec
	}
	return c
}

// Comparison is a star of the same frame.
type Comparison struct {
	Name     string
	Index    int // in the list
	Mag      float64
	From     Offset // from the target
	SNR      float64
	Survives bool // it does not saturate in the target's frames
	Variable bool // its list says so
	Why      string
}

// Comparisons lists the stars of the field that lie on the detector with the
// target, exposed as it is: those that survive first, by their S/N.
//
// Given:
//   - s, a: the target's setting and answer.
//   - t, field, at: the target, its neighbours, the night.
//
// Returns:
//   - stars with S/N below 10 are left out. Nil without an answer.
//
// Checked: TestComparisons.
func Comparisons(s exposure.Setting, a exposure.Answer, t *targets.Target, field []targets.Target, at astro.Instant) []Comparison {
	if a.Err != nil || !(a.EachS > 0) {
		return nil
	}
	const least = 10
	camera, own := CameraOf(&s), Tonight(t, at)
	var out []Comparison
	for i := range field {
		star := &field[i]
		o := Between(own.Dir, Tonight(star, at).Dir)
		if _, _, in := camera.On(o); !in || o.SepArcsec < offsetMin {
			continue
		}
		c := Comparison{Name: star.Name, Index: i, From: o, Variable: star.Var.Type != ""}
		mag, band, ok := magOf(star, s.Mode.Band)
		if !ok {
			continue
		}
		c.Mag = mag
		one := s
		one.Source = exposure.SourceOf(star, band, exposure.Steady(astro.Mags(mag)), exposure.ColoursOf(star))
		one.Source.Companion = nil
		one.Goal = exposure.Goal{ExposureS: a.EachS * float64(a.Frames), Frames: a.Frames, Binning: s.Goal.Binning}
		got := exposure.Solve(one)
		if got.Err != nil {
			c.Why = got.Err.Error()
			continue
		}
		c.SNR = got.SNR
		c.Survives = !got.SaturatesAt.Known || mag >= got.SaturatesAt.Value
		switch {
		case !c.Survives:
			c.Why = fmt.Sprintf("saturates: %s %.1f, frames of %.3g s stand %.1f", band, mag, a.EachS, got.SaturatesAt.Value)
		case c.SNR < least:
			continue
		case c.Variable:
			c.Why = "listed as variable: " + star.Var.Type
		}
		out = append(out, c)
	}
	good := func(c *Comparison) bool { return c.Survives && !c.Variable }
	slices.SortStableFunc(out, func(a, b Comparison) int {
		switch {
		case good(&a) != good(&b):
			if good(&a) {
				return -1
			}
			return 1
		case a.SNR > b.SNR:
			return -1
		case a.SNR < b.SNR:
			return 1
		}
		return 0
	})
	return out
}

// Glare is what a close companion does.
type Glare struct {
	Offset
	Mag    float64
	Times  float64 // how many times brighter than the target, in the band its magnitude is compared in; 0: not known
	Blends bool    // nearer than twice the width of an image
	Words  string
}

// GlareOf returns what a listed companion does; false where none is listed.
//
// Given:
//   - fwhmArcsec: width of an image; 0: 1.5.
//   - band: in which the companion's magnitude is taken to be.
//
// Checked: TestGlare.
func GlareOf(t *targets.Target, fwhmArcsec float64, band targets.Band) (Glare, bool) {
	p := &t.Physics
	if !p.CompMag.Known || !p.CompSepArcsec.Known || !(p.CompSepArcsec.Value >= 0) || math.IsNaN(p.CompMag.Value) {
		return Glare{}, false
	}
	if !(fwhmArcsec > 0) {
		fwhmArcsec = 1.5
	}
	g := Glare{Mag: p.CompMag.Value, Offset: Offset{SepArcsec: p.CompSepArcsec.Value}}
	where := ""
	if p.CompP.Known {
		g.PADeg = turn(p.CompP.Value)
		pa := astro.Deg(g.PADeg)
		g.EastArcsec, g.NorthArcsec = g.SepArcsec*pa.Sin(), g.SepArcsec*pa.Cos()
		where = fmt.Sprintf(", to the %s", Compass(g.PADeg))
	}
	g.Blends = g.SepArcsec < 2*fwhmArcsec
	if m, _, ok := magOf(t, band); ok {
		g.Times = math.Pow(10, 0.4*(m-g.Mag))
	}
	g.Words = fmt.Sprintf("in the glare of a star of %.1f, %.1f arcsec away%s", g.Mag, g.SepArcsec, where)
	if g.Times > 0 && g.Times < 1 {
		g.Words = fmt.Sprintf("a companion of %.1f, %.1f arcsec away%s", g.Mag, g.SepArcsec, where)
	}
	if g.Blends {
		g.Words += ": not apart in this seeing"
	}
	return g, true
}
