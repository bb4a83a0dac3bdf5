package cite

// Where telescopes cannot point.

// Borkowski1987 is the zone about the zenith that an alt-azimuth mount cannot
// follow through.
var Borkowski1987 = Ref{
	Authors: "Borkowski", Year: 1987,
	Title: "Near zenith tracking limits for altitude-azimuth telescopes",
	Where: "Acta Astronomica 37, 79",
}
