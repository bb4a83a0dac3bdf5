package table

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"evenfall/astro"
)

// nulls are the spellings of "no value" that are taken without a word.
var nulls = map[string]bool{"": true, "null": true, "nan": true, "--": true, "-": true, "n/a": true, "none": true}

func isNull(s string) bool { return nulls[strings.ToLower(s)] }

// parseNumber reads a decimal number.
//
// Returns:
//   - what is wrong and what to write, where it is none.
func parseNumber(s string) (v float64, wrong, fix string) {
	t := strings.ReplaceAll(s, "−", "-")
	v, err := strconv.ParseFloat(t, 64)
	switch {
	case err == nil && !math.IsNaN(v) && !math.IsInf(v, 0) && !strings.ContainsAny(t, "xXpP_"):
		return v, "", ""
	case strings.Contains(t, ",") && !strings.Contains(t, "."):
		return 0, "a comma is no decimal point", "write " + strings.Replace(t, ",", ".", 1)
	}
	return 0, "not a number", "write a decimal number, or leave it empty where unknown"
}

// LastDigitHalf returns half a unit of the last printed digit of a number: the
// error assumed where none is given. 0 where the text is no number.
//
// Checked: TestErrorsAssumedFromDigits.
func LastDigitHalf(text string) float64 {
	mantissa, exponent, _ := strings.Cut(strings.ToLower(strings.TrimSpace(text)), "e")
	if _, err := strconv.ParseFloat(mantissa, 64); err != nil {
		return 0
	}
	e := 0
	if exponent != "" {
		var err error
		if e, err = strconv.Atoi(exponent); err != nil {
			return 0
		}
	}
	if _, decimals, ok := strings.Cut(mantissa, "."); ok {
		e -= len(decimals)
	}
	return 0.5 * math.Pow(10, float64(e))
}

// parseAngle reads a sexagesimal or decimal angle. Sexagesimal right
// ascensions are hours, decimal ones degrees.
func parseAngle(s string, hours bool) (a astro.Angle, wrong string) {
	t := strings.ReplaceAll(strings.TrimSpace(s), "−", "-")
	if v, err := strconv.ParseFloat(t, 64); err == nil {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return a, "not a number"
		}
		return astro.Deg(v), ""
	}
	sign, body := 1.0, t
	if strings.HasPrefix(t, "-") || strings.HasPrefix(t, "+") {
		if t[0] == '-' {
			sign = -1
		}
		body = t[1:]
	}
	parts := strings.FieldsFunc(body, func(r rune) bool { return strings.ContainsRune(" :hmsdHMSD°'\"′″", r) })
	if len(parts) < 2 || len(parts) > 3 {
		return a, "not an angle"
	}
	total, scale := 0.0, 1.0
	for i, p := range parts {
		v, err := strconv.ParseFloat(p, 64)
		if err != nil || v < 0 || math.IsInf(v, 0) || math.IsNaN(v) || strings.ContainsAny(p, "eExXpP_+-") {
			return a, "not an angle"
		}
		if i > 0 && v >= 60 {
			return a, fmt.Sprintf("%s in place of minutes or seconds", p)
		}
		if i < len(parts)-1 && v != math.Trunc(v) {
			return a, "a fraction before the last part"
		}
		total += v * scale
		scale /= 60
	}
	if hours && !strings.ContainsAny(body, "dD°") {
		return astro.Hours(sign * total), ""
	}
	return astro.Deg(sign * total), ""
}
