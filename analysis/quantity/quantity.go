// Package quantity writes numbers the way the trade reads them: engineering
// prefixes and units. Its one invariant: a value that is not finite never comes
// out as a number.
package quantity

import (
	"math"
	"strconv"
	"strings"
)

var prefixes = []struct {
	exp    int
	symbol string
}{
	{15, "P"}, {12, "T"}, {9, "G"}, {6, "M"}, {3, "k"}, {0, ""},
	{-3, "m"}, {-6, "µ"}, {-9, "n"}, {-12, "p"}, {-15, "f"}, {-18, "a"},
}

// Format gives v with the prefix and unit, to three significant digits:
// 0.0089 and "S" give "8.90 mS", 112.3 and "Ω" give "112 Ω", 0 and "V" give
// "0 V". An unlimited value reads "∞", an undefined one "–".
func Format(v float64, unit string) string { return Digits(v, unit, 3) }

// Digits is Format to n significant digits, n from 1 to 15.
func Digits(v float64, unit string, n int) string {
	switch {
	case math.IsNaN(v):
		return "–"
	case math.IsInf(v, 1):
		return "∞"
	case math.IsInf(v, -1):
		return "-∞"
	case v == 0:
		return strings.TrimSpace("0 " + unit)
	}
	// Round first, so that 999.96 becomes 1.00 k and not 1000.
	text := strconv.FormatFloat(math.Abs(v), 'e', n-1, 64)
	mantissa, expText, _ := strings.Cut(text, "e")
	exp, _ := strconv.Atoi(expText)
	p := prefixes[len(prefixes)-1]
	for _, q := range prefixes {
		if exp >= q.exp {
			p = q
			break
		}
	}
	if exp < p.exp || exp > 17 {
		return strings.TrimSpace(strconv.FormatFloat(v, 'e', n-1, 64) + " " + unit)
	}
	digits := strings.Replace(mantissa, ".", "", 1)
	whole := exp - p.exp + 1
	for len(digits) < whole {
		digits += "0"
	}
	out := digits[:whole]
	if whole < len(digits) {
		out += "." + digits[whole:]
	}
	if v < 0 {
		out = "-" + out
	}
	if p.symbol == "" && unit == "" {
		return out
	}
	return out + " " + p.symbol + unit
}

// Volts is Format for voltages below a kilovolt, in volts to the millivolt where
// that is readable, so that bias columns line up: "1.800 V", "-45 mV", "0 V".
func Volts(v float64) string {
	if a := math.Abs(v); a >= 0.1 && a < 1000 {
		return strconv.FormatFloat(v, 'f', 3, 64) + " V"
	}
	return Format(v, "V")
}
