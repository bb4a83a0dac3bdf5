package bands

import (
	"fmt"
	"math"
	"strings"
)

// Measure is a magnitude with its one-sigma error. An error of 0, or one that
// is none, counts as not given.
type Measure struct{ Mag, Err float64 }

// Hints is what else is known of a star.
type Hints struct {
	SpType     string     // spectral type, MK; may be empty
	Luminosity Luminosity // what the star is known to be; the spectral type's class goes before
	Emission   bool       // the spectrum or the kind has strong emission lines
	AVMag      float64    // extinction in V, mag, for colours by type; 0 or none: not reddened
}

// Carried is a magnitude and how it was come by.
type Carried struct {
	Mag, Err float64 // one sigma
	Direct   bool    // it was known as it is
	ByType   bool    // a mean colour of giants of the spectral type is in it
	Assumed  bool    // an error of AssumedErr was put to a magnitude without one
	Route    string  // in words, e.g. "V from G and BP-RP 1.23 (scatter 0.030 mag)"
	Source   string  // the works, one after the other
}

// AssumedErr stands in for a missing error of a magnitude. Common practice, no
// source.
const AssumedErr = 0.03

// J, H and K of stars brighter than johnsonBright are of Johnson's system, the
// survey's own being spoilt by their light; beside the relations, which are for
// the survey, they are off by johnsonErr at least, mag. A choice.
const johnsonBright, johnsonErr = 4.0, 0.15

func infraredJHK(b Band) bool { return b == J || b == H || b == K }

// johnson returns the error that a magnitude has as one of the relations'.
func johnson(b Band, m Measure) float64 {
	if infraredJHK(b) && m.Mag < johnsonBright {
		e, _ := errOf(m)
		return math.Max(e, johnsonErr)
	}
	return m.Err
}

// plausible tells whether a magnitude may be one.
func plausible(m float64) bool { return m > -30 && m < 50 }

// colour is BP - RP by one way or another.
type colour struct {
	c, err float64
	how    string
	source string
	byType bool
}

// edge leads from one band to another: to = from + offset.
type edge struct {
	from, to Band
	offset   float64
	variance float64
	words    func() string // made only for the route taken
	source   string
	colour   string // the source of the colour, where that is another
	byType   bool
}

// carrier is one question being answered.
type carrier struct {
	known map[Band]Measure
	want  Band
	hints Hints
	lum   Luminosity
	t     Type
	typed bool // t can be used for the colours of giants
	edges []edge
	why   *Refusal // the most telling refusal so far
}

// Carry returns the magnitude in a band from what is known of a star.
//
//	m_want = m_known + sum of offsets;  err^2 = err_known^2 + sum of scatter^2
//
// Given:
//   - known: magnitudes; those outside -30 to 50 are passed over.
//   - want: the band.
//   - hints: spectral type, luminosity, emission lines, extinction.
//
// Returns:
//   - the magnitude by the route of least error: as listed; by the relations of
//     Gaia photometry, the colour BP - RP being measured, or got from V - I or
//     another pair of bands; by the mean colours of giants of the spectral type.
//   - a [Refusal], whose reason says what stands in the way.
//
// Notes:
//  1. A colour from a pair of bands other than BP and RP solves the same
//     relations for it; their scatter goes through.
//  2. Mean colours of giants are used where the type is one of a giant, or has
//     no luminosity class and the hint says giant; never for composite spectra,
//     whose second star shines in the blue or red.
//  3. Errors of the steps are taken as independent. A known magnitude used
//     both for the level and for the colour makes the error a little too large
//     or too small, at most by its own error.
//  4. For variable stars all magnitudes count as of one moment.
//  5. K of a list is taken for K_s: they agree within 0.05 mag for giants (from
//     memory).
//  6. J, H and K of stars brighter than 4 have an error of 0.15 mag at least
//     when carried from or to, being of Johnson's system.
//  7. Where two ways to BP - RP disagree by more than their errors their weighted
//     mean is taken, its error with the disagreement; a route has one colour.
//
// Source: [cite.RielloEtAl2021]; [cite.ESA1997]; [cite.HealyEtAl2024].
//
// Checked: TestCarry, TestCarryRefuses, TestCarryProperties, FuzzCarry.
func Carry(known map[Band]Measure, want Band, hints Hints) (Carried, error) {
	k := &carrier{known: map[Band]Measure{}, want: want, hints: hints, lum: hints.Luminosity}
	if _, ok := infos[want]; !ok {
		return Carried{}, &Refusal{Reason: UnknownBand, Want: want, Words: fmt.Sprintf("band %q is not one of %s", clip(string(want)), names())}
	}
	for b, m := range known {
		if _, ok := infos[b]; ok && plausible(m.Mag) {
			k.known[b] = m
		}
	}
	if m, ok := k.known[want]; ok {
		e, assumed := errOf(m)
		return Carried{Mag: m.Mag, Err: e, Direct: true, Assumed: assumed,
			Route: string(want) + " as listed" + ifAssumed(assumed, want), Source: "the list"}, nil
	}
	if len(k.known) == 0 {
		return Carried{}, &Refusal{Reason: NoMagnitude, Want: want, Words: fmt.Sprintf("no magnitude is known from which %s could follow", want)}
	}
	if hints.Emission {
		return Carried{}, &Refusal{Reason: Emission, Want: want,
			Words: fmt.Sprintf("%s cannot follow from other bands: emission lines can shift every relation by a magnitude or more", want)}
	}
	k.readType()
	k.byType()
	for b, m := range k.known {
		k.known[b] = Measure{m.Mag, johnson(b, m)}
	}
	if c, ok := oneColour(k.colours()); ok {
		k.byColour(c)
	}
	out, err := k.best()
	if err == nil && infraredJHK(want) && out.Mag < johnsonBright {
		out.Err = math.Max(out.Err, johnsonErr)
	}
	return out, err
}

// readType takes luminosity and usability from the spectral type.
func (k *carrier) readType() {
	if k.hints.SpType == "" {
		return
	}
	t, err := ParseType(k.hints.SpType)
	if err != nil {
		k.refuse(err.(*Refusal))
		return
	}
	if t.Luminosity != UnknownLuminosity {
		k.lum = t.Luminosity
	}
	k.t = t
	k.typed = k.lum == Giant && !t.Composite && t.index() >= 0
}

// refuse keeps the refusal that tells most: those of a relation that was tried
// for the wanted band go before general ones.
func (k *carrier) refuse(r *Refusal) {
	weight := map[Reason]int{NoRelation: 0, BadType: 1, OutsideRange: 2, GiantsOnly: 3, NeedsModel: 4}
	if r.Want != "" && r.Want != k.want {
		return
	}
	if k.why == nil || weight[r.Reason] > weight[k.why.Reason] {
		k.why = r
	}
}

// byType adds the mean colours of giants.
func (k *carrier) byType() {
	if !k.typed {
		return
	}
	for i := range typeColors {
		tc := &typeColors[i]
		v, sd, ok := tc.of(k.t, k.av())
		if !ok {
			if k.want == tc.blue || k.want == tc.red {
				k.refuse(&Refusal{Reason: OutsideRange, Want: k.want, Words: fmt.Sprintf("%s: the mean %s-%s of giants of type %s is not known", k.want, tc.blue, tc.red, k.t)})
			}
			continue
		}
		words := func() string {
			return fmt.Sprintf("%s-%s %.2f of giants of type %s (scatter %.2f mag)", tc.blue, tc.red, v, k.t, sd)
		}
		src := tc.source.String()
		k.edges = append(k.edges, edge{tc.red, tc.blue, v, sd * sd, words, src, "", true}, edge{tc.blue, tc.red, -v, sd * sd, words, src, "", true})
	}
}

// av returns the extinction that reddens mean colours, 0 where it is none.
func (k *carrier) av() float64 {
	if a := k.hints.AVMag; a >= 0 && a < 100 {
		return a
	}
	return 0
}

// best finds the route of least error from what is known to what is wanted.
func (k *carrier) best() (Carried, error) {
	type node struct {
		variance, mag float64
		via           *edge
		start         Band
		done, reached bool
	}
	nodes := map[Band]*node{}
	for _, b := range All {
		n := &node{variance: math.Inf(1)}
		if m, ok := k.known[b]; ok {
			e, _ := errOf(m)
			n.variance, n.mag, n.start, n.reached = e*e, m.Mag, b, true
		}
		nodes[b] = n
	}
	for range All { // Dijkstra's
		var at Band
		for _, b := range All {
			if n := nodes[b]; n.reached && !n.done && (at == "" || n.variance < nodes[at].variance) {
				at = b
			}
		}
		if at == "" || at == k.want {
			break
		}
		from := nodes[at]
		from.done = true
		for i := range k.edges {
			e := &k.edges[i]
			to := nodes[e.to]
			if v := from.variance + e.variance; e.from == at && v < to.variance {
				*to = node{variance: v, mag: from.mag + e.offset, via: e, start: from.start, reached: true}
			}
		}
	}
	end := nodes[k.want]
	if !end.reached {
		return Carried{}, k.refusal()
	}
	out := Carried{Mag: end.mag, Err: math.Sqrt(end.variance)}
	var words []string
	for n := end; n.via != nil; n = nodes[n.via.from] {
		words = append([]string{n.via.words()}, words...)
		out.Source = joined(joined(n.via.source, n.via.colour), out.Source)
		out.ByType = out.ByType || n.via.byType
	}
	_, out.Assumed = errOf(k.known[end.start])
	out.Route = fmt.Sprintf("%s from %s: %s%s", k.want, end.start, strings.Join(words, ", "), ifAssumed(out.Assumed, end.start))
	if !plausible(out.Mag) || !(out.Err < 50) {
		return Carried{}, &Refusal{Reason: NoMagnitude, Want: k.want, Words: fmt.Sprintf("%s: the magnitudes known are no magnitudes of a star", k.want)}
	}
	return out, nil
}

// refusal says what stood in the way.
func (k *carrier) refusal() *Refusal {
	if k.lum == WhiteDwarf && (k.why == nil || k.why.Reason == NoRelation) {
		return &Refusal{Reason: NeedsModel, Want: k.want, Words: fmt.Sprintf("%s of a white dwarf: no relation reaches it from what is known; its models give it", k.want)}
	}
	if k.why != nil {
		k.why.Want = k.want
		return k.why
	}
	return &Refusal{Reason: NoRelation, Want: k.want, Words: fmt.Sprintf("%s: no published relation leads to it from what is known", k.want)}
}

// errOf returns the error of a magnitude, and whether it is assumed.
func errOf(m Measure) (float64, bool) {
	if m.Err > 0 && m.Err < 10 {
		return m.Err, false
	}
	return AssumedErr, true
}

func ifAssumed(yes bool, b Band) string {
	if !yes {
		return ""
	}
	return fmt.Sprintf("; error of %s %.2f mag assumed", b, AssumedErr)
}

// joined writes two sources, once if they are one.
func joined(a, b string) string {
	switch {
	case a == "" || strings.Contains(b, a):
		return b
	case b == "" || strings.Contains(a, b):
		return a
	}
	return a + "; " + b
}

func names() string {
	var out []string
	for _, b := range All {
		out = append(out, string(b))
	}
	return strings.Join(out, " ")
}
