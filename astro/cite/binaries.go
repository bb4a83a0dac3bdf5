package cite

// Interacting binaries: how bright they get and how they fade.

// Warner1987 has the absolute magnitudes of dwarf novae and old novae.
var Warner1987 = Ref{
	Authors: "Warner", Year: 1987,
	Title: "Absolute magnitudes of cataclysmic variables",
	Where: "MNRAS 227, 23", DOI: "10.1093/mnras/227.1.23",
}

// Schaefer2010 has the histories of the recurrent novae.
var Schaefer2010 = Ref{
	Authors: "Schaefer", Year: 2010,
	Title: "Comprehensive photometric histories of all known Galactic recurrent novae",
	Where: "ApJS 187, 275", DOI: "10.1088/0067-0049/187/2/275",
}

// DellaValleLivio1995 ties a nova's maximum to how fast it fades.
var DellaValleLivio1995 = Ref{
	Authors: "della Valle & Livio", Year: 1995,
	Title: "The calibration of novae as distance indicators",
	Where: "ApJ 452, 704", DOI: "10.1086/176342",
}

// HachisuKato2006 has the slopes that all novae fade by.
var HachisuKato2006 = Ref{
	Authors: "Hachisu & Kato", Year: 2006,
	Title: "A universal decline law of classical novae",
	Where: "ApJS 167, 59", DOI: "10.1086/508063",
}
