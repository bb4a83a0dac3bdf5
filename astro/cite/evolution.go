package cite

// How single stars evolve: formulas, winds, the mass function, and the last
// steps.

// ToutEtAl1996 has luminosity and radius of the zero-age main sequence.
var ToutEtAl1996 = Ref{
	Authors: "Tout et al.", Year: 1996,
	Title: "Zero-age main-sequence radii and luminosities as analytic functions of mass and metallicity",
	Where: "MNRAS 281, 257", DOI: "10.1093/mnras/281.1.257",
}

// VassiliadisWood1993 is the superwind at the end of the asymptotic giant
// branch.
var VassiliadisWood1993 = Ref{
	Authors: "Vassiliadis & Wood", Year: 1993,
	Title: "Evolution of low- and intermediate-mass stars to the end of the asymptotic giant branch with mass loss",
	Where: "ApJ 413, 641", DOI: "10.1086/173033",
}

// Reimers1975 is the wind of cool giants.
var Reimers1975 = Ref{
	Authors: "Reimers", Year: 1975,
	Title: "Circumstellar absorption lines and mass loss from red giants",
	Where: "Mem. Soc. R. Sci. Liège 8, 369",
}

// Kroupa2001 is how many stars are born at each mass.
var Kroupa2001 = Ref{
	Authors: "Kroupa", Year: 2001,
	Title: "On the variation of the initial mass function",
	Where: "MNRAS 322, 231", DOI: "10.1046/j.1365-8711.2001.04022.x",
}

// MillerBertolami2016 is how fast stars cross from the asymptotic giant branch
// to the white dwarfs.
var MillerBertolami2016 = Ref{
	Authors: "Miller Bertolami", Year: 2016,
	Title: "New models for the evolution of post-asymptotic giant branch stars and central stars of planetary nebulae",
	Where: "A&A 588, A25", DOI: "10.1051/0004-6361/201526577",
}
