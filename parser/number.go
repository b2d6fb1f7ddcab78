package parser

import (
	"math"
	"strconv"
	"strings"
)

// Number is a number as SPICE writes it: digits, a scale suffix, a unit.
type Number struct {
	Value  float64 // SI, suffix applied, correctly rounded
	Suffix string  // as spelt: "u", "MEG", "µ"; empty if none
	Unit   string  // as spelt: "F", "ohm"; not interpreted
}

// ParseNumber reads a number: `2u`, `1e-9`, `10kohm`, `4k7`, `.18u`, `1.E-6`,
// `1e+06u`. Suffixes are t g meg k m u µ n p f a x mil in either case, so `1F` is
// a femto and `1M` a milli, as in SPICE. It is false if s is anything else, or too
// large for a float64.
func ParseNumber(s string) (Number, bool) {
	n, _, size := scanNumber(s, true)
	return n, size == len(s) && size > 0
}

// scanNumber reads the longest number at the start of s; size is 0 if there is
// none. inset tells that the suffix stands in the place of the point (`4k7`). Signed
// allows a leading sign; in an expression that is an operator.
func scanNumber(s string, signed bool) (n Number, inset bool, size int) {
	d := decimal{text: s}
	if signed && s != "" && (s[0] == '+' || s[0] == '-') {
		d.negative = s[0] == '-'
		d.at = 1
	}
	if !d.mantissa() {
		return n, false, 0
	}
	d.exponent()
	scale, suffix := scaleSuffix(s[d.at:])
	n.Suffix = suffix
	d.at += len(suffix)
	if suffix != "" && d.plain && d.at < len(s) && digit(s[d.at]) {
		d.fraction()
		inset = true
	}
	d.exp += scale
	factor := uint64(1)
	if len(suffix) == 3 && foldEqual(suffix, "mil") {
		factor = 254 // 25.4 µm, the exponent is in scale
	}
	start := d.at
	for d.at < len(s) {
		k := unitLetter(s[d.at:])
		if k == 0 {
			break
		}
		d.at += k
	}
	n.Unit = s[start:d.at]
	v, ok := d.value(factor)
	if !ok || inset && n.Unit != "" && digit(n.Unit[0]) {
		return Number{}, false, 0
	}
	n.Value = v
	return n, inset, d.at
}

// decimal collects the digits of a number as an integer and a power of ten, so
// that a suffix only moves the power and 0.18u is the float nearest to 1.8e-7.
type decimal struct {
	text     string
	at       int
	mant     uint64
	exp      int
	long     bool // more digits than mant holds
	digits   []byte
	plain    bool // neither point nor exponent so far
	negative bool
}

func (d *decimal) digit(c byte) {
	const room = (math.MaxUint64 - 9) / 10
	if !d.long && d.mant > room {
		d.long = true
		d.digits = strconv.AppendUint(nil, d.mant, 10)
	}
	if d.long {
		d.digits = append(d.digits, c)
		return
	}
	d.mant = d.mant*10 + uint64(c-'0')
}

func (d *decimal) mantissa() bool {
	start := d.at
	for d.at < len(d.text) && digit(d.text[d.at]) {
		d.digit(d.text[d.at])
		d.at++
	}
	whole := d.at - start
	d.plain = whole > 0
	if d.at < len(d.text) && d.text[d.at] == '.' {
		next := d.at + 1
		// `0.2..1.6` is a range: its first point is not this number's.
		if next < len(d.text) && d.text[next] == '.' {
			return whole > 0
		}
		if whole == 0 && (next == len(d.text) || !digit(d.text[next])) {
			return false
		}
		d.at++
		d.plain = false
		d.fraction()
		return true
	}
	return whole > 0
}

func (d *decimal) fraction() {
	for d.at < len(d.text) && digit(d.text[d.at]) {
		d.digit(d.text[d.at])
		d.exp--
		d.at++
	}
}

func (d *decimal) exponent() {
	i := d.at
	if i >= len(d.text) || lower(d.text[i]) != 'e' {
		return
	}
	i++
	minus := false
	if i < len(d.text) && (d.text[i] == '+' || d.text[i] == '-') {
		minus = d.text[i] == '-'
		i++
	}
	if i >= len(d.text) || !digit(d.text[i]) {
		return
	}
	e := 0
	for ; i < len(d.text) && digit(d.text[i]); i++ {
		e = min(e*10+int(d.text[i]-'0'), 100000)
	}
	if minus {
		e = -e
	}
	d.exp += e
	d.at = i
	d.plain = false
}

// value is the number, exact wherever one rounding suffices.
func (d *decimal) value(factor uint64) (float64, bool) {
	v := 0.0
	m := d.mant * factor
	switch {
	case !d.long && d.mant < 1<<53/256 || factor == 1 && !d.long && d.mant < 1<<53:
		switch {
		case m == 0:
		case 0 <= d.exp && d.exp <= 22:
			v = float64(m) * tens[d.exp]
		case -22 <= d.exp && d.exp < 0:
			v = float64(m) / tens[-d.exp]
		default:
			v = slowValue(strconv.FormatUint(m, 10), d.exp)
		}
	case d.long:
		v = slowValue(string(d.digits), d.exp) * float64(factor)
	default:
		v = slowValue(strconv.FormatUint(d.mant, 10), d.exp) * float64(factor)
	}
	if d.negative {
		v = -v
	}
	return v, !math.IsInf(v, 0)
}

func slowValue(digits string, exp int) float64 {
	v, _ := strconv.ParseFloat(digits+"e"+strconv.Itoa(exp), 64) // out of range gives ±Inf or 0
	return v
}

var tens = [23]float64{1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

// scaleSuffix is the power of ten of the suffix at the start of s, and the suffix.
func scaleSuffix(s string) (exp int, suffix string) {
	if s == "" {
		return 0, ""
	}
	switch lower(s[0]) {
	case 't':
		return 12, s[:1]
	case 'g':
		return 9, s[:1]
	case 'x':
		return 6, s[:1]
	case 'k':
		return 3, s[:1]
	case 'm':
		if foldPrefix(s, "meg") {
			return 6, s[:3]
		}
		if foldPrefix(s, "mil") {
			return -7, s[:3]
		}
		return -3, s[:1]
	case 'u', 0xB5: // the micro sign of Latin-1
		return -6, s[:1]
	case 'n':
		return -9, s[:1]
	case 'p':
		return -12, s[:1]
	case 'f':
		return -15, s[:1]
	case 'a':
		return -18, s[:1]
	}
	if strings.HasPrefix(s, "\u00b5") || strings.HasPrefix(s, "\u03bc") {
		return -6, s[:2]
	}
	return 0, ""
}

// unitLetter is the length of the letter of a unit at the start of s, 0 if none.
func unitLetter(s string) int {
	switch c := s[0]; {
	case 'a' <= c && c <= 'z', 'A' <= c && c <= 'Z':
		return 1
	case c == 0xB5:
		return 1
	}
	for _, u := range []string{"\u00b5", "\u03bc", "\u03a9", "\u2126", "\u00b0", "\u00b2"} {
		if strings.HasPrefix(s, u) {
			return len(u)
		}
	}
	return 0
}

func digit(c byte) bool { return '0' <= c && c <= '9' }
