package ide

import (
	"strings"
	"unicode/utf8"
)

// Plain is the text without the marks of markdown, for clients that show none:
// tables keep their columns, code and bold stand as they are.
func (h *HoverText) Plain() string {
	var b strings.Builder
	lines := strings.Split(strings.TrimRight(h.Markdown, "\n"), "\n")
	for i := 0; i < len(lines); {
		n := 0
		for i+n < len(lines) && strings.HasPrefix(lines[i+n], "| ") {
			n++
		}
		if n == 0 {
			b.WriteString(bareText(lines[i]) + "\n")
			i++
			continue
		}
		writeColumns(&b, lines[i:i+n])
		i += n
	}
	return b.String()
}

func bareText(s string) string {
	return strings.NewReplacer("`` ", "", " ``", "", "`", "", "**", "", "\\|", "|").Replace(s)
}

// writeColumns writes the rows of a table, without the rule under its head.
func writeColumns(b *strings.Builder, rows []string) {
	var cells [][]string
	var width []int
	for i, row := range rows {
		if i == 1 {
			continue
		}
		row = strings.TrimSuffix(strings.TrimPrefix(row, "| "), " |")
		var list []string
		for j, c := range strings.Split(row, " | ") {
			c = strings.TrimSpace(bareText(c))
			if j == len(width) {
				width = append(width, 0)
			}
			width[j] = max(width[j], utf8.RuneCountInString(c))
			list = append(list, c)
		}
		cells = append(cells, list)
	}
	for _, list := range cells {
		line := ""
		for j, c := range list {
			line += c + strings.Repeat(" ", width[j]-utf8.RuneCountInString(c)+2)
		}
		b.WriteString(strings.TrimRight(line, " ") + "\n")
	}
}
