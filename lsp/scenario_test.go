package lsp

import (
	"cmp"
	"encoding/json"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	gcmp "github.com/google/go-cmp/cmp"
	"golang.org/x/tools/txtar"

	"triodeck/analysis/rules"
)

var update = flag.Bool("update", false, "rewrite the wanted output of the scenarios")

// TestScenarios plays the sessions of testdata/lsp. A scenario is an archive of
// deck files, a file "steps" with one step a line, and a file "want" with each
// step and what came back. Lines and columns count from 1; a column is in the
// unit that was agreed.
//
//	initialize utf-8|utf-16 [plaintext]
//	open FILE                       with the archive's text, version 1
//	change FILE A:B-C:D "TEXT"      replaces a range; the version goes up by one
//	replace FILE OTHER              the whole text by that of another archive file
//	write FILE OTHER                changes the file beside the editor
//	save FILE · close FILE
//	hover FILE A:B · definition FILE A:B · hints FILE · symbols FILE
//	send BODY                       a message body as it is
func TestScenarios(t *testing.T) {
	paths, err := filepath.Glob("../testdata/lsp/*.txtar")
	if err != nil || len(paths) == 0 {
		t.Fatalf("no scenarios: %v", err)
	}
	for _, path := range paths {
		t.Run(strings.TrimSuffix(filepath.Base(path), ".txtar"), func(t *testing.T) {
			t.Parallel()
			src, err := os.ReadFile(path)
			if err != nil {
				t.Fatal(err)
			}
			archive := txtar.Parse([]byte(strings.ReplaceAll(string(src), "\r\n", "\n")))
			got := play(t, archive)
			i := slices.IndexFunc(archive.Files, func(f txtar.File) bool { return f.Name == "want" })
			if *update {
				if i < 0 {
					i = len(archive.Files)
					archive.Files = append(archive.Files, txtar.File{Name: "want"})
				}
				archive.Files[i].Data = []byte(got)
				if err := os.WriteFile(path, txtar.Format(archive), 0o666); err != nil {
					t.Fatal(err)
				}
				return
			}
			want := ""
			if i >= 0 {
				want = string(archive.Files[i].Data)
			}
			if diff := gocmp(want, got); diff != "" {
				t.Errorf("the answers differ (-want +got):\n%s", diff)
			}
		})
	}
}

// player plays one scenario.
type player struct {
	*client
	texts    map[string]string // by name in the archive
	versions map[string]int
	out      strings.Builder
}

func play(t *testing.T, archive *txtar.Archive) string {
	p := &player{client: dial(t, rules.All), texts: map[string]string{}, versions: map[string]int{}}
	steps := ""
	for _, f := range archive.Files {
		switch f.Name {
		case "steps":
			steps = string(f.Data)
		case "want":
		default:
			p.texts[f.Name] = string(f.Data)
			p.files.write(home(f.Name), string(f.Data))
		}
	}
	for _, step := range strings.Split(strings.TrimSpace(steps), "\n") {
		fmt.Fprintf(&p.out, "> %s\n", step)
		p.step(step)
		for _, m := range p.idle() {
			p.notice(m)
		}
		p.mu.Lock()
		for _, m := range p.strays {
			p.print("answer without id", m)
		}
		p.strays = nil
		p.mu.Unlock()
	}
	return p.out.String()
}

// home is where the files of a scenario lie.
func home(name string) string { return filepath.Join(filepath.FromSlash("/deck"), name) }

var stepForm = regexp.MustCompile(`^(\w+)(?: (\S+))?(?: (\d+):(\d+)(?:-(\d+):(\d+))?)?(?: (.*))?$`)

func (p *player) step(step string) {
	p.t.Helper()
	if body, ok := strings.CutPrefix(step, "send "); ok {
		p.send(body)
		return
	}
	f := stepForm.FindStringSubmatch(step)
	if f == nil {
		p.t.Fatalf("%q is no step", step)
	}
	verb, name := f[1], f[2]
	doc := map[string]any{"uri": uriOf(home(name))}
	num := func(i int) int { n, _ := strconv.Atoi(f[i]); return n - 1 }
	at := map[string]any{"line": num(3), "character": num(4)}
	switch verb {
	case "initialize":
		p.client.formats = strings.Fields(f[7])
		p.print("", p.client.initialize(name))
	case "open":
		p.versions[name] = 1
		p.open(home(name), p.texts[name])
	case "change", "replace":
		p.versions[name]++
		doc["version"] = p.versions[name]
		change := map[string]any{"text": p.texts[f[7]]}
		if verb == "change" {
			text, err := strconv.Unquote(f[7])
			if err != nil {
				p.t.Fatalf("%q: the text is not quoted", step)
			}
			change = map[string]any{"text": text, "range": map[string]any{"start": at, "end": map[string]any{"line": num(5), "character": num(6)}}}
		}
		p.notify("textDocument/didChange", map[string]any{"textDocument": doc, "contentChanges": []any{change}})
	case "write":
		p.files.write(home(name), p.texts[f[7]])
		p.notify("workspace/didChangeWatchedFiles", map[string]any{"changes": []any{map[string]any{"uri": doc["uri"], "type": 2}}})
	case "save":
		p.notify("textDocument/didSave", map[string]any{"textDocument": doc})
	case "close":
		p.notify("textDocument/didClose", map[string]any{"textDocument": doc})
	case "hover", "definition":
		p.print("", p.call("textDocument/"+verb, map[string]any{"textDocument": doc, "position": at}))
	case "hints":
		p.print("", p.call("textDocument/inlayHint", map[string]any{"textDocument": doc, "range": map[string]any{
			"start": map[string]any{"line": 0, "character": 0}, "end": map[string]any{"line": 1 << 30, "character": 0},
		}}))
	case "symbols":
		p.print("", p.call("textDocument/documentSymbol", map[string]any{"textDocument": doc}))
	case "shutdown":
		p.print("", p.call("shutdown", nil))
	default:
		p.t.Fatalf("%q is no step", step)
	}
}

// notice prints a notification of the server.
func (p *player) notice(m message) {
	if m.Method != "textDocument/publishDiagnostics" {
		p.print(m.Method, message{Result: m.Params})
		return
	}
	var d struct {
		URI         string
		Version     *int
		Diagnostics []struct {
			Range              span
			Severity           int
			Code, Source       string
			Message            string
			RelatedInformation []struct {
				Location struct {
					URI   string
					Range span
				}
				Message string
			}
		}
	}
	if err := json.Unmarshal(m.Params, &d); err != nil {
		p.t.Errorf("bad diagnostics: %v: %s", err, m.Params)
	}
	fmt.Fprintf(&p.out, "diagnostics %s", p.short(d.URI))
	if d.Version != nil {
		fmt.Fprintf(&p.out, " version %d", *d.Version)
	}
	p.out.WriteString("\n")
	for _, x := range d.Diagnostics {
		fmt.Fprintf(&p.out, "  %s %s: %s [%s]\n", x.Range, []string{"?", "error", "warning", "note"}[x.Severity], x.Message, x.Code)
		for _, r := range x.RelatedInformation {
			fmt.Fprintf(&p.out, "    %s:%s %s\n", p.short(r.Location.URI), r.Location.Range, r.Message)
		}
	}
	if len(d.Diagnostics) == 0 {
		p.out.WriteString("  none\n")
	}
}

// span is a range as the protocol has it, from 0.
type span struct{ Start, End struct{ Line, Character int } }

func (s span) String() string {
	return fmt.Sprintf("%d:%d-%d:%d", s.Start.Line+1, s.Start.Character+1, s.End.Line+1, s.End.Character+1)
}

// print writes an answer: markdown as it is, anything else as indented JSON with
// ranges on one line.
func (p *player) print(title string, m message) {
	if title != "" {
		fmt.Fprintf(&p.out, "%s\n", title)
	}
	if m.Error != nil {
		fmt.Fprintf(&p.out, "  error %d: %s\n", m.Error.Code, m.Error.Message)
		return
	}
	var hover struct {
		Contents struct{ Kind, Value string }
		Range    span
	}
	if json.Unmarshal(m.Result, &hover) == nil && hover.Contents.Kind != "" {
		fmt.Fprintf(&p.out, "  %s %s\n", hover.Range, hover.Contents.Kind)
		for _, line := range strings.Split(strings.TrimRight(hover.Contents.Value, "\n"), "\n") {
			fmt.Fprintln(&p.out, strings.TrimRight("  | "+line, " "))
		}
		return
	}
	var v any
	if err := json.Unmarshal(m.Result, &v); err != nil {
		p.t.Errorf("bad result: %v: %s", err, m.Result)
	}
	p.value("  ", v)
}

// value prints a JSON value, one line for each member of the outer ones.
func (p *player) value(indent string, v any) {
	switch v := v.(type) {
	case []any:
		if len(v) == 0 {
			fmt.Fprintf(&p.out, "%snothing\n", indent)
		}
		for _, x := range v {
			p.value(indent, x)
		}
	case map[string]any:
		fmt.Fprintf(&p.out, "%s%s\n", indent, p.flat(v))
	default:
		fmt.Fprintf(&p.out, "%s%v\n", indent, cmp.Or(v, any("null")))
	}
}

func (p *player) flat(v any) string {
	switch v := v.(type) {
	case map[string]any:
		if line, ok := v["line"].(float64); ok {
			return fmt.Sprintf("%d:%d", int(line)+1, int(v["character"].(float64))+1)
		}
		if _, ok := v["start"]; ok && len(v) == 2 {
			return p.flat(v["start"]) + "-" + p.flat(v["end"])
		}
		var keys, texts []string
		for k := range v {
			keys = append(keys, k)
		}
		slices.Sort(keys)
		for _, k := range keys {
			texts = append(texts, k+"="+p.flat(v[k]))
		}
		return "{" + strings.Join(texts, " ") + "}"
	case []any:
		var texts []string
		for _, x := range v {
			texts = append(texts, p.flat(x))
		}
		return "[" + strings.Join(texts, " ") + "]"
	case string:
		return p.short(v)
	}
	return fmt.Sprint(v)
}

// short leaves the folder of the scenario out of a URI.
func (p *player) short(s string) string {
	return strings.ReplaceAll(s, string(uriOf(home("")))+"/", "")
}

func gocmp(want, got string) string {
	return gcmp.Diff(strings.Split(want, "\n"), strings.Split(got, "\n"))
}
