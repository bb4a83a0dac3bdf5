package cite

// What late-type stars are and how bright they are: loci of the evolutionary
// stages, scales of temperature and luminosity, variability.

// HurleyPolsTout2000 has the evolution of single stars in formulas.
var HurleyPolsTout2000 = Ref{
	Authors: "Hurley, Pols & Tout", Year: 2000,
	Title: "Comprehensive analytic formulae for stellar evolution as a function of mass and metallicity",
	Where: "MNRAS 315, 543", DOI: "10.1046/j.1365-8711.2000.03426.x",
}

// HawkinsEtAl2017 is the brightness of the red clump.
var HawkinsEtAl2017 = Ref{
	Authors: "Hawkins et al.", Year: 2017,
	Title: "Red clump stars and Gaia: calibration of the standard candle using a hierarchical probabilistic model",
	Where: "MNRAS 471, 722", DOI: "10.1093/mnras/stx1655",
}

// MuravevaEtAl2018 is the brightness of RR Lyrae stars.
var MuravevaEtAl2018 = Ref{
	Authors: "Muraveva et al.", Year: 2018,
	Title: "RR Lyrae stars as standard candles in the Gaia Data Release 2 era",
	Where: "MNRAS 481, 1195", DOI: "10.1093/mnras/sty2241",
}

// CasagrandeVandenBerg2018 has extinction in the Gaia bands.
var CasagrandeVandenBerg2018 = Ref{
	Authors: "Casagrande & VandenBerg", Year: 2018,
	Title: "On the use of Gaia magnitudes and new tables of bolometric corrections",
	Where: "MNRAS 479, L102", DOI: "10.1093/mnrasl/sly104",
}

// CardelliEtAl1989 is the law of extinction with wavelength.
var CardelliEtAl1989 = Ref{
	Authors: "Cardelli, Clayton & Mathis", Year: 1989,
	Title: "The relationship between infrared, optical, and ultraviolet extinction",
	Where: "ApJ 345, 245", DOI: "10.1086/167900",
}

// RielloEtAl2021 carries Gaia magnitudes to other bands.
var RielloEtAl2021 = Ref{
	Authors: "Riello et al.", Year: 2021,
	Title: "Gaia Early Data Release 3. Photometric content and validation",
	Where: "A&A 649, A3", DOI: "10.1051/0004-6361/202039587",
}

// EddingtonPlakidis1929 is how the phase of a long-period variable drifts.
var EddingtonPlakidis1929 = Ref{
	Authors: "Eddington & Plakidis", Year: 1929,
	Title: "Irregularities of period of long-period variable stars",
	Where: "MNRAS 90, 65", DOI: "10.1093/mnras/90.1.65",
}

// Pojmanski2002 is the survey whose V magnitudes the averages of long-period
// variables were taken from.
var Pojmanski2002 = Ref{
	Authors: "Pojmański", Year: 2002,
	Title: "The All Sky Automated Survey. Catalog of variable stars. I. 0h-6h quarter of the southern hemisphere",
	Where: "Acta Astron. 52, 397",
}

// SamusEtAl2017 is the General Catalogue of Variable Stars: the classes, and
// the limits of brightness that lists copy.
var SamusEtAl2017 = Ref{
	Authors: "Samus et al.", Year: 2017,
	Title: "General Catalogue of Variable Stars: Version GCVS 5.1",
	Where: "Astron. Rep. 61, 80", DOI: "10.1134/S1063772917010085",
}

// Jacoby1989 is the magnitude of a nebula in the line 5007.
var Jacoby1989 = Ref{
	Authors: "Jacoby", Year: 1989,
	Title: "Planetary nebulae as standard candles. I. Evolutionary models",
	Where: "ApJ 339, 39", DOI: "10.1086/167274",
}
