package parser

import (
	"encoding/binary"
	"unicode/utf8"
)

// Encoding is how a file's bytes hold its text.
type Encoding uint8

// The encodings. Text in any 8-bit code is kept byte by byte; UTF-16 is decoded to
// UTF-8, so offsets into Src are not offsets into its file.
const (
	EightBit Encoding = iota
	UTF16LE
	UTF16BE
)

// decode is the text of a file. Only UTF-16 with its byte order mark is changed,
// and in a way that Bytes undoes exactly.
func decode(src []byte) (string, Encoding) {
	if len(src) < 2 || len(src)%2 != 0 {
		return string(src), EightBit
	}
	var order binary.ByteOrder
	var enc Encoding
	switch {
	case src[0] == 0xFF && src[1] == 0xFE:
		order, enc = binary.LittleEndian, UTF16LE
	case src[0] == 0xFE && src[1] == 0xFF:
		order, enc = binary.BigEndian, UTF16BE
	default:
		return string(src), EightBit
	}
	out := make([]byte, 0, len(src)/2+16)
	for i := 0; i < len(src); i += 2 {
		u := rune(order.Uint16(src[i:]))
		if 0xD800 <= u && u < 0xDC00 && i+3 < len(src) {
			if low := rune(order.Uint16(src[i+2:])); 0xDC00 <= low && low < 0xE000 {
				out = utf8.AppendRune(out, (u-0xD800)<<10+(low-0xDC00)+0x10000)
				i += 2
				continue
			}
		}
		if 0xD800 <= u && u < 0xE000 {
			// Half a pair: the three bytes that UTF-8 would use if it could.
			out = append(out, 0xE0|byte(u>>12), 0x80|byte(u>>6)&0x3F, 0x80|byte(u)&0x3F)
			continue
		}
		out = utf8.AppendRune(out, u)
	}
	return string(out), enc
}

// Bytes is the file as it was read, or as it has to be written after an edit.
func (f *File) Bytes() []byte {
	if f.Encoding == EightBit {
		return []byte(f.Src)
	}
	var order binary.AppendByteOrder = binary.LittleEndian
	if f.Encoding == UTF16BE {
		order = binary.BigEndian
	}
	out := make([]byte, 0, 2*len(f.Src))
	for i := 0; i < len(f.Src); {
		r, n := utf8.DecodeRuneInString(f.Src[i:])
		switch {
		case r == utf8.RuneError && n == 1 && i+2 < len(f.Src) && f.Src[i] == 0xED:
			r = rune(f.Src[i]&0x0F)<<12 | rune(f.Src[i+1]&0x3F)<<6 | rune(f.Src[i+2]&0x3F)
			n = 3
		case r > 0xFFFF:
			r -= 0x10000
			out = order.AppendUint16(out, uint16(0xD800+r>>10))
			r = 0xDC00 + r&0x3FF
		}
		out = order.AppendUint16(out, uint16(r))
		i += n
	}
	return out
}
