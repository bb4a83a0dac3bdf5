package cite

// The brightness of the sky between the stars, and what the air takes from
// starlight.

// BennEllison1998 has the dark sky, airglow and faint stars.
var BennEllison1998 = Ref{
	Authors: "Benn & Ellison", Year: 1998,
	Title: "La Palma night-sky brightness",
	Where: "La Palma Technical Note 115",
}

// Patat2003 is the dark sky at solar maximum, and how it brightens downwards.
var Patat2003 = Ref{
	Authors: "Patat", Year: 2003,
	Title: "UBVRI night sky brightness during sunspot maximum at ESO-Paranal",
	Where: "A&A 400, 1183", DOI: "10.1051/0004-6361:20030030",
}

// PatatEtAl2006 is twilight at the zenith.
var PatatEtAl2006 = Ref{
	Authors: "Patat, Ugolnikov & Postylyakov", Year: 2006,
	Title: "UBVRI twilight sky brightness at ESO-Paranal",
	Where: "A&A 455, 385", DOI: "10.1051/0004-6361:20064992",
}

// PatatEtAl2011 has the extinction and the aerosols of Paranal.
var PatatEtAl2011 = Ref{
	Authors: "Patat et al.", Year: 2011,
	Title: "Optical atmospheric extinction over Cerro Paranal",
	Where: "A&A 527, A91", DOI: "10.1051/0004-6361/201015537",
}

// ButonEtAl2013 has the extinction and the aerosols of Mauna Kea.
var ButonEtAl2013 = Ref{
	Authors: "Buton et al.", Year: 2013,
	Title: "Atmospheric extinction properties above Mauna Kea from the Nearby SuperNova Factory spectro-photometric data set",
	Where: "A&A 549, A8", DOI: "10.1051/0004-6361/201219834",
}

// HayesLatham1975 is extinction by molecules.
var HayesLatham1975 = Ref{
	Authors: "Hayes & Latham", Year: 1975,
	Title: "A rediscussion of the atmospheric extinction and the absolute spectral-energy distribution of Vega",
	Where: "ApJ 197, 593", DOI: "10.1086/153548",
}

// Green1992 has extinction by height, aerosols included.
var Green1992 = Ref{
	Authors: "Green", Year: 1992,
	Title: "Magnitude corrections for atmospheric extinction",
	Where: "International Comet Quarterly 14, 55",
}

// KrisciunasEtAl1987 has extinction in the near infrared.
var KrisciunasEtAl1987 = Ref{
	Authors: "Krisciunas et al.", Year: 1987,
	Title: "Atmospheric extinction and night-sky brightness at Mauna Kea",
	Where: "PASP 99, 887",
}

// LeinertEtAl1998 is the zodiacal light.
var LeinertEtAl1998 = Ref{
	Authors: "Leinert et al.", Year: 1998,
	Title: "The 1997 reference of diffuse night sky brightness",
	Where: "A&AS 127, 1", DOI: "10.1051/aas:1998105",
}

// RamirezEtAl2012 has the colours of the Sun.
var RamirezEtAl2012 = Ref{
	Authors: "Ramírez et al.", Year: 2012,
	Title: "The UBV(RI)C colors of the Sun",
	Where: "ApJ 752, 5", DOI: "10.1088/0004-637X/752/1/5",
}

// LaneIrvine1973 has the colours of the Moon.
var LaneIrvine1973 = Ref{
	Authors: "Lane & Irvine", Year: 1973,
	Title: "Monochromatic phase curves and albedos for the lunar disk",
	Where: "AJ 78, 267", DOI: "10.1086/111414",
}

// IvezicEtAl2019 has the dark sky in u g r i z.
var IvezicEtAl2019 = Ref{
	Authors: "Ivezić et al.", Year: 2019,
	Title: "LSST: From Science Drivers to Reference Design and Anticipated Data Products",
	Where: "ApJ 873, 111", DOI: "10.3847/1538-4357/ab042c",
}
