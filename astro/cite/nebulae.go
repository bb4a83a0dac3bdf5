package cite

// Planetary nebulae and their central stars.

// OsterbrockFerland2006 has the ratios of hydrogen lines.
var OsterbrockFerland2006 = Ref{
	Authors: "Osterbrock & Ferland", Year: 2006,
	Title: "Astrophysics of Gaseous Nebulae and Active Galactic Nuclei, 2nd edition",
	Where: "University Science Books",
}

// FrewEtAl2016 has distances from surface brightness in Halpha.
var FrewEtAl2016 = Ref{
	Authors: "Frew, Parker & Bojičić", Year: 2016,
	Title: "The Hα surface brightness-radius relation: a robust statistical distance indicator for planetary nebulae",
	Where: "MNRAS 455, 1459", DOI: "10.1093/mnras/stv1516",
}

// StanghelliniEtAl2020 has distances from surface brightness in Hbeta.
var StanghelliniEtAl2020 = Ref{
	Authors: "Stanghellini et al.", Year: 2020,
	Title: "The population of Galactic planetary nebulae: a study of distance scales and central stars based on the second Gaia data release",
	Where: "ApJ 889, 21", DOI: "10.3847/1538-4357/ab59e4",
}

// JacobEtAl2013 has how fast planetary nebulae truly expand.
var JacobEtAl2013 = Ref{
	Authors: "Jacob, Schönberner & Steffen", Year: 2013,
	Title: "The evolution of planetary nebulae. VIII. True expansion rates and visibility times",
	Where: "A&A 558, A78", DOI: "10.1051/0004-6361/201321532",
}

// SchonbernerEtAl2005 has how measured velocities fall short of the edge's.
var SchonbernerEtAl2005 = Ref{
	Authors: "Schönberner, Jacob & Steffen", Year: 2005,
	Title: "The evolution of planetary nebulae. III. Internal kinematics and expansion parallaxes",
	Where: "A&A 441, 573",
}

// Zanstra1931 is the temperature of a star from the nebula that it lights.
var Zanstra1931 = Ref{
	Authors: "Zanstra", Year: 1931,
	Title: "Luminosity of planetary nebulae and stellar temperatures",
	Where: "Publ. Dominion Astrophys. Obs. Victoria 4, 209",
}

// BessellEtAl1998 has the flux of a star of magnitude 0.
var BessellEtAl1998 = Ref{
	Authors: "Bessell, Castelli & Plez", Year: 1998,
	Title: "Model atmospheres broad-band colors, bolometric corrections and temperature calibrations for O-M stars",
	Where: "A&A 333, 231",
}

// VaccaEtAl1996 has the bolometric correction of hot stars.
var VaccaEtAl1996 = Ref{
	Authors: "Vacca, Garmany & Shull", Year: 1996,
	Title: "The Lyman-continuum fluxes and stellar parameters of O and early B-type stars",
	Where: "ApJ 460, 914", DOI: "10.1086/177020",
}

// CiardulloEtAl2002 has the brightest that a planetary nebula gets.
var CiardulloEtAl2002 = Ref{
	Authors: "Ciardullo et al.", Year: 2002,
	Title: "Planetary nebulae as standard candles. XII. Connecting the Population I and Population II distance scales",
	Where: "ApJ 577, 31", DOI: "10.1086/342180",
}

// ScheuermannEtAl2022 has it from later work.
var ScheuermannEtAl2022 = Ref{
	Authors: "Scheuermann et al.", Year: 2022,
	Title: "Planetary nebula luminosity function distances for 19 galaxies observed by PHANGS-MUSE",
	Where: "MNRAS 511, 6087", DOI: "10.1093/mnras/stac110",
}

// ParkerEtAl2006 has the code of shapes of planetary nebulae.
var ParkerEtAl2006 = Ref{
	Authors: "Parker et al.", Year: 2006,
	Title: "The Macquarie/AAO/Strasbourg Hα planetary nebula catalogue: MASH",
	Where: "MNRAS 373, 79", DOI: "10.1111/j.1365-2966.2006.10950.x",
}

// DopitaMeatheringham1990 has the excitation class of planetary nebulae.
var DopitaMeatheringham1990 = Ref{
	Authors: "Dopita & Meatheringham", Year: 1990,
	Title: "The evolutionary sequence of planetary nebulae",
	Where: "ApJ 357, 140",
}
