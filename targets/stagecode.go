package targets

// Stage is a stage of a star's life, as a code of the JSON contract.
type Stage string

// The stage codes. RSG is a massive supergiant, not a low-mass star; ACC a
// white dwarf that accretes from a companion.
const (
	MS    Stage = "MS"
	SG    Stage = "SG"
	RGB   Stage = "RGB"
	RC    Stage = "RC"
	HB    Stage = "HB"
	EAGB  Stage = "EAGB"
	TPAGB Stage = "TPAGB"
	PAGB  Stage = "PAGB"
	Neb   Stage = "PN"
	CSPN  Stage = "CSPN"
	SDB   Stage = "SDB"
	Dwarf Stage = "WD"
	RSG   Stage = "RSG"
	ACC   Stage = "ACC"
)

// Stages lists every stage code in order of evolution.
var Stages = [...]Stage{MS, SG, RGB, RC, HB, EAGB, TPAGB, PAGB, Neb, CSPN, SDB, Dwarf, RSG, ACC}

// Answers that are not one stage.
const (
	Merged    = "RGB|EAGB"  // the two together reach the threshold
	Undecided = "UNDECIDED" // nothing does
)
