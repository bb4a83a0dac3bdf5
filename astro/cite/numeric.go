package cite

// Numerical methods.

// Brent1973 has the root finder and the minimiser.
var Brent1973 = Ref{
	Authors: "Brent", Year: 1973,
	Title: "Algorithms for Minimization without Derivatives",
	Where: "Prentice-Hall, Englewood Cliffs",
}

// FritschCarlson1980 has the monotone cubic.
var FritschCarlson1980 = Ref{
	Authors: "Fritsch & Carlson", Year: 1980,
	Title: "Monotone piecewise cubic interpolation",
	Where: "SIAM J. Numer. Anal. 17, 238", DOI: "10.1137/0717021",
}

// HyndmanFan1996 sorts out the definitions of a sample's quantile.
var HyndmanFan1996 = Ref{
	Authors: "Hyndman & Fan", Year: 1996,
	Title: "Sample quantiles in statistical packages",
	Where: "Am. Stat. 50, 361", DOI: "10.1080/00031305.1996.10473566",
}

// AbramowitzStegun1964 is the handbook of functions, integrals and
// distributions.
var AbramowitzStegun1964 = Ref{
	Authors: "Abramowitz & Stegun (eds)", Year: 1964,
	Title: "Handbook of Mathematical Functions",
	Where: "National Bureau of Standards, Applied Mathematics Series 55",
}

// GolubVanLoan1996 has least squares by reflections.
var GolubVanLoan1996 = Ref{
	Authors: "Golub & Van Loan", Year: 1996,
	Title: "Matrix Computations, 3rd edition",
	Where: "Johns Hopkins University Press, Baltimore",
}
