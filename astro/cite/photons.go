package cite

// From magnitudes to electrons: zero points, images of stars, detectors, noise
// of the air, and the air as a prism.

// BIPM2019 has the constants of Planck and of light.
var BIPM2019 = Ref{
	Authors: "BIPM", Year: 2019,
	Title: "The International System of Units, 9th edition",
	Where: "Bureau International des Poids et Mesures, Sèvres",
}

// Moffat1969 is the shape of a star's image.
var Moffat1969 = Ref{
	Authors: "Moffat", Year: 1969,
	Title: "A theoretical investigation of focal stellar images in the photographic emulsion and application to photographic photometry",
	Where: "A&A 3, 455",
}

// TrujilloEtAl2001 has the exponent of that shape that turbulence gives.
var TrujilloEtAl2001 = Ref{
	Authors: "Trujillo et al.", Year: 2001,
	Title: "The effects of seeing on Sérsic profiles - II. The Moffat PSF",
	Where: "MNRAS 328, 977", DOI: "10.1046/j.1365-8711.2001.04937.x",
}

// Roddier1981 has seeing by airmass and wavelength.
var Roddier1981 = Ref{
	Authors: "Roddier", Year: 1981,
	Title: "The effects of atmospheric turbulence in optical astronomy",
	Where: "Progress in Optics 19, 281",
}

// Tokovinin2002 has what the outer scale of turbulence does to seeing.
var Tokovinin2002 = Ref{
	Authors: "Tokovinin", Year: 2002,
	Title: "From differential image motion to seeing",
	Where: "PASP 114, 1156", DOI: "10.1086/342683",
}

// MerlineHowell1995 is signal and noise of a detector.
var MerlineHowell1995 = Ref{
	Authors: "Merline & Howell", Year: 1995,
	Title: "A realistic model for point-sources imaged on array detectors: the model and initial results",
	Where: "Exp. Astron. 6, 163", DOI: "10.1007/BF00421131",
}

// Howell2006 has a worked example of it.
var Howell2006 = Ref{
	Authors: "Howell", Year: 2006,
	Title: "Handbook of CCD Astronomy, 2nd edition",
	Where: "Cambridge University Press",
}

// Young1967 is scintillation after its discoverers.
var Young1967 = Ref{
	Authors: "Young", Year: 1967,
	Title: "Photometric error analysis. VI. Confirmation of Reiger's theory of scintillation",
	Where: "AJ 72, 747", DOI: "10.1086/110303",
}

// DravinsEtAl1998 has Young's formula with its coefficient.
var DravinsEtAl1998 = Ref{
	Authors: "Dravins et al.", Year: 1998,
	Title: "Atmospheric intensity scintillation of stars. III. Effects for different telescope apertures",
	Where: "PASP 110, 610", DOI: "10.1086/316161",
}

// OsbornEtAl2015 is scintillation as it was measured at several sites.
var OsbornEtAl2015 = Ref{
	Authors: "Osborn et al.", Year: 2015,
	Title: "Atmospheric scintillation in astronomical photometry",
	Where: "MNRAS 452, 1707", DOI: "10.1093/mnras/stv1400",
}

// Filippenko1982 is the spectrum that the air makes of a star's image.
var Filippenko1982 = Ref{
	Authors: "Filippenko", Year: 1982,
	Title: "The importance of atmospheric differential refraction in spectrophotometry",
	Where: "PASP 94, 715", DOI: "10.1086/131052",
}
