package targets

// Population is which stars of the Galaxy a judgement takes a giant for before
// it looks at it.
type Population string

// The populations.
const (
	PopulationDisc  Population = "disc"  // all ages to 12 Gyr
	PopulationField Population = "field" // older than 2 Gyr: giants of the field
	PopulationOld   Population = "old"   // 9 to 12.5 Gyr: thick disc and halo
)

// Populations lists them.
var Populations = []Population{PopulationDisc, PopulationField, PopulationOld}

// Words names it for people.
func (p Population) Words() string {
	switch p {
	case PopulationDisc:
		return "disc of all ages"
	case PopulationOld:
		return "thick disc or halo"
	}
	return "field older than 2 Gyr"
}
