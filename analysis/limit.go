package analysis

import (
	"fmt"
	"slices"
	"strings"

	"triodeck/parser/source"
)

// MaxPerFile is the number of findings shown of one file; beyond it a reader
// stops reading and an editor slows down.
const MaxPerFile = 200

// LimitRule is the rule name of the line that tells how many were left out.
const LimitRule = "finding-limit"

// Limit keeps the worst MaxPerFile findings of each file, in order, and adds a
// line at the file's end that counts the others. The list must be sorted.
func Limit(list []Finding) []Finding {
	var out []Finding
	for len(list) > 0 {
		n := 1
		for n < len(list) && list[n].Place.Doc.Path == list[0].Place.Doc.Path {
			n++
		}
		out = append(out, limitFile(list[:n])...)
		list = list[n:]
	}
	return out
}

func limitFile(list []Finding) []Finding {
	if len(list) <= MaxPerFile {
		return list
	}
	order := make([]int, len(list))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return int(list[b].Severity) - int(list[a].Severity) })
	var dropped [3]int
	worst := Note
	for _, i := range order[MaxPerFile:] {
		dropped[list[i].Severity]++
		worst = max(worst, list[i].Severity)
	}
	kept := order[:MaxPerFile]
	slices.Sort(kept)
	out := make([]Finding, 0, MaxPerFile+1)
	for _, i := range kept {
		out = append(out, list[i])
	}
	at := list[0].Place
	at.Card = max(at.Doc.File.Len()-1, 0)
	at.Span = source.Span{Start: int32(len(at.Doc.File.Src)), End: int32(len(at.Doc.File.Src))}
	var counts []string
	for s := Error + 1; s > Note; s-- {
		if n := dropped[s-1]; n > 0 {
			counts = append(counts, count(n, (s-1).String()))
		}
	}
	return append(out, Finding{
		Rule: LimitRule, Severity: worst, Place: at,
		Message: fmt.Sprintf("%s more in this file not shown", strings.Join(counts, ", ")),
	})
}

// count is "1 error", "2 errors".
func count(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}
