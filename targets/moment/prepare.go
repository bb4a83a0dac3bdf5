// Package moment is the one place where position, air, brightness and stage
// of a target come together. Prepare does once a target what is slow, Tonight
// once a target and night, Of what changes with the minute. Screens, lists,
// plans and the log all ask here, so that two views of one target at one
// instant cannot disagree. It reads no clock and no file.
package moment

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/light"
	"evenfall/targets/stage"
)

// Models is what judging and forecasting draw on; made once, shared by all.
type Models struct {
	Stage  *stage.Models
	States *light.Shelf // states of brightness by content; nil: none are kept
}

// NewModels makes the models, for giants of the field.
func NewModels() Models { return NewModelsFor(targets.PopulationField) }

// NewModelsFor makes the models for a population of giants.
func NewModelsFor(p targets.Population) Models {
	return Models{Stage: stage.NewModelsFor(p), States: light.NewShelf()}
}

// Prepared is a target with everything that does not depend on the night.
type Prepared struct {
	Target  targets.Target
	Star    frame.Star
	Verdict stage.Verdict
	Light   *light.State
	Drift   Drift
	Colours map[targets.Band]float64 // for the shape of its spectrum; nil: nothing is listed
}

// Drift says how uncertain the position is because the motion is not known.
type Drift struct {
	MotionMissing bool
	// PerYear is what stars of this kind move, for a star without a listed
	// motion: the position is uncertain by this times the years since its epoch.
	PerYear astro.Angle
	Why     string
}

// typicalMotionWD is what a white dwarf of the magnitudes usually observed
// moves in a year: the median of the 38 built-in white dwarfs with a listed
// motion, 0.24, rounded up; the fastest move sixteen times as far.
var typicalMotionWD = astro.Arcsec(0.25)

// Prepare does what is slow for one target: the judgement of its stage and the
// state that its brightness is forecast from.
//
// Given:
//   - t: as read; the magnitudes are those of this target.
//
// Notes:
//  1. Under a millisecond; callers keep the answer for as long as the target and
//     its magnitudes are the same. The state of its brightness is found again by
//     its content, with all that was worked out from it.
func Prepare(t targets.Target, mags []targets.Magnitude, m Models) Prepared {
	p := Prepared{Target: t, Star: StarOf(&t), Verdict: m.Stage.Judge(t), Colours: exposure.ColoursOf(&t)}
	if m.States != nil {
		p.Light = m.States.State(t, p.Verdict, mags)
	} else {
		p.Light = light.NewState(t, p.Verdict, mags)
	}
	if !t.MotionKnown() {
		p.Drift.MotionMissing = true
		if t.Kind == targets.WD {
			p.Drift.PerYear = typicalMotionWD
			p.Drift.Why = "no proper motion listed; such white dwarfs move about 0.25 arcsec a year, some far more"
		}
	}
	return p
}

// Study works out what a target is made of, with the models that it was
// prepared with.
func (p *Prepared) Study(m Models) stage.Study { return m.Stage.Study(p.Target, &p.Verdict) }

// StarOf turns a listed place into one that can be computed with.
func StarOf(t *targets.Target) frame.Star {
	return frame.NewStar(frame.Catalogue{
		RA: t.Place.RA, Dec: t.Place.Dec, EpochJyr: t.Place.EpochJyr,
		PMRA:     astro.Arcsec(t.Place.PMRA.Value / 1000),
		PMDec:    astro.Arcsec(t.Place.PMDec.Value / 1000),
		Parallax: astro.Arcsec(t.Place.Plx.Value / 1000),
		RVKms:    t.Place.RV.Value,
	})
}

// Uncertainty returns how far off the position may be at an instant because
// the motion is missing; zero where it is known or nothing can be said.
func (d Drift) Uncertainty(epochJyr float64, at astro.Instant) astro.Angle {
	return d.PerYear.Times(math.Abs(at.YearsTT() - epochJyr))
}

// words says the drift at an instant in one line; "" where there is none.
func (d Drift) words(epochJyr float64, at astro.Instant) string {
	if d.PerYear.Rad() == 0 {
		return ""
	}
	return fmt.Sprintf("position uncertain by about %.0f arcsec tonight: %s",
		d.Uncertainty(epochJyr, at).Arcsec(), d.Why)
}
