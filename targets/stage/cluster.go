package stage

import (
	"fmt"
	"math"

	"evenfall/astro/cite"
	"evenfall/astro/numeric"
	"evenfall/targets"
)

// clusterAges are ages of clusters whose evolved stars are much observed, Gyr;
// from memory, not checked against a publication.
var clusterAges = map[string]float64{
	"pleiades": 0.12, "m45": 0.12, "hyades": 0.7, "praesepe": 0.7, "m44": 0.7, "comaber": 0.6, "ngc752": 1.5, "ngc7789": 1.6,
	"ngc6811": 1.0, "ngc6819": 2.4, "m67": 4.0, "ngc2682": 4.0, "ngc188": 6.5, "ngc6791": 8.3, "ngc2099": 0.5, "m37": 0.5,
	"47tuc": 12, "ngc104": 12, "m4": 12.2, "m13": 12, "m3": 12, "m5": 12, "m15": 12.7, "m92": 12.7, "m22": 12.6, "ngc6397": 12.8,
	"omegacen": 12, "omecen": 12, "ngc5139": 12,
}

// generation is what a cluster's age makes of its giants.
type generation struct {
	ageGyr     float64
	turnoff    float64 // birth mass of the stars that die now, Msun
	clumpShare float64 // time in core helium burning for each unit on the giant branch above 10 Lsun
}

// generations works out what ages make of giants, once for all clusters.
func (m *Models) generations() map[string]generation {
	out := map[string]generation{}
	byAge := map[float64]generation{}
	for name, age := range clusterAges {
		g, ok := byAge[age]
		if !ok {
			g = m.generation(age)
			byAge[age] = g
		}
		out[name] = g
	}
	return out
}

// generation follows the star that dies at an age.
func (m *Models) generation(ageGyr float64) generation {
	const lightest, heaviest, branchFrom = 0.7, 7.5, 1.0
	g := generation{ageGyr: ageGyr, clumpShare: math.NaN()}
	mass, err := numeric.Root(func(x float64) float64 {
		return math.Log(m.lifetimeYr(x) / (1e9 * ageGyr))
	}, lightest, heaviest, 1e-3)
	if err != nil {
		return g
	}
	g.turnoff = mass
	tr, err := m.solar().Track(mass, windFactor)
	if err != nil {
		return g
	}
	branch, clump := 0.0, 0.0
	for i := 1; i < len(tr.Points); i++ {
		p, dt := &tr.Points[i], tr.Points[i].AgeMyr-tr.Points[i-1].AgeMyr
		switch p.Phase.Stage(mass) {
		case targets.RGB:
			if p.LogL > branchFrom {
				branch += dt
			}
		case targets.RC, targets.HB:
			clump += dt
		}
	}
	if branch > 0 && clump > 0 {
		g.clumpShare = clump / branch
	}
	return g
}

// inCluster weighs the membership of a cluster of known age: how long its
// giants burn helium for each year on the giant branch, against the field.
//
// Source: [cite.HurleyPolsTout2000]; ages of clusters from memory, not checked
// against a publication.
//
// Checked: TestCluster.
func (m *Models) inCluster(t *targets.Target, s *sight) (factor, bool) {
	if t.Physics.Cluster == "" || !s.giant || t.Kind == targets.WD || t.Kind == targets.PN {
		return factor{}, false
	}
	g, ok := m.clusters()[targets.Key(t.Physics.Cluster)]
	if !ok || math.IsNaN(g.clumpShare) {
		return factor{}, false
	}
	field := timeShares.weight[targets.RC] / timeShares.weight[targets.RGB]
	return factor{what: fmt.Sprintf("member of %s, %.2g Gyr: giants of %.1f Msun spend %.1f years in the clump for one on the branch, in the field %.1f",
		t.Physics.Cluster, g.ageGyr, g.turnoff, g.clumpShare, field), source: cite.HurleyPolsTout2000.String() + "; age " + memory, rest: 1,
		weight: shares{targets.RC: g.clumpShare / field, targets.RGB: 1}}, true
}

// ofCluster adds what a cluster's age says of a white dwarf in it: the star
// that it was.
func (m *Models) ofCluster(t *targets.Target, coolingGyr float64, st *Study) {
	g, ok := m.clusters()[targets.Key(t.Physics.Cluster)]
	if !ok || !(coolingGyr > 0) {
		return
	}
	lived := g.ageGyr - coolingGyr
	if lived <= 0 {
		st.Notes = append(st.Notes, fmt.Sprintf("contradiction: it has cooled for %.2g Gyr, longer than %s is old (%.2g Gyr, %s)", coolingGyr, t.Physics.Cluster, g.ageGyr, memory))
		return
	}
	if o := m.generation(lived); o.turnoff > 0 {
		lo, hi := m.generation(lived*1.15).turnoff, m.generation(lived*0.85).turnoff
		if lo > 0 && hi > 0 {
			st.add("progenitor_cluster_msun", "initial mass by the cluster's age", "Msun", o.turnoff, lo, hi,
				fmt.Sprintf("life of %.2g Gyr, the age of %s less the cooling age; 15 %% of it taken as its error", lived, t.Physics.Cluster),
				cite.HurleyPolsTout2000.String()+"; age "+memory)
		}
	}
}
