package ide

import "testing"

func TestPlain(t *testing.T) {
	h := HoverText{Markdown: "`M_sw` · NMOS\n\n| mode  | region | note |\n| ----- | ------ | --- |\n| track | triode | a\\|b |\n| hold  | `off`  |  |\n\n- `v(in)`: **failed**\n"}
	want := "M_sw · NMOS\n\nmode   region  note\ntrack  triode  a|b\nhold   off\n\n- v(in): failed\n"
	if got := h.Plain(); got != want {
		t.Errorf("got:\n%s\nwant:\n%s", got, want)
	}
}
