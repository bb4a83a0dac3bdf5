package stage

import "evenfall/targets"

// branchPerClump returns the stars of the giant branch per magnitude at the
// brightness of the clump for each star in it, from the time that single stars
// of a population spend there.
//
//	0.135 disc of all ages, 0.21 older than 2 Gyr, 0.29 for 9 to 12.5 Gyr
//
// Source: [cite.HurleyPolsTout2000], masses by [cite.Kroupa2001], constant
// star formation.
//
// Checked: TestStudyGiant: a giant of the old stars is likelier of the branch.
func branchPerClump(p targets.Population) float64 {
	switch p {
	case targets.PopulationDisc:
		return 0.135
	case targets.PopulationOld:
		return 0.29
	}
	return rgbPerClump
}
