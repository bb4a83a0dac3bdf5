package stage

import (
	"sync"

	"evenfall/astro/degenerate"
	"evenfall/targets"
	"evenfall/targets/stage/tracks"
)

// Models is what judging draws on. It is made once and shared by all; what
// takes time to make, the grid of tracks and the tables of white dwarfs, is made
// when first asked for.
type Models struct {
	floor      float64
	population targets.Population
	grid       func() *tracks.Grid // of the disc
	oldGrid    func() *tracks.Grid // of thick disc and halo, for metal-poor stars
	dwarfs     func() *degenerate.Models
	solar      func() *tracks.Formulas
	limit      func() float64
	clusters   func() map[string]generation
	number     func() shares // stars of each stage for each one of the clump
}

// Edition names the tracks and tables that judgements rest on, for the version.
const Edition = tracks.Edition

// NewModels makes the models for giants of the field.
func NewModels() *Models { return NewModelsFor(targets.PopulationField) }

// NewModelsFor makes the models for a population; of the three only the share
// of giants of the branch differs.
func NewModelsFor(p targets.Population) *Models {
	m := &Models{floor: 1e-5, population: p, dwarfs: sync.OnceValue(degenerate.NewModels)}
	m.grid = sync.OnceValue(func() *tracks.Grid { return mustGrid(tracks.Disc()) })
	m.oldGrid = sync.OnceValue(func() *tracks.Grid { return mustGrid(tracks.Old()) })
	m.solar = sync.OnceValue(func() *tracks.Formulas { return mustFormulas(solarZ) })
	m.limit = sync.OnceValue(func() float64 { return degenerate.LimitingMass(2) })
	m.clusters = sync.OnceValue(m.generations)
	m.number = sync.OnceValue(m.count)
	return m
}

// solarZ is the metallicity of the tracks' own solar scale.
const solarZ = 0.02

func mustGrid(r tracks.Recipe) *tracks.Grid {
	g, err := tracks.NewGrid(r)
	if err != nil {
		panic("stage: " + err.Error())
	}
	return g
}

func mustFormulas(z float64) *tracks.Formulas {
	f, err := tracks.NewSmoothFormulas(z)
	if err != nil {
		panic("stage: " + err.Error())
	}
	return f
}

// count returns how many stars of each stage there are for each of the clump:
// the grid's numbers, and those of the regions.
func (m *Models) count() shares {
	out := shares{}
	for _, r := range regions {
		out[r.stage] += r.number
	}
	share := m.grid().Shares()
	for code := range fromGrid {
		out[code] += share[code] / share[targets.RC]
	}
	return out
}
