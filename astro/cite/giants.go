package cite

// Giants whose stage is known, and where giants of a stage stand.

// ElsworthEtAl2019 has the stages of giants by asteroseismology.
var ElsworthEtAl2019 = Ref{
	Authors: "Elsworth et al.", Year: 2019,
	Title: "Insights from the APOKASC determination of the evolutionary state of red-giant stars by consolidation of different methods",
	Where: "MNRAS 489, 4641", DOI: "10.1093/mnras/stz2356",
}
