// Package cite lists the published works that the program's figures rest on,
// each once, so that a formula's comment, a screen and the manual name the same
// source in the same words. A comment cites a work in brackets by the
// variable's name; the architecture test sees to it that every work so named is
// here and that every work here is named somewhere. The package computes
// nothing and judges no work.
package cite

import (
	"strconv"
	"strings"
)

// Ref is one published work. The zero value is no work at all.
type Ref struct {
	Authors string // "Krisciunas & Schaefer"; "et al." from four on
	Year    int    // of publication; 0 for a series without one
	Title   string
	Where   string // journal, volume and page; publisher, for a book
	DOI     string // without "https://doi.org/"; empty where there is none or it is not certain
}

// String writes the work as one line, e.g. "Krisciunas & Schaefer 1991, PASP
// 103, 1033". The zero value gives an empty string.
func (r Ref) String() string {
	head := r.Authors
	if r.Year != 0 {
		head = strings.TrimSpace(head + " " + strconv.Itoa(r.Year))
	}
	switch {
	case head == "":
		return r.Where
	case r.Where == "":
		return head
	}
	return head + ", " + r.Where
}

// Full writes the work with its title and DOI, for a list of sources.
func (r Ref) Full() string {
	s := r.String()
	if r.Title != "" {
		s += ": " + r.Title
	}
	if r.DOI != "" {
		s += ", doi:" + r.DOI
	}
	return s
}

// IsZero tells whether the reference names nothing.
func (r Ref) IsZero() bool { return r == Ref{} }
