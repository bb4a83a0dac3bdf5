package cite

// White dwarfs: structure, cooling, masses, pulsation, mergers.

// SionEtAl1983 is the spectral classification of white dwarfs.
var SionEtAl1983 = Ref{
	Authors: "Sion et al.", Year: 1983,
	Title: "A proposed new white dwarf spectral classification system",
	Where: "ApJ 269, 253", DOI: "10.1086/161036",
}

// Chandrasekhar1939 has the exact model of a cold degenerate star.
var Chandrasekhar1939 = Ref{
	Authors: "Chandrasekhar", Year: 1939,
	Title: "An Introduction to the Study of Stellar Structure",
	Where: "University of Chicago Press",
}

// Nauenberg1972 is the radius of a cold white dwarf as a formula.
var Nauenberg1972 = Ref{
	Authors: "Nauenberg", Year: 1972,
	Title: "Analytic approximations to the mass-radius relation and energy of zero-temperature stars",
	Where: "ApJ 175, 417", DOI: "10.1086/151568",
}

// TiesingaEtAl2021 has the constants of nature.
var TiesingaEtAl2021 = Ref{
	Authors: "Tiesinga et al.", Year: 2021,
	Title: "CODATA recommended values of the fundamental physical constants: 2018",
	Where: "Rev. Mod. Phys. 93, 025010", DOI: "10.1103/RevModPhys.93.025010",
}

// Mestel1952 is the simplest law of cooling.
var Mestel1952 = Ref{
	Authors: "Mestel", Year: 1952,
	Title: "On the theory of white dwarf stars. I. The energy sources of white dwarfs",
	Where: "MNRAS 112, 583", DOI: "10.1093/mnras/112.6.583",
}

// IbenTutukov1984 has the constants of that law.
var IbenTutukov1984 = Ref{
	Authors: "Iben & Tutukov", Year: 1984,
	Title: "Cooling of low-mass carbon-oxygen dwarfs from the planetary nucleus stage through the crystallization stage",
	Where: "ApJ 282, 615",
}

// BedardEtAl2020 has the sequences of cooling white dwarfs.
var BedardEtAl2020 = Ref{
	Authors: "Bédard et al.", Year: 2020,
	Title: "On the spectral evolution of hot white dwarf stars. I. A detailed model atmosphere analysis of hot white dwarfs from SDSS DR12",
	Where: "ApJ 901, 93", DOI: "10.3847/1538-4357/abafbe",
}

// HolbergBergeron2006 carries models to magnitudes.
var HolbergBergeron2006 = Ref{
	Authors: "Holberg & Bergeron", Year: 2006,
	Title: "Calibration of synthetic photometry using DA white dwarfs",
	Where: "AJ 132, 1221", DOI: "10.1086/505938",
}

// KowalskiSaumon2006 has the red wing of Lyman alpha in cool atmospheres.
var KowalskiSaumon2006 = Ref{
	Authors: "Kowalski & Saumon", Year: 2006,
	Title: "Found: the missing blue opacity in atmosphere models of cool hydrogen white dwarfs",
	Where: "ApJ 651, L137", DOI: "10.1086/509723",
}

// TremblayEtAl2011 has hydrogen atmospheres.
var TremblayEtAl2011 = Ref{
	Authors: "Tremblay, Bergeron & Gianninas", Year: 2011,
	Title: "An improved spectroscopic analysis of DA white dwarfs from the Sloan Digital Sky Survey Data Release 4",
	Where: "ApJ 730, 128", DOI: "10.1088/0004-637X/730/2/128",
}

// BlouinEtAl2018 has cool atmospheres.
var BlouinEtAl2018 = Ref{
	Authors: "Blouin, Dufour & Allard", Year: 2018,
	Title: "A new generation of cool white dwarf atmosphere models. I. Theoretical framework and applications to DZ stars",
	Where: "ApJ 863, 184",
}

// GentileFusilloEtAl2021 is the catalogue of white dwarfs of Gaia EDR3 with its
// photometric fits.
var GentileFusilloEtAl2021 = Ref{
	Authors: "Gentile Fusillo et al.", Year: 2021,
	Title: "A catalogue of white dwarfs in Gaia EDR3",
	Where: "MNRAS 508, 3877", DOI: "10.1093/mnras/stab2672",
}

// TremblayEtAl2017 has masses and radii from parallaxes and spectra.
var TremblayEtAl2017 = Ref{
	Authors: "Tremblay et al.", Year: 2017,
	Title: "The Gaia DR1 mass-radius relation for white dwarfs",
	Where: "MNRAS 465, 2849", DOI: "10.1093/mnras/stw2854",
}

// TremblayEtAl2019 has the pile-up of crystallising white dwarfs.
var TremblayEtAl2019 = Ref{
	Authors: "Tremblay et al.", Year: 2019,
	Title: "Core crystallization and pile-up in the cooling sequence of evolving white dwarfs",
	Where: "Nature 565, 202", DOI: "10.1038/s41586-018-0791-x",
}

// CummingsEtAl2018 ties initial to final masses.
var CummingsEtAl2018 = Ref{
	Authors: "Cummings et al.", Year: 2018,
	Title: "The white dwarf initial-final mass relation for progenitor stars from 0.85 to 7.5 solar masses",
	Where: "ApJ 866, 21", DOI: "10.3847/1538-4357/aadfd6",
}

// KaliraiEtAl2008 ties initial to final masses by a line.
var KaliraiEtAl2008 = Ref{
	Authors: "Kalirai et al.", Year: 2008,
	Title: "The initial-final mass relation: direct constraints at the low-mass end",
	Where: "ApJ 676, 594", DOI: "10.1086/527028",
}

// TremblayEtAl2015 has the edges of the ZZ Ceti strip in three dimensions.
var TremblayEtAl2015 = Ref{
	Authors: "Tremblay et al.", Year: 2015,
	Title: "3D model atmospheres for extremely low-mass white dwarfs",
	Where: "ApJ 809, 148", DOI: "10.1088/0004-637X/809/2/148",
}

// MukadamEtAl2006 has how the periods of ZZ Ceti stars change across the strip.
var MukadamEtAl2006 = Ref{
	Authors: "Mukadam et al.", Year: 2006,
	Title: "Ensemble characteristics of the ZZ Ceti stars",
	Where: "ApJ 640, 956", DOI: "10.1086/500289",
}

// BeauchampEtAl1999 has the strip of the pulsating helium white dwarfs.
var BeauchampEtAl1999 = Ref{
	Authors: "Beauchamp et al.", Year: 1999,
	Title: "Spectroscopic studies of DB white dwarfs: the instability strip of the pulsating DB (V777 Herculis) stars",
	Where: "ApJ 516, 887",
}

// CukanovaiteEtAl2018 has helium atmospheres in three dimensions.
var CukanovaiteEtAl2018 = Ref{
	Authors: "Cukanovaite et al.", Year: 2018,
	Title: "Pure-helium 3D model atmospheres of white dwarfs",
	Where: "MNRAS 481, 1522", DOI: "10.1093/mnras/sty2383",
}

// Peters1964 is the merger of two stars by gravitational waves.
var Peters1964 = Ref{
	Authors: "Peters", Year: 1964,
	Title: "Gravitational radiation and the motion of two point masses",
	Where: "Phys. Rev. 136, B1224", DOI: "10.1103/PhysRev.136.B1224",
}
