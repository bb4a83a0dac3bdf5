package cite

// Elements of periodic stars and how far they can be trusted.

// TurnerEtAl2009 measures the scatter of single cycles of long-period
// variables.
var TurnerEtAl2009 = Ref{
	Authors: "Turner et al.", Year: 2009,
	Title: "Random period fluctuations of Mira, semiregular and RV Tauri variables",
	Where: "arXiv:0907.2818",
}
