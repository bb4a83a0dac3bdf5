package kit

import "evenfall/targets"

// StageGroup is a sign for stages and the stages that it stands for.
type StageGroup struct {
	Sign  byte // small: one star; its capital: several in the cell, most of them so
	Code  string
	Words string
}

// Stages are in order of evolution. Each has a letter of its own, so that
// nothing hangs on colour.
var Stages = []StageGroup{
	{'m', string(targets.MS), "main sequence"},
	{'s', string(targets.SG), "subgiant"},
	{'g', string(targets.RGB), "red giant branch"},
	{'c', string(targets.RC), "red clump"},
	{'h', string(targets.HB), "horizontal branch"},
	{'e', string(targets.EAGB), "early AGB"},
	{'t', string(targets.TPAGB), "thermally pulsing"},
	{'p', string(targets.PAGB), "past the AGB"},
	{'n', string(targets.Neb), "planetary nebula"},
	{'k', string(targets.CSPN), "its kernel"},
	{'b', string(targets.SDB), "hot subdwarf"},
	{'w', string(targets.Dwarf), "white dwarf"},
	{'r', string(targets.RSG), "massive supergiant"},
	{'a', string(targets.ACC), "accretes"},
	{'?', targets.Undecided, "undecided"},
}

// StageSign returns the letter of a judgement. Giants of which it is open on
// which branch they are go with the first.
func StageSign(best string) byte {
	if best == targets.Merged {
		best = string(targets.RGB)
	}
	for i := range Stages {
		if Stages[i].Code == best {
			return Stages[i].Sign
		}
	}
	return '?'
}

// Several is the sign of more than one star in a cell.
func Several(sign byte) byte {
	if sign >= 'a' && sign <= 'z' {
		return sign - 'a' + 'A'
	}
	return sign
}
