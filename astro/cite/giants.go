package cite

// Giants whose stage is known, and where giants of a stage stand.

// ElsworthEtAl2019 has the stages of giants by asteroseismology.
var ElsworthEtAl2019 = Ref{
	Authors: "Elsworth et al.", Year: 2019,
	Title: "Insights from the APOKASC determination of the evolutionary state of red-giant stars by consolidation of different methods",
	Where: "MNRAS 489, 4641", DOI: "10.1093/mnras/stz2356",
}

// LebzelterEtAl2018 tells carbon-rich from oxygen-rich long-period variables
// by Gaia and infrared photometry.
var LebzelterEtAl2018 = Ref{
	Authors: "Lebzelter et al.", Year: 2018,
	Title: "A new method to identify subclasses among AGB stars using Gaia and 2MASS photometry",
	Where: "A&A 616, L13", DOI: "10.1051/0004-6361/201833615",
}

// GeierEtAl2019 is a catalogue of hot subdwarfs with their absolute magnitudes.
var GeierEtAl2019 = Ref{
	Authors: "Geier et al.", Year: 2019,
	Title: "The population of hot subdwarf stars studied with Gaia. II. The Gaia DR2 catalogue of hot subluminous stars",
	Where: "A&A 621, A38", DOI: "10.1051/0004-6361/201834236",
}

// WhitelockEtAl2008 is the period-luminosity relation of Miras of the Galaxy.
var WhitelockEtAl2008 = Ref{
	Authors: "Whitelock, Feast & van Leeuwen", Year: 2008,
	Title: "AGB variables and the Mira period-luminosity relation",
	Where: "MNRAS 386, 313", DOI: "10.1111/j.1365-2966.2008.13032.x",
}
