package cite

// Where a star stands: precession, nutation, aberration, time scales, the
// bodies of the solar system, the figure of the Earth.

// CapitaineWallaceChapront2003 gives the IAU 2006 precession and sidereal time.
var CapitaineWallaceChapront2003 = Ref{
	Authors: "Capitaine, Wallace & Chapront", Year: 2003,
	Title: "Expressions for IAU 2000 precession quantities",
	Where: "A&A 412, 567", DOI: "10.1051/0004-6361:20031539",
}

// Fukushima2003 gives precession and nutation by four rotations.
var Fukushima2003 = Ref{
	Authors: "Fukushima", Year: 2003,
	Title: "A new precession formula",
	Where: "AJ 126, 494", DOI: "10.1086/375641",
}

// Williams1994 has the four rotations first.
var Williams1994 = Ref{
	Authors: "Williams", Year: 1994,
	Title: "Contributions to the Earth's obliquity rate, precession, and nutation",
	Where: "AJ 108, 711", DOI: "10.1086/117108",
}

// HiltonEtAl2006 is the working group's report behind IAU 2006 precession.
var HiltonEtAl2006 = Ref{
	Authors: "Hilton et al.", Year: 2006,
	Title: "Report of the International Astronomical Union Division I Working Group on Precession and the Ecliptic",
	Where: "Celest. Mech. Dyn. Astron. 94, 351", DOI: "10.1007/s10569-006-0001-2",
}

// WallaceCapitaine2006 says how IAU 2006 precession is put to use.
var WallaceCapitaine2006 = Ref{
	Authors: "Wallace & Capitaine", Year: 2006,
	Title: "Precession-nutation procedures consistent with IAU 2006 resolutions",
	Where: "A&A 459, 981", DOI: "10.1051/0004-6361:20065897",
}

// Seidelmann1982 is the IAU 1980 theory of nutation.
var Seidelmann1982 = Ref{
	Authors: "Seidelmann", Year: 1982,
	Title: "1980 IAU theory of nutation: the final report of the IAU Working Group on Nutation",
	Where: "Celest. Mech. 27, 79", DOI: "10.1007/BF01228952",
}

// Meeus1998 is the handbook whose algorithms the fenced library follows.
var Meeus1998 = Ref{
	Authors: "Meeus", Year: 1998,
	Title: "Astronomical Algorithms, 2nd edition",
	Where: "Willmann-Bell, Richmond",
}

// RonVondrak1986 is the trigonometric series of annual aberration.
var RonVondrak1986 = Ref{
	Authors: "Ron & Vondrak", Year: 1986,
	Title: "Expansion of annual aberration into trigonometric series",
	Where: "Bull. Astron. Inst. Czech. 37, 96",
}

// Simon1994 gives mean longitudes and elements of the Moon and the planets.
var Simon1994 = Ref{
	Authors: "Simon et al.", Year: 1994,
	Title: "Numerical expressions for precession formulae and mean elements for the Moon and the planets",
	Where: "A&A 282, 663",
}

// ChaprontTouzeChapront1988 is the lunar theory that the Moon's short series
// was cut from.
var ChaprontTouzeChapront1988 = Ref{
	Authors: "Chapront-Touze & Chapront", Year: 1988,
	Title: "ELP 2000-85: a semi-analytical lunar ephemeris adequate for historical times",
	Where: "A&A 190, 342",
}

// Klioner2003 gives light deflection and aberration to a microarcsecond.
var Klioner2003 = Ref{
	Authors: "Klioner", Year: 2003,
	Title: "A practical relativistic model for microarcsecond astrometry in space",
	Where: "AJ 125, 1580", DOI: "10.1086/367593",
}

// UrbanSeidelmann2013 is the Explanatory Supplement.
var UrbanSeidelmann2013 = Ref{
	Authors: "Urban & Seidelmann (eds)", Year: 2013,
	Title: "Explanatory Supplement to the Astronomical Almanac, 3rd edition",
	Where: "University Science Books, Mill Valley",
}

// Kaplan2005 explains the IAU resolutions on time scales and rotation.
var Kaplan2005 = Ref{
	Authors: "Kaplan", Year: 2005,
	Title: "The IAU Resolutions on Astronomical Reference Systems, Time Scales, and Earth Rotation Models",
	Where: "US Naval Observatory Circular 179",
}

// ESA1997 is the Hipparcos catalogue; its first volume has space motion.
var ESA1997 = Ref{
	Authors: "ESA", Year: 1997,
	Title: "The Hipparcos and Tycho Catalogues",
	Where: "ESA SP-1200",
}

// IERS2010 is the Conventions in force.
var IERS2010 = Ref{
	Authors: "Petit & Luzum (eds)", Year: 2010,
	Title: "IERS Conventions (2010)",
	Where: "IERS Technical Note 36, Frankfurt",
}

// IERSBulletinC announces leap seconds, twice a year.
var IERSBulletinC = Ref{
	Authors: "IERS", Title: "Announcement of leap seconds in UTC",
	Where: "Bulletin C, Paris Observatory",
}

// SOFA is the library of standards whose algorithms references were made with,
// in its freely licensed edition ERFA.
var SOFA = Ref{
	Authors: "IAU SOFA Board", Year: 2021,
	Title: "Standards of Fundamental Astronomy, software collection, release 2021-05-12; ERFA 2.0.0 is derived from it",
	Where: "IAU",
}

// EastmanEtAl2010 says what BJD and HJD are and how far apart.
var EastmanEtAl2010 = Ref{
	Authors: "Eastman, Siverd & Gaudi", Year: 2010,
	Title: "Achieving better than 1 minute accuracy in the heliocentric and barycentric Julian dates",
	Where: "PASP 122, 935", DOI: "10.1086/655938",
}

// WrightEastman2014 says what a barycentric correction of velocity needs.
var WrightEastman2014 = Ref{
	Authors: "Wright & Eastman", Year: 2014,
	Title: "Barycentric corrections at 1 cm/s for precise Doppler velocities",
	Where: "PASP 126, 838", DOI: "10.1086/678541",
}

// FairheadBretagnon1990 is TDB - TT.
var FairheadBretagnon1990 = Ref{
	Authors: "Fairhead & Bretagnon", Year: 1990,
	Title: "An analytical formula for the time transformation TB-TT",
	Where: "A&A 229, 240",
}

// EspenakMeeus2006 has polynomials for TT - UT before atomic time.
var EspenakMeeus2006 = Ref{
	Authors: "Espenak & Meeus", Year: 2006,
	Title: "Five Millennium Canon of Solar Eclipses: -1999 to +3000",
	Where: "NASA TP-2006-214141",
}

// IAU2009 is the system of constants that the giants' masses come from.
var IAU2009 = Ref{
	Authors: "Luzum et al.", Year: 2011,
	Title: "The IAU 2009 system of astronomical constants",
	Where: "Celest. Mech. Dyn. Astron. 110, 293", DOI: "10.1007/s10569-011-9352-4",
}

// IAU2012B2 fixes the astronomical unit.
var IAU2012B2 = Ref{
	Authors: "IAU", Year: 2012,
	Title: "Resolution B2: re-definition of the astronomical unit of length",
	Where: "XXVIIIth General Assembly, Beijing",
}

// IAU2015B3 fixes nominal constants of the Sun and the planets.
var IAU2015B3 = Ref{
	Authors: "IAU", Year: 2015,
	Title: "Resolution B3: recommended nominal conversion constants for selected solar and planetary properties",
	Where: "XXIXth General Assembly, Honolulu",
}

// USNOAlmanac defines rise, set and twilight.
var USNOAlmanac = Ref{
	Authors: "US Naval Observatory",
	Title:   "Rise, set, and twilight definitions",
	Where:   "Astronomical Applications Department, Washington",
}

// WGS84 is the ellipsoid that geodetic places refer to.
var WGS84 = Ref{
	Authors: "NIMA", Year: 2000,
	Title: "Department of Defense World Geodetic System 1984, 3rd edition",
	Where: "Technical Report TR8350.2, amendment 1",
}
