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

// JacobEtAl2013 is how long a planetary nebula can be seen.
var JacobEtAl2013 = Ref{
	Authors: "Jacob, Schönberner & Steffen", Year: 2013,
	Title: "The evolution of planetary nebulae. VIII. True expansion rates and visibility times",
	Where: "A&A 558, A78", DOI: "10.1051/0004-6361/201321532",
}

// ElsworthEtAl2019 is the stage of red giants from their oscillations.
var ElsworthEtAl2019 = Ref{
	Authors: "Elsworth et al.", Year: 2019,
	Title: "Insights from the APOKASC determination of the evolutionary state of red-giant stars by consolidation of different methods",
	Where: "MNRAS 489, 4641",
}

// CasagrandeEtAl2021 is temperature from Gaia and infrared colours.
var CasagrandeEtAl2021 = Ref{
	Authors: "Casagrande et al.", Year: 2021,
	Title: "The GALAH survey: effective temperature calibration from the InfraRed Flux Method in the Gaia system",
	Where: "MNRAS 507, 2684", DOI: "10.1093/mnras/stab2304",
}

// AndraeEtAl2018 is the bolometric correction in Gaia's G.
var AndraeEtAl2018 = Ref{
	Authors: "Andrae et al.", Year: 2018,
	Title: "Gaia Data Release 2. First stellar parameters from Apsis",
	Where: "A&A 616, A8", DOI: "10.1051/0004-6361/201732516",
}
