package ide

import (
	"math"
	"strconv"
	"strings"

	"triodeck/analysis/quantity"
)

// prefixed are the units that take a decimal prefix without a second thought.
var prefixed = map[string]bool{
	"m": true, "V": true, "A": true, "Ω": true, "F": true, "H": true, "S": true, "s": true, "W": true,
	"A/V²": true, "A/m²": true, "F/m": true, "F/m²": true, "Ω/sq": true,
}

// exact spells a value out to six digits, without trailing zeros: "180 nm".
func exact(v float64, unit string) string {
	switch a := math.Abs(v); {
	case unit == "m²":
		// A prefix would be squared with the unit: 1 pm² is not 1 p times 1 m².
		return trimmed(v*1e12) + " µm²"
	case unit != "" && !prefixed[unit]:
		return trimmed(v) + " " + unit
	case unit == "" && (a == 0 || a >= 1e-3 && a < 1e6):
		return trimmed(v)
	}
	text := quantity.Digits(v, unit, 6)
	number, rest, ok := strings.Cut(text, " ")
	if !ok {
		return text
	}
	if strings.Contains(number, ".") && !strings.Contains(number, "e") {
		number = strings.TrimRight(strings.TrimRight(number, "0"), ".")
	}
	return number + " " + rest
}

func trimmed(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }

// hoverNumber spells a number out, with its unit where that is known.
func hoverNumber(m mark) string {
	text := code(m.text) + " = " + exact(m.num, m.unit)
	if plain := bare(m.num); plain != m.text {
		text += " (" + plain + ")"
	}
	if bigM(m.text) {
		text += "\n\n`M` means milli in SPICE, in either case; mega is written `MEG`."
	}
	return text
}

// bare writes a value without prefix or unit: "4700", "0.45", "2.8e-4".
func bare(v float64) string {
	if a := math.Abs(v); a == 0 || a >= 1e-3 && a < 1e6 || math.IsInf(a, 0) || math.IsNaN(a) {
		return strconv.FormatFloat(v, 'f', -1, 64)
	}
	mantissa, exp, _ := strings.Cut(strconv.FormatFloat(v, 'e', -1, 64), "e")
	sign := strings.TrimSuffix(exp[:1], "+")
	return mantissa + "e" + sign + strings.TrimLeft(exp[1:], "0")
}

// bigM says that a number carries a capital M that someone may have meant as mega.
func bigM(text string) bool {
	i := strings.IndexFunc(text, func(r rune) bool {
		return !strings.ContainsRune("0123456789.+-eE", r)
	})
	if i < 0 || text[i] != 'M' {
		return false
	}
	rest := strings.ToLower(text[i:])
	return !strings.HasPrefix(rest, "meg") && !strings.HasPrefix(rest, "mil")
}
