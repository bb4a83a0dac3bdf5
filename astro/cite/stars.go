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

// GeierEtAl2019 is the catalogue of hot subdwarf candidates.
var GeierEtAl2019 = Ref{
	Authors: "Geier et al.", Year: 2019,
	Title: "The population of hot subdwarf stars studied with Gaia. II. The Gaia DR2 catalogue of hot subluminous stars",
	Where: "A&A 621, A38", DOI: "10.1051/0004-6361/201834236",
}

// LiEtAl2022 is the brightness of the tip of the red giant branch.
var LiEtAl2022 = Ref{
	Authors: "Li et al.", Year: 2022,
	Title: "A maximum likelihood calibration of the tip of the red giant branch luminosity from high-latitude field giants using Gaia Early Data Release 3 parallaxes",
	Where: "arXiv:2202.11110",
}

// ElsworthEtAl2019 is the list of giants whose stage is known from their oscillations.
var ElsworthEtAl2019 = Ref{
	Authors: "Elsworth et al.", Year: 2019,
	Title: "Insights from the APOKASC determination of the evolutionary state of red-giant stars by consolidation of different methods",
	Where: "MNRAS 489, 4641",
}

// BedardEtAl2020 is the cooling of white dwarfs and, with the works it builds
// on, their colours.
var BedardEtAl2020 = Ref{
	Authors: "Bédard, Bergeron, Brassard & Fontaine", Year: 2020,
	Title: "On the spectral evolution of hot white dwarf stars. I. A detailed model atmosphere analysis of hot white dwarfs from SDSS DR12",
	Where: "ApJ 901, 93", DOI: "10.3847/1538-4357/abafbe",
}

// WoodBessellFox1983 is the upper limit of the luminosity on the AGB.
var WoodBessellFox1983 = Ref{
	Authors: "Wood, Bessell & Fox", Year: 1983,
	Title: "Long-period variables in the Magellanic Clouds: supergiants, AGB stars, supernova precursors, planetary nebula precursors, and enrichment of the interstellar medium",
	Where: "ApJ 272, 99", DOI: "10.1086/161265",
}

// MucciarelliEtAl2021 gives temperatures from Gaia colours.
var MucciarelliEtAl2021 = Ref{
	Authors: "Mucciarelli, Bellazzini & Massari", Year: 2021,
	Title: "Exploiting the Gaia EDR3 photometry to derive stellar temperatures",
	Where: "A&A 653, A90",
}

// AlonsoEtAl1999 gives temperatures of giants from B-V and V-K.
var AlonsoEtAl1999 = Ref{
	Authors: "Alonso, Arribas & Martínez-Roger", Year: 1999,
	Title: "The effective temperature scale of giant stars (F0-K5). II. Empirical calibration of Teff versus colours and [Fe/H]",
	Where: "A&AS 140, 261",
}

// AndraeEtAl2018 has the bolometric correction in G.
var AndraeEtAl2018 = Ref{
	Authors: "Andrae et al.", Year: 2018,
	Title: "Gaia Data Release 2. First stellar parameters from Apsis",
	Where: "A&A 616, A8", DOI: "10.1051/0004-6361/201732516",
}

// Torres2010 has the bolometric correction in V with its coefficients put right.
var Torres2010 = Ref{
	Authors: "Torres", Year: 2010,
	Title: "On the use of empirical bolometric corrections for stars",
	Where: "AJ 140, 1158", DOI: "10.1088/0004-6256/140/5/1158",
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

// Schaefer2010 has the histories of the recurrent novae.
var Schaefer2010 = Ref{
	Authors: "Schaefer", Year: 2010,
	Title: "Comprehensive photometric histories of all known Galactic recurrent novae",
	Where: "ApJS 187, 275", DOI: "10.1088/0067-0049/187/2/275",
}
