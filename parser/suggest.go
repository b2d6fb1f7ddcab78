package parser

// suggest is `; did you mean "x"?` for the nearest of the known words, or nothing
// if none is near.
func suggest(word string, known []string) string {
	word = Fold(word)
	if len(word) > 40 {
		return ""
	}
	best, at := min(2, len(word)/2)+1, ""
	for _, k := range known {
		if d := distance(word, k); d < best {
			best, at = d, k
		}
	}
	if at == "" {
		return ""
	}
	return `; did you mean "` + at + `"?`
}

// distance is the number of single-letter changes between two words, a swap of
// neighbours counted as one (Damerau 1964, restricted).
func distance(a, b string) int {
	prev2, prev, row := make([]int, len(b)+1), make([]int, len(b)+1), make([]int, len(b)+1)
	for j := range prev {
		prev[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			row[j] = min(prev[j]+1, row[j-1]+1, prev[j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], prev2[j-2]+1)
			}
		}
		prev2, prev, row = prev, row, prev2
	}
	return prev[len(b)]
}
