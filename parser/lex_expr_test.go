package parser

import "testing"

// TestQuotesInBraces reads an expression that a library wrote in quotes inside
// its braces; quotes anywhere else in one are errors.
func TestQuotesInBraces(t *testing.T) {
	for text, errs := range map[string]int{
		`.param a={"-b/2-c"} b=1 c=2`:    0,
		`.param a={ "b" } b=1`:           0,
		`.param a={b"c"} b=1`:            1,
		`.model r1 r rsh={"rs*2"} tc1=0`: 0,
	} {
		if got := Parse([]byte("title\n" + text + "\n")).Errors(); len(got) != errs {
			t.Errorf("%s: %v, want %d errors", text, got, errs)
		}
	}
}
