package cite

// Planning a night: putting takes in order, and what no order can exceed.

// Shaw1998 leaves out a part of a plan and fills it anew.
var Shaw1998 = Ref{
	Authors: "Shaw", Year: 1998,
	Title: "Using constraint programming and local search methods to solve vehicle routing problems",
	Where: "Principles and Practice of Constraint Programming, LNCS 1520, 417",
}

// RopkePisinger2006 chooses among several ways of leaving out and filling.
var RopkePisinger2006 = Ref{
	Authors: "Ropke & Pisinger", Year: 2006,
	Title: "An adaptive large neighborhood search heuristic for the pickup and delivery problem with time windows",
	Where: "Transportation Science 40, 455",
}

// KirkpatrickEtAl1983 accepts a slightly worse plan early in a search.
var KirkpatrickEtAl1983 = Ref{
	Authors: "Kirkpatrick, Gelatt & Vecchi", Year: 1983,
	Title: "Optimization by simulated annealing",
	Where: "Science 220, 671",
}

// Fisher1981 puts prices on constraints to bound an integer problem.
var Fisher1981 = Ref{
	Authors: "Fisher", Year: 1981,
	Title: "The Lagrangian relaxation method for solving integer programming problems",
	Where: "Management Science 27, 1",
}

// Polyak1969 is the length of a step along a subgradient.
var Polyak1969 = Ref{
	Authors: "Polyak", Year: 1969,
	Title: "Minimization of unsmooth functionals",
	Where: "USSR Computational Mathematics and Mathematical Physics 9, 14",
}

// BaldacciEtAl2011 remembers only nearby repeats along a path.
var BaldacciEtAl2011 = Ref{
	Authors: "Baldacci, Mingozzi & Roberti", Year: 2011,
	Title: "New route relaxation and pricing strategies for the vehicle routing problem",
	Where: "Operations Research 59, 1269",
}

// RighiniSalani2008 lets the memory of a path grow where a repeat was found.
var RighiniSalani2008 = Ref{
	Authors: "Righini & Salani", Year: 2008,
	Title: "New dynamic programming algorithms for the resource constrained elementary shortest path problem",
	Where: "Networks 51, 155",
}

// Marsaglia2003 is the generator of numbers that only look random.
var Marsaglia2003 = Ref{
	Authors: "Marsaglia", Year: 2003,
	Title: "Xorshift RNGs",
	Where: "Journal of Statistical Software 8(14), 1",
}
