package ide

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"

	"triodeck/analysis/quantity"
)

// table collects rows of a markdown table. Columns that are empty in every row
// are left out.
type table struct {
	head []string
	rows [][]string
}

func (t *table) add(cells ...string) {
	for i, c := range cells {
		cells[i] = strings.ReplaceAll(c, "|", "\\|")
	}
	t.rows = append(t.rows, cells)
}

func (t *table) String() string {
	width := make([]int, len(t.head)) // 0: the column is empty
	for _, r := range t.rows {
		for i, c := range r {
			if c != "" {
				width[i] = max(width[i], cellWidth(c), cellWidth(t.head[i]), 3)
			}
		}
	}
	var b strings.Builder
	line := func(pad string, cells []string) {
		for i, c := range cells {
			if width[i] > 0 {
				b.WriteString("| " + c + strings.Repeat(pad, width[i]-cellWidth(c)) + " ")
			}
		}
		b.WriteString("|\n")
	}
	line(" ", t.head)
	line("-", make([]string, len(t.head)))
	for _, r := range t.rows {
		line(" ", r)
	}
	return b.String()
}

// cellWidth is how many columns a cell takes in a window of fixed pitch.
func cellWidth(s string) int { return utf8.RuneCountInString(s) }

// spread writes the range between two values with their unit once where they
// can share it: "98.0–145 Ω", "-12.0 to 45.0 mV", "0.453–1.23 V".
func spread(lo, hi float64, unit string) string {
	a, b := quantity.Format(lo, unit), quantity.Format(hi, unit)
	large, small := math.Max(math.Abs(lo), math.Abs(hi)), math.Min(math.Abs(lo), math.Abs(hi))
	if small > 0 && large/small <= sharedRatio {
		shared := quantity.Format(large, unit)
		_, suffix, _ := strings.Cut(shared, " ")
		if scale, ok := scales[strings.TrimSuffix(suffix, unit)]; ok {
			a, b = rescaled(a, lo/scale, suffix), rescaled(b, hi/scale, suffix)
		}
	}
	return between(a, b, lo)
}

// sharedRatio is the largest ratio of two values that are shown with one prefix.
const sharedRatio = 30

var scales = map[string]float64{"G": 1e9, "M": 1e6, "k": 1e3, "": 1, "m": 1e-3, "µ": 1e-6, "n": 1e-9, "p": 1e-12, "f": 1e-15}

// rescaled is a value in another unit, to three digits; what has it is kept.
func rescaled(text string, v float64, suffix string) string {
	if _, s, _ := strings.Cut(text, " "); s == suffix {
		return text
	}
	digits := 3
	if a := math.Abs(v); a >= 1 {
		digits = 2
	}
	return strconv.FormatFloat(v, 'f', digits, 64) + " " + suffix
}

// voltSpread is spread for node voltages, to the millivolt.
func voltSpread(lo, hi float64) string {
	a, b := quantity.Volts(lo), quantity.Volts(hi)
	_, ua, _ := strings.Cut(a, " ")
	if _, ub, _ := strings.Cut(b, " "); ua != ub {
		a, b = fmt.Sprintf("%.3f V", lo), fmt.Sprintf("%.3f V", hi)
	}
	return between(a, b, lo)
}

func between(a, b string, lo float64) string {
	if a == b {
		return a
	}
	na, ua, _ := strings.Cut(a, " ")
	nb, ub, _ := strings.Cut(b, " ")
	switch {
	case lo == 0 && ub != "":
		return "0–" + b
	case ua == ub && ua != "" && lo >= 0:
		return na + "–" + b
	case ua != "" && (ua == ub || nb == "0"):
		return na + " to " + nb + " " + ua
	}
	return a + " to " + b
}

// extremes widens a range to take in a value.
func extremes(lo, hi, v float64) (float64, float64) {
	return math.Min(lo, v), math.Max(hi, v)
}
