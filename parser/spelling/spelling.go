// Package spelling finds the word that a misspelt one means. It knows words alone.
package spelling

// Nearest gives the known name that a misspelt one most likely means, or "" when
// none is close: at most one edit for names up to four letters, two above.
// Of equally close names the first listed wins.
func Nearest(name string, known []string) string {
	limit := 2
	if len(name) <= 4 {
		limit = 1
	}
	best, found := limit+1, ""
	for _, k := range known {
		if d := edits(name, k, best); d < best {
			best, found = d, k
		}
	}
	return found
}

// edits is the Damerau-Levenshtein distance with adjacent transpositions
// (optimal string alignment), or limit when it is not below it.
func edits(a, b string, limit int) int {
	if len(a)-len(b) >= limit || len(b)-len(a) >= limit {
		return limit
	}
	older := make([]int, len(b)+1)
	last := make([]int, len(b)+1)
	row := make([]int, len(b)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			row[j] = min(last[j]+1, row[j-1]+1, last[j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], older[j-2]+1)
			}
		}
		older, last, row = last, row, older
	}
	return min(last[len(b)], limit)
}
