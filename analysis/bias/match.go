package bias

import "triodeck/analysis/circuit"

// Match says whether a name fits a pattern: `*` stands for any run of
// characters, `?` for one. Both are folded by the caller.
func Match(pattern, name string) bool { return circuit.Match(pattern, name) }
