package mos

import (
	"math"
	"strconv"
)

// engineering writes a value with unit and prefix to four digits: "112 nm".
func engineering(v float64, unit string) string {
	if unit == "" {
		return strconv.FormatFloat(v, 'g', 4, 64)
	}
	if v == 0 || math.IsNaN(v) || math.IsInf(v, 0) {
		return strconv.FormatFloat(v, 'g', 4, 64) + " " + unit
	}
	const prefixes = "afpnµm kMGT"
	runes := []rune(prefixes)
	step := int(math.Floor(math.Log10(math.Abs(v)) / 3))
	step = max(-6, min(4, step))
	prefix := runes[step+6]
	text := strconv.FormatFloat(v/math.Pow(1000, float64(step)), 'g', 4, 64) + " "
	if prefix != ' ' {
		text += string(prefix)
	}
	return text + unit
}
