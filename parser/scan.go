package parser

import "strings"

// lineClass says what a physical line is for the splitting into cards.
type lineClass uint8

const (
	blankLine    lineClass = iota
	commentLine            // `*`, `#`, `//`, `;` or `$` first
	factLine               // a comment that layout tools read: `*.PININFO`, `*.GLOBAL`
	noteLine               // `*@`
	noteMoreLine           // `*@+`
	moreLine               // `+`
	textLine               // a card begins
)

// state is what the splitter carries over a card's end; with the text that
// follows it decides everything that follows. An edit is re-read only up to the
// first card end where place and state are what they were.
type state uint8

const (
	begun        state = 1 << iota // the first line with text is behind us
	continuable                    // a `+` would find a card to continue
	ended                          // behind `.end`
	inControl                      // between `.control` and `.endc`
	inData                         // between `.data` and `.enddata`
	protectStart                   // behind `.protect`, nothing read yet
	inProtect                      // in a protected body that is no text
)

// piece is one card as the splitter cut it.
type piece struct {
	start, end int32
	kind       CardKind // BlankCard, CommentCard, TitleCard, AnnotationCard, OpaqueCard; else ElementCard
	orphan     bool     // begins with a continuation of nothing
}

// splitter cuts a text into cards.
type splitter struct {
	src string
	at  int
	st  state
}

// next cuts the next card; false at the end of the text.
func (s *splitter) next() (piece, bool) {
	if s.at >= len(s.src) {
		return piece{}, false
	}
	p := piece{start: int32(s.at)}
	end := lineEnd(s.src, s.at)
	class, first := classify(s.src, s.at, end)
	if class == blankLine {
		p.kind = BlankCard
		return s.cut(p, end), true
	}
	if s.st&(ended|inControl|inData|inProtect|protectStart) != 0 {
		if q, ok := s.inBlock(p, class, first, end); ok {
			return q, true
		}
	}
	title := s.st&begun == 0 && class == textLine && s.src[first] != '.'
	s.st |= begun
	switch class {
	case commentLine:
		p.kind = CommentCard
	case noteLine, noteMoreLine:
		p.kind = AnnotationCard
		p.orphan = class == noteMoreLine
		for end < len(s.src) {
			next := lineEnd(s.src, end)
			if class, _ := classify(s.src, end, next); class != noteMoreLine {
				break
			}
			end = next
		}
	case factLine:
		p.kind = CommentCard
		end = s.continued(end)
		s.st |= continuable
	case moreLine:
		p.kind = ElementCard
		p.orphan = true
		end = s.continued(end)
	case textLine:
		p.kind = ElementCard
		if title {
			p.kind = TitleCard
		}
		if s.src[first] == '.' {
			p.kind = DirectiveCard
		}
		end = s.continued(s.joined(end))
		s.st |= continuable
		if p.kind == DirectiveCard {
			s.enter(first, end)
		}
	}
	return s.cut(p, end), true
}

func (s *splitter) cut(p piece, end int) piece {
	p.end = int32(end)
	s.at = end
	return p
}

// inBlock cuts a line of a block whose text is kept and not read.
func (s *splitter) inBlock(p piece, class lineClass, first, end int) (piece, bool) {
	p.kind = OpaqueCard
	word := directiveWord(s.src[first:end])
	switch {
	case s.st&ended != 0:
		if class == commentLine {
			p.kind = CommentCard
		}
		return s.cut(p, end), true
	case s.st&inControl != 0:
		switch word {
		case ".endc", ".include", ".inc", ".lib":
			p.kind = DirectiveCard
			if word == ".endc" {
				s.st &^= inControl
			}
		}
		return s.cut(p, end), true
	case s.st&inData != 0:
		if class == textLine && s.src[first] == '.' || class == noteLine || class == noteMoreLine {
			s.st &^= inData
			return p, false
		}
		if class == commentLine {
			p.kind = CommentCard
		}
		return s.cut(p, end), true
	case s.st&protectStart != 0:
		s.st &^= protectStart
		if readable(s.src[first:end], class) {
			return p, false
		}
		s.st |= inProtect
	}
	if strings.HasPrefix(word, ".unprot") {
		s.st &^= inProtect
		return p, false
	}
	return s.cut(p, end), true
}

// readable says whether the first line of a protected body is a card: many
// libraries protect plain text only against being listed.
func readable(line string, class lineClass) bool {
	if class != textLine {
		return class == commentLine || class == factLine
	}
	if line[0] == '.' {
		return true
	}
	for i := 0; i < len(line); i++ {
		if c := line[i]; c >= 0x7F || c < ' ' && !blank(c) && c != '\r' && c != '\n' {
			return false
		}
	}
	return isLetter(line[0]) && strings.ContainsAny(line, " \t")
}

// enter follows the directives that open a block.
func (s *splitter) enter(first, end int) {
	switch word := directiveWord(s.src[first:end]); word {
	case ".end":
		s.st |= ended
	case ".control":
		s.st |= inControl
	case ".data":
		s.st |= inData
	case ".protect", ".prot":
		s.st |= protectStart
	}
}

// continued extends a card over its continuation lines and over the comments and
// blank lines between them.
func (s *splitter) continued(end int) int {
	for at := end; at < len(s.src); {
		next := lineEnd(s.src, at)
		class, _ := classify(s.src, at, next)
		switch class {
		case moreLine:
			end = s.joined(next)
			at = end
			continue
		case textLine, factLine:
			return end
		}
		at = next
	}
	return end
}

// joined extends a card over lines that end in a stray `\` or `+`, the marks of
// continuation in other languages.
func (s *splitter) joined(end int) int {
	for end < len(s.src) && strayJoinAt(s.src, end) >= 0 {
		next := lineEnd(s.src, end)
		class, first := classify(s.src, end, next)
		if class != textLine || s.src[first] == '.' {
			break
		}
		end = next
	}
	return end
}

// strayJoinAt is the offset of a `\` or `+` behind a blank at the end of the line
// that ends at end, or -1.
func strayJoinAt(src string, end int) int {
	i := end - 1
	for i > 0 && (src[i] == '\n' || src[i] == '\r' || blank(src[i])) {
		i--
	}
	if i < 1 || src[i] != '\\' && src[i] != '+' {
		return -1
	}
	at := i
	if src[i-1] == '\\' && src[i] == '\\' {
		at--
	}
	if at < 1 || !blank(src[at-1]) && at == i {
		return -1
	}
	start := at
	for start > 0 && src[start-1] != '\n' && src[start-1] != '\r' {
		start--
	}
	if strings.ContainsAny(src[start:at], ";$") || strings.TrimSpace(src[start:at]) == "" {
		return -1
	}
	return at
}

// lineEnd is the offset behind the line that at stands in, its break included.
// It looks in windows, so that a text with one kind of break is not searched to
// its end for the other, line by line.
func lineEnd(src string, at int) int {
	for at < len(src) {
		line := src[at:min(at+256, len(src))]
		n := strings.IndexByte(line, '\n')
		if n >= 0 {
			line = line[:n]
		}
		if r := strings.IndexByte(line, '\r'); r >= 0 {
			at += r + 1
			if at < len(src) && src[at] == '\n' {
				at++
			}
			return at
		}
		if n >= 0 {
			return at + n + 1
		}
		at += len(line)
	}
	return at
}

// classify tells what the line is, and where its text begins.
func classify(src string, at, end int) (class lineClass, first int) {
	if at == 0 && strings.HasPrefix(src, bom) {
		at = len(bom)
	}
	for at < end && (blank(src[at]) || src[at] == '\n' || src[at] == '\r') {
		at++
	}
	if at == end {
		return blankLine, at
	}
	line := src[at:end]
	switch c := line[0]; c {
	case '+':
		return moreLine, at
	case '*':
		return commentClass(line), at
	case '#', ';', '$':
		return commentLine, at
	case '/':
		if len(line) > 1 && line[1] == '/' {
			return commentLine, at
		}
	}
	return textLine, at
}

func commentClass(line string) lineClass {
	if len(line) < 2 {
		return commentLine
	}
	switch line[1] {
	case '@':
		if len(line) == 2 || blank(line[2]) || line[2] == '\n' || line[2] == '\r' || isLetter(line[2]) {
			return noteLine
		}
		if line[2] == '+' {
			return noteMoreLine
		}
	case '.':
		if factWords[directiveWord(line[1:])] {
			return factLine
		}
	}
	return commentLine
}

// factWords are the comment cards that layout tools read.
var factWords = map[string]bool{
	".pininfo": true, ".global": true, ".pin": true, ".scale": true, ".mega": true,
}

const bom = "\xef\xbb\xbf"

// blank says whether c separates fields on a line: blanks, tabs, form feeds and
// the end-of-file mark that old editors leave.
func blank(c byte) bool {
	return c == ' ' || c == '\t' || c == '\f' || c == '\v' || c == 0x1A
}

func isLetter(c byte) bool { return 'a' <= lower(c) && lower(c) <= 'z' }

// directiveWord is the word of a dot card in lower case, with its dot; empty if
// the line is none.
func directiveWord(line string) string {
	if line == "" || line[0] != '.' {
		return ""
	}
	n := 1
	for n < len(line) && (isLetter(line[n]) || line[n] == '_' || digit(line[n])) {
		n++
	}
	return Fold(line[:n])
}
