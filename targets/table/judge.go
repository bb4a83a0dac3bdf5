package table

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"evenfall/targets"
)

// finish settles kind and epoch of a row, and what only the row as a whole
// can show to be wrong.
func (l *list) finish(r row, t *targets.Target) {
	l.kind(r, t)
	if c, ok := l.at(r, "plx_mas"); ok && t.Place.Plx.Known && t.Place.Plx.Value < 0 {
		l.warn(l.where(c), "plx_mas", c.text, "negative; kept, but no parallax is applied", "")
	}
	motion := math.Hypot(t.Place.PMRA.Value, t.Place.PMDec.Value) / 1000
	if !t.Place.EpochGiven && motion*16 > 1 {
		l.warn(targets.Where{File: l.name, Line: r.line}, "epoch_jyr", "",
			fmt.Sprintf("empty for %s, which moves %.1f arcsec a year: 2000.0 assumed", t.Name, motion),
			"fill in the year that the position is for, e.g. 2016.0")
	}
	if t.Var.MagMax.Known && t.Var.MagMin.Known && t.Var.MagMax.Value > t.Var.MagMin.Value {
		c, _ := l.at(r, "mag_max")
		l.problem(l.where(c), "mag_max", c.text, "fainter than mag_min; both are left out", "mag_max is the brightest, the smaller number")
		t.Var.MagMax, t.Var.MagMin = targets.Measure{}, targets.Measure{}
	}
}

// kind reads the kind, or infers it from other columns.
func (l *list) kind(r row, t *targets.Target) {
	c, ok := l.at(r, "kind")
	if !ok {
		t.Kind, t.KindInferred = infer(t), true
		return
	}
	word, note, _ := strings.Cut(l.clean(c), ":")
	t.KindNote = strings.TrimSpace(note)
	word = strings.ToLower(strings.TrimSpace(word))
	for _, k := range targets.Kinds {
		if string(k) == word {
			t.Kind = k
			return
		}
	}
	t.Kind = targets.Other
	l.problem(l.where(c), "kind", c.text, "no such kind; other is taken",
		"use one of giant, lpv, postagb, pn, wd, interacting, standard, other, or leave it empty")
}

var (
	dwarfType    = regexp.MustCompile(`^[dD][ABCOQZX]`)
	giantType    = regexp.MustCompile(`^[GKM]\d?(\.\d)?[-+]?.*III|^(C|S|N|R)[\d:,-]|^C$`)
	lpvType      = regexp.MustCompile(`^(M|SR[ABCD]?|L[BC]?|SRS|LPV)(:|\+|/|$)`)
	postAGBType  = regexp.MustCompile(`^RV[AB]?(:|$)`)
	dwarfVarType = regexp.MustCompile(`^ZZ`)
	interactType = regexp.MustCompile(`^(U[GGSUWZ]|UG|N[ABCRL]?|NL|AM|ZAND|XM|CV|DQ|ISB|IBWD)`)
)

// infer guesses the kind from what else a row says: catalogue type first.
func infer(t *targets.Target) targets.Kind {
	v, sp := t.Var.Type, t.Physics.SpType
	n := &t.Nebula
	switch {
	case n.DiamArcsec.Known || n.LogFHa.Known || n.LogFHb.Known || n.LogF5007.Known:
		return targets.PN
	case lpvType.MatchString(v):
		return targets.LPV
	case postAGBType.MatchString(v):
		return targets.PostAGB
	case dwarfVarType.MatchString(v):
		return targets.WD
	case interactType.MatchString(v), strings.HasPrefix(v, "E") && dwarfType.MatchString(sp):
		return targets.Interacting
	case dwarfType.MatchString(sp):
		return targets.WD
	case giantType.MatchString(sp):
		return targets.Giant
	}
	return targets.Other
}

// checkHours looks for right ascensions that are hours in a column of degrees:
// a wrong place is worse than none, so then no row is loaded.
func (l *list) checkHours() {
	i, ok := l.by["ra_deg"]
	if !ok {
		return
	}
	n, lo, hi := 0, math.Inf(1), math.Inf(-1)
	for _, r := range l.rows {
		c, ok := l.at(r, "ra_deg")
		if !ok {
			continue
		}
		v, wrong, _ := parseNumber(c.text)
		if wrong != "" {
			continue
		}
		n, lo, hi = n+1, math.Min(lo, v), math.Max(hi, v)
	}
	const enough, spread = 5, 6
	if n >= enough && lo >= 0 && hi < 24 && hi-lo > spread {
		l.inHours = true
		l.problem(l.where(l.header.cells[i]), "ra_deg", "",
			fmt.Sprintf("all %d values are under 24: hours? no row is loaded", n), "multiply by 15, or write HH MM SS in a column ra")
	}
}

// after looks at the list as a whole.
func (l *list) after() {
	if len(l.rows) == 0 {
		l.problem(targets.Where{File: l.name}, "", "", "no targets below the header", "add one line for each target")
	}
	l.doubles("name", func(t *targets.Target) string { return t.Name })
	l.doubles("id", func(t *targets.Target) string { return t.ID })
	l.checkMotions()
}

func (l *list) doubles(what string, of func(*targets.Target) string) {
	first := map[string]int{}
	for i := range l.targets {
		t := &l.targets[i]
		key := targets.Key(of(t))
		if key == "" {
			continue
		}
		if j, twice := first[key]; twice {
			l.warn(t.At, what, of(t), fmt.Sprintf("also on line %d", l.targets[j].At.Line), "give each target a "+what+" of its own")
			continue
		}
		first[key] = i
	}
}

// checkMotions looks for proper motions in arcseconds a year: nearby stars
// that all move by thousandths of what nearby stars do.
func (l *list) checkMotions() {
	near, slow := 0, 0
	for i := range l.targets {
		p := &l.targets[i].Place
		if !p.PMRA.Known || !p.PMDec.Known || !p.Plx.Known || p.Plx.Value < 20 {
			continue
		}
		near++
		if math.Hypot(p.PMRA.Value, p.PMDec.Value) < 12 {
			slow++
		}
	}
	if i, ok := l.by["pmra_masyr"]; ok && near >= 3 && slow == near {
		l.problem(l.where(l.header.cells[i]), "pmra_masyr", "",
			fmt.Sprintf("all %d stars within 50 pc move under 12 mas a year: arcsec? the motions are left out", near),
			"write milliarcseconds a year")
		for i := range l.targets {
			l.targets[i].Place.PMRA, l.targets[i].Place.PMDec = targets.Measure{}, targets.Measure{}
		}
	}
}
