package stage

import (
	"evenfall/astro"
	"evenfall/targets"
)

// Level is the probability of intervals of derived quantities.
const Level = 0.68

// Placing is where a target stands on the Hertzsprung-Russell diagram. What is
// not known is not OK; the zero value knows nothing.
type Placing struct {
	HROK   bool           // LogT and LogL are known
	LogT   astro.Interval // log10 of the effective temperature, K
	LogL   astro.Interval // log10 of the luminosity, Lsun
	CMDOK  bool           // Colour and AbsG are known
	Colour astro.Interval // BP-RP without reddening, mag
	AbsG   astro.Interval // absolute G magnitude without extinction
	Why    string         // why not, where something is not known
}

// Curve is a line of the diagram: stars of zero age, a star's way through its
// life, a dwarf's cooling, the edge of a strip of instability.
type Curve struct {
	Sort   Sort
	Name   string // e.g. "1.2 Msun", "0.6 Msun"
	Points []Point
	Source string
}

// Sort says what a curve is.
type Sort int

// The sorts of curves.
const (
	ZeroAge  Sort = iota // zero-age main sequence
	Life                 // one star from its main sequence to the white dwarf
	Cooling              // a white dwarf of one mass as it cools
	Strip                // one edge of a strip of instability
	ClumpBox             // outline of the red clump
)

// Point is one point of a curve. NaN: not known there.
type Point struct {
	LogT, LogL   float64
	Colour, AbsG float64 // BP-RP and M_G
	AgeYr        float64 // since birth on a life, since the start of cooling on a cooling line
	MassMsun     float64
	Stage        targets.Stage // "" on lines that are no life
	Mark         string        // what to write beside the point, e.g. "1 Gyr"; mostly ""
}

// Quantity is one physical quantity of a target, with its interval.
type Quantity struct {
	Key    string  // as in JSON, with its unit: "teff_k"
	Words  string  // for people: "temperature"
	Unit   string  // "K"; "" for none
	Value  float64 // median
	Lo, Hi float64 // bounds of the interval at Level; NaN where not known
	Method string
	Source string
}
