package parser

// Fold is a name in lower case, as names compare in SPICE. Only the letters A-Z
// fold, so every byte keeps its place; a name already in lower case is returned
// as it is.
func Fold(s string) string {
	for i := 0; i < len(s); i++ {
		if c := s[i]; 'A' <= c && c <= 'Z' {
			return foldFrom(s, i)
		}
	}
	return s
}

func foldFrom(s string, i int) string {
	b := []byte(s)
	for ; i < len(b); i++ {
		b[i] = lower(b[i])
	}
	return string(b)
}

func lower(c byte) byte {
	if 'A' <= c && c <= 'Z' {
		return c + 'a' - 'A'
	}
	return c
}

// foldEqual compares s with a word in lower case.
func foldEqual(s, word string) bool {
	return len(s) == len(word) && foldPrefix(s, word)
}

// foldPrefix says whether s begins with a word in lower case.
func foldPrefix(s, word string) bool {
	if len(s) < len(word) {
		return false
	}
	for i := 0; i < len(word); i++ {
		if lower(s[i]) != word[i] {
			return false
		}
	}
	return true
}
