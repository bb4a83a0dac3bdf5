package cite

// The air above the observer: airmass, refraction, the standard atmosphere,
// and the moonlight that it scatters.

// KastenYoung1989 is the default airmass.
var KastenYoung1989 = Ref{
	Authors: "Kasten & Young", Year: 1989,
	Title: "Revised optical air mass tables and approximation formula",
	Where: "Appl. Opt. 28, 4735", DOI: "10.1364/AO.28.004735",
}

// Young1994 is airmass from true altitude.
var Young1994 = Ref{
	Authors: "Young", Year: 1994,
	Title: "Air mass and refraction",
	Where: "Appl. Opt. 33, 1108", DOI: "10.1364/AO.33.001108",
}

// Pickering2002 is airmass for the horizon.
var Pickering2002 = Ref{
	Authors: "Pickering", Year: 2002,
	Title: "The Southern Limits of the Ancient Star Catalog",
	Where: "DIO 12, 3",
}

// BirdRiordan1984 has the path through a thin layer at the height of ozone.
var BirdRiordan1984 = Ref{
	Authors: "Bird & Riordan", Year: 1984,
	Title: "Simple solar spectral model for direct and diffuse irradiance on horizontal and tilted planes at the Earth's surface for cloudless atmospheres",
	Where: "SERI/TR-215-2436",
}

// Garstang1989 has the path of scattered light and airglow.
var Garstang1989 = Ref{
	Authors: "Garstang", Year: 1989,
	Title: "Night-sky brightness at observatories and sites",
	Where: "PASP 101, 306", DOI: "10.1086/132436",
}

// KrisciunasSchaefer1991 is the brightness of moonlight.
var KrisciunasSchaefer1991 = Ref{
	Authors: "Krisciunas & Schaefer", Year: 1991,
	Title: "A model of the brightness of moonlight",
	Where: "PASP 103, 1033", DOI: "10.1086/132921",
}

// Bennett1982 is refraction from apparent altitude.
var Bennett1982 = Ref{
	Authors: "Bennett", Year: 1982,
	Title: "The calculation of astronomical refraction in marine navigation",
	Where: "J. Navigation 35, 255", DOI: "10.1017/S0373463300022037",
}

// Saemundsson1986 is refraction from true altitude.
var Saemundsson1986 = Ref{
	Authors: "Saemundsson", Year: 1986,
	Title: "Atmospheric refraction",
	Where: "Sky & Telescope 72, 70",
}

// Stone1996 gives the two constants of refraction from the weather.
var Stone1996 = Ref{
	Authors: "Stone", Year: 1996,
	Title: "An accurate method for computing atmospheric refraction",
	Where: "PASP 108, 1051", DOI: "10.1086/133831",
}

// Gill1982 has the pressure of saturated water vapour.
var Gill1982 = Ref{
	Authors: "Gill", Year: 1982,
	Title: "Atmosphere-Ocean Dynamics",
	Where: "Academic Press, New York",
}

// Owens1967 is the optical refractive index of air.
var Owens1967 = Ref{
	Authors: "Owens", Year: 1967,
	Title: "Optical refractive index of air: dependence on pressure, temperature and composition",
	Where: "Appl. Opt. 6, 51", DOI: "10.1364/AO.6.000051",
}

// ISO2533 is the standard atmosphere.
var ISO2533 = Ref{
	Authors: "ISO", Year: 1975,
	Title: "ISO 2533: Standard Atmosphere",
	Where: "International Organization for Standardization, Geneva",
}
