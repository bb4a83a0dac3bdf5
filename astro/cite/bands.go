package cite

// Photometric bands: where they lie, what zero magnitude is in them, and the
// colours of giants.

// BessellCastelliPlez1998 has zero points and wavelengths of the Johnson-
// Cousins-Glass bands.
var BessellCastelliPlez1998 = Ref{
	Authors: "Bessell, Castelli & Plez", Year: 1998,
	Title: "Model atmospheres broad-band colors, bolometric corrections and temperature calibrations for O - M stars",
	Where: "A&A 333, 231",
}

// FukugitaEtAl1996 defines the Sloan bands.
var FukugitaEtAl1996 = Ref{
	Authors: "Fukugita et al.", Year: 1996,
	Title: "The Sloan Digital Sky Survey Photometric System",
	Where: "AJ 111, 1748", DOI: "10.1086/117915",
}

// WrightEtAl2010 describes the infrared survey whose first bands are W1, W2.
var WrightEtAl2010 = Ref{
	Authors: "Wright et al.", Year: 2010,
	Title: "The Wide-field Infrared Survey Explorer (WISE): mission description and initial on-orbit performance",
	Where: "AJ 140, 1868", DOI: "10.1088/0004-6256/140/6/1868",
}

// HealyEtAl2024 lists cool giants whose Gaia and 2MASS colours were averaged
// by type.
var HealyEtAl2024 = Ref{
	Authors: "Healy et al.", Year: 2024,
	Title: "Red supergiant candidates for multimessenger monitoring of the next Galactic supernova",
	Where: "MNRAS 529, 3630; arXiv:2307.08785",
}
