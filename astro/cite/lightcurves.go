package cite

// Light curves: periods from uneven data, forecasts and how they are scored.

// ZechmeisterKuerster2009 has the periodogram with a floating mean and errors.
var ZechmeisterKuerster2009 = Ref{
	Authors: "Zechmeister & Kürster", Year: 2009,
	Title: "The generalised Lomb-Scargle periodogram. A new formalism for the floating-mean and Keplerian periodograms",
	Where: "A&A 496, 577", DOI: "10.1051/0004-6361:200811296",
}

// Baluev2008 is how often noise alone makes so high a peak.
var Baluev2008 = Ref{
	Authors: "Baluev", Year: 2008,
	Title: "Assessing the statistical significance of periodogram peaks",
	Where: "MNRAS 385, 1279", DOI: "10.1111/j.1365-2966.2008.12689.x",
}

// MontgomeryODonoghue1999 has the errors of a fitted sine.
var MontgomeryODonoghue1999 = Ref{
	Authors: "Montgomery & O'Donoghue", Year: 1999,
	Title: "A derivation of the errors for least squares fitting to time series data",
	Where: "Delta Scuti Star Newsletter 13, 28",
}

// Kalman1960 is the update of a linear state by a measurement.
var Kalman1960 = Ref{
	Authors: "Kalman", Year: 1960,
	Title: "A new approach to linear filtering and prediction problems",
	Where: "J. Basic Eng. 82, 35", DOI: "10.1115/1.3662552",
}

// ChenLiu2000 runs a linear filter in each of many guesses at the rest.
var ChenLiu2000 = Ref{
	Authors: "Chen & Liu", Year: 2000,
	Title: "Mixture Kalman filters",
	Where: "J. R. Stat. Soc. B 62, 493", DOI: "10.1111/1467-9868.00246",
}

// UhlenbeckOrnstein1930 is the drift that grows with time and saturates.
var UhlenbeckOrnstein1930 = Ref{
	Authors: "Uhlenbeck & Ornstein", Year: 1930,
	Title: "On the theory of the Brownian motion",
	Where: "Phys. Rev. 36, 823", DOI: "10.1103/PhysRev.36.823",
}

// GneitingRaftery2007 has the score of a forecast that is a distribution.
var GneitingRaftery2007 = Ref{
	Authors: "Gneiting & Raftery", Year: 2007,
	Title: "Strictly proper scoring rules, prediction, and estimation",
	Where: "J. Am. Stat. Assoc. 102, 359", DOI: "10.1198/016214506000001437",
}
