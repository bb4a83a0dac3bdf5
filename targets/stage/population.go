package stage

// Population is which stars of the Galaxy a judgement takes a giant for, before
// it looks at it: how many of the giant branch there are at the brightness of
// the clump for each star of the clump.
type Population string

// The populations.
const (
	Disc  Population = "disc"  // all ages to 12 Gyr
	Field Population = "field" // older than 2 Gyr: giants of the field
	Old   Population = "old"   // 9 to 12.5 Gyr: thick disc and halo
)

// Populations lists them.
var Populations = []Population{Disc, Field, Old}

// branchPerClump returns the stars of the giant branch per magnitude at the
// brightness of the clump for each star in it, from the time that single stars
// spend there.
//
// Source: [cite.HurleyPolsTout2000], masses by [cite.Kroupa2001], constant
// star formation.
func (p Population) branchPerClump() float64 {
	switch p {
	case Disc:
		return 0.135
	case Old:
		return 0.29
	}
	return rgbPerClump
}

// String names it for people.
func (p Population) String() string {
	switch p {
	case Disc:
		return "disc of all ages"
	case Old:
		return "thick disc or halo"
	}
	return "field older than 2 Gyr"
}
