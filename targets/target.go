// Package targets holds the words that the rest of the tree speaks: what a
// target is, what is wanted of it, which limits the site sets, what counts as
// evidence, and where in a file something stood. It computes nothing about the
// sky, reads no file and knows no screen.
package targets

import (
	"strings"

	"evenfall/astro"
)

// Kind says what an object broadly is, and so how it is observed by default.
type Kind string

// The kinds of the list format.
const (
	Giant       Kind = "giant"       // red giants and other giants
	LPV         Kind = "lpv"         // Miras and semiregulars
	PostAGB     Kind = "postagb"     // post-AGB stars, with RV Tauri
	PN          Kind = "pn"          // planetary nebulae
	WD          Kind = "wd"          // single white dwarfs
	Interacting Kind = "interacting" // interacting binaries, detached ones with a white dwarf too
	Standard    Kind = "standard"    // standard stars
	Other       Kind = "other"
)

// Kinds lists every kind in the order of the documentation.
var Kinds = []Kind{Giant, LPV, PostAGB, PN, WD, Interacting, Standard, Other}

// Measure is a number that may be missing, with its error where one was given.
// Its unit is that of the field it stands in.
type Measure struct {
	Value   float64
	Err     float64 // one sigma; 0: not given
	Known   bool
	Assumed bool // Err was not given: half a unit of the last printed digit
}

// Known makes a measure without error.
func Known(v float64) Measure { return Measure{Value: v, Known: true} }

// KnownErr makes a measure with a one-sigma error.
func KnownErr(v, err float64) Measure { return Measure{Value: v, Err: err, Known: true} }

// Band names a photometric band as the columns of a list do; case counts in
// i and I, r and R, u and U, g and G. Line bands of nebulae are Ha, Hb, O3.
type Band string

// Bands lists the magnitude columns of a target list.
var Bands = []Band{"G", "BP", "RP", "U", "B", "V", "R", "I", "u", "g", "r", "i", "z", "J", "H", "K", "W1", "W2"}

// Place is where a target is: ICRS at an epoch, and how it moves.
type Place struct {
	RA, Dec    astro.Angle
	EpochJyr   float64 // Julian year of the position; 2000 where EpochGiven is false
	EpochGiven bool
	PMRA       Measure // mas/yr, with cos(dec)
	PMDec      Measure // mas/yr
	Plx        Measure // mas
	PlxFrom    string  // gaia_dr3, gaia_dr2, hipparcos, corrected, other; "": by epoch
	RV         Measure // km/s, barycentric, positive receding
}

// Variability is what the list says of how the light varies.
type Variability struct {
	Type           string // as in the GCVS: M, SRB, EA, ...
	PeriodD        Measure
	PdotDD         Measure // dP/dt, day per day
	EpochMaxJD     Measure // day, Err in days
	EpochMinJD     Measure // day, Err in days
	TimeScale      string  // HJD, HJD_UTC, HJD_TT, BJD_TDB, JD_UTC
	MagMax, MagMin Measure // brightest and faintest
	MagBand        string  // V, B, p (photographic), v (visual), ...
	MagMinIsLimit  bool    // the faintest is only a limit
	RiseFraction   Measure // rise time over period, 0 to 1
	EclipseMin     Measure // duration of eclipse, minutes
	PulsationS     Measure // s
	AmplitudeMag   Measure // magnitudes, full
}

// Nebula is what the list says of an extended object.
type Nebula struct {
	DiamArcsec  Measure // full major axis
	Diam2Arcsec Measure // full minor axis
	PADeg       Measure
	LogFHa      Measure // log10 of observed flux, erg/s/cm2, not dereddened
	LogFHb      Measure
	LogF5007    Measure
	NIIIncluded string // whether the H alpha flux contains [N II]; "" unknown
	CHb         Measure
	VexpKms     Measure
	CspnV       Measure // V magnitude of the central star
}

// Physics is what the list says of the star itself.
type Physics struct {
	SpType               string
	EBV, AV              Measure // true scale, not map scale; mag
	FeH, TeffK, LogG     Measure
	NumaxUHz, DnuUHz     Measure
	DistPc               Measure
	Cluster              string
	CompMag              Measure // close companion: magnitude,
	CompSepArcsec, CompP Measure // separation and position angle in degrees
}

// Field is a column that the program has no use for; it is kept and shown.
type Field struct{ Name, Value string }

// Target is one object as a list gives it. Missing numbers are not Known; no
// value is ever filled in from elsewhere.
type Target struct {
	ID, Name     string
	Kind         Kind
	KindNote     string // text after a colon in the kind column
	KindInferred bool   // the list left the kind empty
	Place        Place
	Mags         map[Band]Measure
	Physics      Physics
	Var          Variability
	Nebula       Nebula
	Notes        string
	Source       string
	Unconfirmed  []string // names of columns whose values no open source confirmed
	Conflicts    string   // columns where an open source disagrees, with both values
	Extra        []Field
	At           Where
}

// IsUnconfirmed tells whether the value in the named column is marked so.
func (t *Target) IsUnconfirmed(column string) bool {
	for _, c := range t.Unconfirmed {
		if c == column {
			return true
		}
	}
	return false
}

// MotionKnown tells whether both components of the proper motion are given.
func (t *Target) MotionKnown() bool { return t.Place.PMRA.Known && t.Place.PMDec.Known }

// Key reduces a name or id to what joining by name compares: case, spaces and
// underscores do not count. Case counts nowhere in names, so "u Her" and
// "U Her" share a key; two candidates are an error for the caller to report.
func Key(name string) string {
	return strings.Map(func(r rune) rune {
		if r == ' ' || r == '_' || r == '\t' {
			return -1
		}
		return r
	}, strings.ToLower(name))
}
