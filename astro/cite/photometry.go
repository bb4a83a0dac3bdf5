package cite

// From what a catalogue lists to luminosity, temperature and radius: parallax
// and its zero point, extinction, colours, bolometric corrections.

// LindegrenEtAl2021 is the zero point of the parallaxes of Gaia EDR3 and DR3.
var LindegrenEtAl2021 = Ref{
	Authors: "Lindegren et al.", Year: 2021,
	Title: "Gaia Early Data Release 3. Parallax bias versus magnitude, colour, and position",
	Where: "A&A 649, A4", DOI: "10.1051/0004-6361/202039653",
}

// LindegrenEtAl2018 is the zero point of the parallaxes of Gaia DR2.
var LindegrenEtAl2018 = Ref{
	Authors: "Lindegren et al.", Year: 2018,
	Title: "Gaia Data Release 2. The astrometric solution",
	Where: "A&A 616, A2", DOI: "10.1051/0004-6361/201832727",
}

// MaizApellanizEtAl2021 has the floor of the errors of Gaia EDR3 parallaxes.
var MaizApellanizEtAl2021 = Ref{
	Authors: "Maíz Apellániz, Pantaleoni González & Barbá", Year: 2021,
	Title: "Validation of the accuracy and precision of Gaia EDR3 parallaxes with globular clusters",
	Where: "A&A 649, A13", DOI: "10.1051/0004-6361/202140418",
}

// MaizApellaniz2022 has the factor on the errors of Gaia EDR3 parallaxes.
var MaizApellaniz2022 = Ref{
	Authors: "Maíz Apellániz", Year: 2022,
	Title: "An estimation of the Gaia EDR3 parallax bias from stellar clusters and Magellanic Clouds data",
	Where: "A&A 657, A130", DOI: "10.1051/0004-6361/202142365",
}

// BailerJones2015 is the distance that follows from a poor parallax.
var BailerJones2015 = Ref{
	Authors: "Bailer-Jones", Year: 2015,
	Title: "Estimating distances from parallaxes",
	Where: "PASP 127, 994", DOI: "10.1086/683116",
}

// AstraatmadjaBailerJones2016 has the scale length of the distance prior.
var AstraatmadjaBailerJones2016 = Ref{
	Authors: "Astraatmadja & Bailer-Jones", Year: 2016,
	Title: "Estimating distances from parallaxes. III. Distances of two million stars in the Gaia DR1 catalogue",
	Where: "ApJ 833, 119", DOI: "10.3847/1538-4357/833/1/119",
}

// SchlaflyFinkbeiner2011 puts the maps of reddening on their true scale.
var SchlaflyFinkbeiner2011 = Ref{
	Authors: "Schlafly & Finkbeiner", Year: 2011,
	Title: "Measuring reddening with Sloan Digital Sky Survey stellar spectra and recalibrating SFD",
	Where: "ApJ 737, 103", DOI: "10.1088/0004-637X/737/2/103",
}

// DanielskiEtAl2018 is how extinction in Gaia's G hangs on the star's colour.
var DanielskiEtAl2018 = Ref{
	Authors: "Danielski et al.", Year: 2018,
	Title: "The empirical Gaia G-band extinction coefficient",
	Where: "A&A 614, A19", DOI: "10.1051/0004-6361/201732327",
}

// BabusiauxEtAl2018 has extinction in the bands of Gaia DR2 by colour.
var BabusiauxEtAl2018 = Ref{
	Authors: "Gaia Collaboration, Babusiaux et al.", Year: 2018,
	Title: "Gaia Data Release 2. Observational Hertzsprung-Russell diagrams",
	Where: "A&A 616, A10", DOI: "10.1051/0004-6361/201832843",
}

// FitzpatrickEtAl2019 is the law of extinction behind Gaia DR3's coefficients.
var FitzpatrickEtAl2019 = Ref{
	Authors: "Fitzpatrick et al.", Year: 2019,
	Title: "An analysis of the shapes of interstellar extinction curves. VII. Milky Way spectrophotometric optical-through-ultraviolet extinction and its R-dependence",
	Where: "ApJ 886, 108", DOI: "10.3847/1538-4357/ab4c3a",
}

// MucciarelliEtAl2021 turns Gaia EDR3 colours into temperatures.
var MucciarelliEtAl2021 = Ref{
	Authors: "Mucciarelli, Bellazzini & Massari", Year: 2021,
	Title: "Exploiting the Gaia EDR3 photometry to derive stellar temperatures",
	Where: "A&A 653, A90", DOI: "10.1051/0004-6361/202140979",
}

// AlonsoEtAl1999 turns B-V and V-K of giants into temperatures.
var AlonsoEtAl1999 = Ref{
	Authors: "Alonso, Arribas & Martínez-Roger", Year: 1999,
	Title: "The effective temperature scale of giant stars (F0-K5). II. Empirical calibration of Teff versus colours and [Fe/H]",
	Where: "A&AS 140, 261 (erratum 2001, A&A 376, 1039)", DOI: "10.1051/aas:1999521",
}

// RamirezMelendez2005 turns B-V and V-Ks of dwarfs into temperatures.
var RamirezMelendez2005 = Ref{
	Authors: "Ramírez & Meléndez", Year: 2005,
	Title: "The effective temperature scale of FGK stars. II. Teff:color:[Fe/H] calibrations",
	Where: "ApJ 626, 465", DOI: "10.1086/430102",
}

// CasagrandeEtAl2021 turns Gaia and 2MASS colours into temperatures.
var CasagrandeEtAl2021 = Ref{
	Authors: "Casagrande et al.", Year: 2021,
	Title: "The GALAH survey: effective temperature calibration from the InfraRed Flux Method in the Gaia system",
	Where: "MNRAS 507, 2684", DOI: "10.1093/mnras/stab2304",
}

// VanBelleEtAl1999 has temperatures of giants from their angular diameters.
var VanBelleEtAl1999 = Ref{
	Authors: "van Belle et al.", Year: 1999,
	Title: "Radii and effective temperatures for G, K, and M giants and supergiants",
	Where: "AJ 117, 521", DOI: "10.1086/300677",
}

// PerrinEtAl1998 has temperatures of the latest giants.
var PerrinEtAl1998 = Ref{
	Authors: "Perrin et al.", Year: 1998,
	Title: "Extension of the effective temperature scale of giants to types later than M6",
	Where: "A&A 331, 619",
}

// AndraeEtAl2018 has the bolometric correction of Gaia's G.
var AndraeEtAl2018 = Ref{
	Authors: "Andrae et al.", Year: 2018,
	Title: "Gaia Data Release 2. First stellar parameters from Apsis",
	Where: "A&A 616, A8", DOI: "10.1051/0004-6361/201732516",
}

// Flower1996 has the bolometric correction of V.
var Flower1996 = Ref{
	Authors: "Flower", Year: 1996,
	Title: "Transformations from theoretical Hertzsprung-Russell diagrams to color-magnitude diagrams: effective temperatures, B-V colors, and bolometric corrections",
	Where: "ApJ 469, 355", DOI: "10.1086/177785",
}

// Torres2010 corrects the coefficients of Flower, and says which absolute
// magnitude of the Sun belongs to them.
var Torres2010 = Ref{
	Authors: "Torres", Year: 2010,
	Title: "On the use of empirical bolometric corrections for stars",
	Where: "AJ 140, 1158", DOI: "10.1088/0004-6256/140/5/1158",
}

// IAU2015B2 is the zero point of bolometric magnitudes.
var IAU2015B2 = Ref{
	Authors: "Mamajek et al.", Year: 2015,
	Title: "IAU 2015 Resolution B2 on recommended zero points for the absolute and apparent bolometric magnitude scales",
	Where: "arXiv:1510.06262",
}

// GaiaDR2Documentation has how long-period variables were handled there.
var GaiaDR2Documentation = Ref{
	Authors: "Gaia Collaboration", Year: 2018,
	Title: "Gaia Data Release 2 documentation, section 7.7.3",
	Where: "European Space Agency",
}

// WoodBessellFox1983 is how bright a star of the asymptotic giant branch can be.
var WoodBessellFox1983 = Ref{
	Authors: "Wood, Bessell & Fox", Year: 1983,
	Title: "Long-period variables in the Magellanic Clouds: supergiants, AGB stars, supernova precursors, planetary nebula precursors, and enrichment of the interstellar medium",
	Where: "ApJ 272, 99", DOI: "10.1086/161265",
}

// KjeldsenBedding1995 scales oscillations from the Sun to other stars.
var KjeldsenBedding1995 = Ref{
	Authors: "Kjeldsen & Bedding", Year: 1995,
	Title: "Amplitudes of stellar oscillations: the implications for asteroseismology",
	Where: "A&A 293, 87",
}
