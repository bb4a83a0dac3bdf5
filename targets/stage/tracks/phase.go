package tracks

import "evenfall/targets"

// Phase is a phase of a star's life as the formulas tell them apart.
type Phase uint8

// The phases in order of evolution. Core helium burning is parted by place and
// mass: clump (below the flash mass, cooler than 5500 K), horizontal branch
// (to 20 000 K), hot subdwarf above; second clump (to 3 solar masses), blue
// loop beyond.
const (
	PhaseMS Phase = iota
	PhaseGap
	PhaseRGB
	PhaseClump
	PhaseSecondClump
	PhaseHB
	PhaseSubdwarf
	PhaseBlueLoop
	PhaseEAGB
	PhaseTPAGB
	PhasePostAGB
	PhaseCentral
	PhaseHeMS
	PhaseHeGiant
	PhaseWD
	phases
)

// Limits of the names of core helium burning.
//
// Source: common practice, no source.
const (
	clumpTeffK    = 5500
	branchTeffK   = 20000
	secondMass    = 3 // Msun
	supergiant    = 8 // Msun; more massive giants go by the name of supergiants
	logClumpTeff  = 3.740362689494244
	logBranchTeff = 4.301029995663981
)

// String names the phase in words.
func (p Phase) String() string {
	names := [phases]string{"main sequence", "subgiant", "red giant branch", "red clump", "secondary clump",
		"horizontal branch", "hot subdwarf", "blue loop", "early asymptotic giant branch",
		"thermally pulsing asymptotic giant branch", "post-AGB", "central star of a nebula",
		"helium main sequence", "helium giant", "white dwarf"}
	if p < phases {
		return names[p]
	}
	return "unknown phase"
}

// Stage returns the stage code that a phase goes by.
//
// Given:
//   - initialMass: at birth, solar masses. Above 8 everything between the main
//     sequence and the explosion but the first crossing is RSG.
//
// Notes:
//  1. Secondary clump and blue loop are RC, for want of a code of their own:
//     helium burns in the core. A naked helium star is SDB, on its own giant
//     branch too.
//
// Checked: TestPhases.
func (p Phase) Stage(initialMass float64) targets.Stage {
	if initialMass > supergiant && p >= PhaseRGB && p <= PhaseTPAGB {
		return targets.RSG
	}
	switch p {
	case PhaseMS:
		return targets.MS
	case PhaseGap:
		return targets.SG
	case PhaseRGB:
		return targets.RGB
	case PhaseHB:
		return targets.HB
	case PhaseSubdwarf, PhaseHeMS, PhaseHeGiant:
		return targets.SDB
	case PhaseEAGB:
		return targets.EAGB
	case PhaseTPAGB:
		return targets.TPAGB
	case PhasePostAGB:
		return targets.PAGB
	case PhaseCentral:
		return targets.CSPN
	case PhaseWD:
		return targets.Dwarf
	}
	return targets.RC
}

// main folds the names of core helium burning into one.
func (p Phase) main() Phase {
	if p >= PhaseClump && p <= PhaseBlueLoop {
		return PhaseClump
	}
	return p
}

// heliumPhase names core helium burning.
func (f *Formulas) heliumPhase(clockMass, logT float64) Phase {
	switch {
	case clockMass >= secondMass:
		return PhaseBlueLoop
	case clockMass >= f.mHeF:
		return PhaseSecondClump
	case logT >= logBranchTeff:
		return PhaseSubdwarf
	case logT >= logClumpTeff:
		return PhaseHB
	}
	return PhaseClump
}

// End is how a star's life ends.
type End uint8

// The ends.
const (
	EndHelium    End = iota // helium white dwarf
	EndCarbon               // carbon-oxygen white dwarf
	EndNeon                 // oxygen-neon white dwarf
	EndExplosion            // the core gives way; what is left is not followed
)

// String names the end in words.
func (e End) String() string {
	switch e {
	case EndHelium:
		return "helium white dwarf"
	case EndCarbon:
		return "carbon-oxygen white dwarf"
	case EndNeon:
		return "oxygen-neon white dwarf"
	}
	return "explosion"
}

func (e End) cooling() float64 {
	switch e {
	case EndHelium:
		return coolHe
	case EndNeon:
		return coolONe
	}
	return coolCO
}

// after is how a core ends that helium burning left with that mass.
func after(core float64) End {
	if core < 1.6 {
		return EndCarbon
	}
	return EndNeon
}
