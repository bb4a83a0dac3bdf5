package bands

// Reason says why there is no magnitude.
type Reason string

// The reasons.
const (
	UnknownBand  Reason = "unknown_band"  // the band asked for is none of All
	NoMagnitude  Reason = "no_magnitude"  // nothing usable is known
	NoRelation   Reason = "no_relation"   // no published relation leads to the band from what is known
	OutsideRange Reason = "outside_range" // the relation does not reach the star's colour or type
	GiantsOnly   Reason = "giants_only"   // the relation holds for giants, and the star is not known to be one
	NeedsModel   Reason = "needs_model"   // white dwarf: model colours are wanted
	Emission     Reason = "emission"      // emission lines spoil every relation
	BadType      Reason = "bad_type"      // the spectral type cannot be read
)

// Refusal is the error with which this package gives no magnitude. Two are
// the same to errors.Is when their reasons are, whatever the words.
type Refusal struct {
	Reason Reason
	Want   Band
	Words  string // one line, for the user
}

// Error returns the words.
func (r *Refusal) Error() string { return r.Words }

// Is tells whether the other error is a refusal for the same reason.
func (r *Refusal) Is(other error) bool {
	o, ok := other.(*Refusal)
	return ok && o.Reason == r.Reason
}
