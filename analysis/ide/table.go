package ide

import (
	"math"
	"strings"

	"triodeck/analysis/quantity"
)

// table collects rows of a markdown table. Columns that are empty in every row
// are left out.
type table struct {
	head []string
	rows [][]string
}

func (t *table) add(cells ...string) { t.rows = append(t.rows, cells) }

func (t *table) String() string {
	var b strings.Builder
	used := make([]bool, len(t.head))
	for _, r := range t.rows {
		for i, c := range r {
			used[i] = used[i] || c != ""
		}
	}
	line := func(cells func(i int) string) {
		for i := range t.head {
			if used[i] {
				b.WriteString("| " + strings.ReplaceAll(cells(i), "|", "\\|") + " ")
			}
		}
		b.WriteString("|\n")
	}
	line(func(i int) string { return t.head[i] })
	line(func(int) string { return "---" })
	for _, r := range t.rows {
		line(func(i int) string { return r[i] })
	}
	return b.String()
}

// spread writes the range between two values with their unit once where they
// share it: "98.0–145 Ω", "-12 mV to 45 mV".
func spread(lo, hi float64, unit string) string {
	return between(quantity.Format(lo, unit), quantity.Format(hi, unit), lo)
}

// voltSpread is spread for node voltages.
func voltSpread(lo, hi float64) string {
	return between(quantity.Volts(lo), quantity.Volts(hi), lo)
}

func between(a, b string, lo float64) string {
	if a == b {
		return a
	}
	na, ua, _ := strings.Cut(a, " ")
	_, ub, _ := strings.Cut(b, " ")
	if ua == ub && ua != "" && lo >= 0 {
		return na + "–" + b
	}
	if lo == 0 && ub != "" {
		return "0–" + b
	}
	return a + " to " + b
}

// extremes widens a range to take in a value.
func extremes(lo, hi, v float64) (float64, float64) {
	return math.Min(lo, v), math.Max(hi, v)
}
