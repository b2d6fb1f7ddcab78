package parser

// slabs hands out small slices from large ones: a deck of a million cards would
// else spend its time in the allocator.
type slabs struct {
	word  []Word
	param []Param
	large bool // reading a whole file; an edit takes what it needs
}

const slabSize = 512

// nodes copies the words of fields.
func (s *slabs) nodes(fs []field) []Word {
	n := len(fs)
	if n == 0 {
		return nil
	}
	if len(s.word) < n {
		size := n
		if s.large {
			size = max(n, slabSize)
		}
		s.word = make([]Word, size)
	}
	out := s.word[:n:n]
	s.word = s.word[n:]
	for i, f := range fs {
		out[i] = f.Word
	}
	return out
}

// params copies parameters.
func (s *slabs) params(ps []Param) []Param {
	n := len(ps)
	if n == 0 {
		return nil
	}
	if len(s.param) < n {
		size := n
		if s.large {
			size = max(n, slabSize)
		}
		s.param = make([]Param, size)
	}
	out := s.param[:n:n]
	s.param = s.param[n:]
	copy(out, ps)
	return out
}
