package rules

import (
	"fmt"
	"strings"
)

// listed joins names for a sentence: "m1", "m1 and m2", "m1, m2 and 7 more".
func listed(names []string, most int) string {
	if len(names) > most {
		return fmt.Sprintf("%s and %d more", strings.Join(names[:most], ", "), len(names)-most)
	}
	if len(names) < 2 {
		return strings.Join(names, "")
	}
	last := len(names) - 1
	return strings.Join(names[:last], ", ") + " and " + names[last]
}

// quoted puts each name in quotes.
func quoted(names []string) []string {
	out := make([]string, len(names))
	for i, n := range names {
		out[i] = fmt.Sprintf("%q", n)
	}
	return out
}

// counted is "1 MOSFET", "3 MOSFETs".
func counted(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// condition tells when something holds: " (mode track, corner slow, v(in)=1.6 V)",
// or nothing where there is only one case.
func condition(mode, corner, at string) string {
	var parts []string
	if mode != "" {
		parts = append(parts, "mode "+mode)
	}
	if corner != "" {
		parts = append(parts, "corner "+corner)
	}
	if at != "" {
		parts = append(parts, at)
	}
	if len(parts) == 0 {
		return ""
	}
	return " (" + strings.Join(parts, ", ") + ")"
}

// conditionAt is the condition of a MOSFET at one of its samples.
func conditionAt(m part, sample int) string {
	return condition(m.Run.Mode, m.Run.Corner, m.at(sample))
}
