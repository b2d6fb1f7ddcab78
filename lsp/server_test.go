package lsp

import (
	"encoding/json"
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"

	"go.lsp.dev/jsonrpc2"
	"go.lsp.dev/protocol"

	"triodeck/analysis"
	"triodeck/analysis/rules"
)

const smallDeck = "one switch\nM1 d g s 0 nch W=10u L=1u\n.model nch nmos vto=0.5 kp=200u\n*@ bias v(d)=0.01 v(g)=1.8 v(s)=0\n.end\n"

// requests are the calls that answer for each capability, as the server writes
// it; a capability without a line here is one that nobody tests.
var requests = map[string]string{
	"hoverProvider":          "textDocument/hover",
	"inlayHintProvider":      "textDocument/inlayHint",
	"definitionProvider":     "textDocument/definition",
	"documentSymbolProvider": "textDocument/documentSymbol",
}

func TestAdvertisedCapabilitiesAnswer(t *testing.T) {
	c := dial(t, rules.All)
	var result struct{ Capabilities map[string]json.RawMessage }
	if err := json.Unmarshal(c.initialize("utf-8").Result, &result); err != nil {
		t.Fatal(err)
	}
	path := home("a.sp")
	c.open(path, smallDeck)
	for name := range result.Capabilities {
		method := requests[name]
		switch {
		case name == "positionEncoding" || name == "textDocumentSync":
			continue
		case method == "":
			t.Errorf("capability %q is advertised, and no test asks for it", name)
			continue
		}
		m := c.call(method, map[string]any{
			"textDocument": map[string]any{"uri": uriOf(path)},
			"position":     map[string]any{"line": 1, "character": 0},
			"range":        map[string]any{"start": map[string]any{"line": 0, "character": 0}, "end": map[string]any{"line": 9, "character": 0}},
		})
		if m.Error != nil || len(m.Result) < 3 {
			t.Errorf("%s answers %+v %s", method, m.Error, m.Result)
		}
	}
	for name := range requests {
		if result.Capabilities[name] == nil {
			t.Errorf("capability %q is not advertised", name)
		}
	}
}

// TestHostileMessages sends what no client should and expects the server to go
// on answering.
func TestHostileMessages(t *testing.T) {
	deck := string(uriOf(home("a.sp")))
	change := func(text string) string {
		return `{"jsonrpc":"2.0","method":"textDocument/didChange","params":{"textDocument":{"uri":"` + deck + `","version":2},"contentChanges":[` + text + `]}}`
	}
	note := func(method, params string) string {
		return `{"jsonrpc":"2.0","method":"` + method + `","params":` + params + `}`
	}
	bodies := map[string]string{
		"no JSON":                 `{"jsonrpc":"2.0","method":`,
		"not an object":           `42`,
		"empty batch":             `[]`,
		"batch":                   `[{"jsonrpc":"2.0","id":900,"method":"shutdown"}]`,
		"no version":              `{"method":"textDocument/didSave"}`,
		"unknown notification":    note("$/nobody", `{}`),
		"params of another type":  note("textDocument/didOpen", `[1,2,3]`),
		"null params":             note("textDocument/didOpen", `null`),
		"no params":               `{"jsonrpc":"2.0","method":"textDocument/didChange"}`,
		"change of what is shut":  note("textDocument/didChange", `{"textDocument":{"uri":"file:///nowhere.sp","version":1},"contentChanges":[{"text":"x"}]}`),
		"close of what is shut":   note("textDocument/didClose", `{"textDocument":{"uri":"file:///nowhere.sp"}}`),
		"bad URI":                 note("textDocument/didOpen", `{"textDocument":{"uri":"%zz:\u0000//[","languageId":"x","version":1,"text":"a"}}`),
		"empty URI":               note("textDocument/didOpen", `{"textDocument":{"uri":"","languageId":"x","version":1,"text":"a"}}`),
		"binary text":             note("textDocument/didOpen", `{"textDocument":{"uri":"file:///b.sp","languageId":"x","version":1,"text":"\u0000\u0001\ufffd\n\rM1\u0000"}}`),
		"cancel of nothing":       note("$/cancelRequest", `{"id":12345}`),
		"cancel without id":       note("$/cancelRequest", `{}`),
		"far range":               change(`{"range":{"start":{"line":4294967295,"character":4294967295},"end":{"line":4294967295,"character":4294967295}},"text":"*x"}`),
		"backward range":          change(`{"range":{"start":{"line":3,"character":4},"end":{"line":1,"character":2}},"text":""}`),
		"negative range":          change(`{"range":{"start":{"line":-1,"character":-5},"end":{"line":0,"character":0}},"text":"y"}`),
		"null change":             change(`null`),
		"change without a text":   change(`{"range":{"start":{"line":0,"character":0},"end":{"line":0,"character":0}}}`),
		"string id":               `{"jsonrpc":"2.0","id":"abc","method":"textDocument/hover","params":{"textDocument":{"uri":"` + deck + `"},"position":{"line":99,"character":99}}}`,
		"hover of a missing file": `{"jsonrpc":"2.0","id":901,"method":"textDocument/hover","params":{"textDocument":{"uri":"file:///missing.sp"},"position":{"line":0,"character":0}}}`,
		"second initialize":       `{"jsonrpc":"2.0","id":902,"method":"initialize","params":{"capabilities":{}}}`,
		"answer to no question":   `{"jsonrpc":"2.0","id":77,"result":null}`,
		"deep JSON":               note("textDocument/didSave", strings.Repeat("[", 20000)+strings.Repeat("]", 20000)),
	}
	for name, body := range bodies {
		t.Run(name, func(t *testing.T) {
			c := dial(t, rules.All)
			c.initialize()
			c.open(home("a.sp"), smallDeck)
			c.send(body)
			c.idle()
			c.open(home("c.sp"), smallDeck)
			m := c.call("textDocument/hover", map[string]any{
				"textDocument": map[string]any{"uri": uriOf(home("c.sp"))},
				"position":     map[string]any{"line": 1, "character": 1},
			})
			if m.Error != nil || !strings.Contains(string(m.Result), "deep triode") {
				t.Errorf("hover afterwards: %+v %s", m.Error, m.Result)
			}
		})
	}
}

// TestUnadvertised sends every message of the protocol that the server does not
// offer: notifications pass, requests are refused and not fatal.
func TestUnadvertised(t *testing.T) {
	c := dial(t, nil)
	c.initialize()
	for _, method := range []string{
		protocol.MethodTextDocumentWillSave, protocol.MethodWorkspaceDidChangeConfiguration, protocol.MethodWorkspaceDidChangeWatchedFiles,
		protocol.MethodWorkspaceDidChangeWorkspaceFolders, protocol.MethodNotebookDocumentDidOpen, protocol.MethodProgress,
		protocol.MethodWindowWorkDoneProgressCancel, protocol.MethodSetTrace, protocol.MethodWorkspaceDidCreateFiles, protocol.MethodWorkspaceDidRenameFiles,
	} {
		for _, params := range []any{map[string]any{}, nil, []int{1}} {
			c.notify(method, params)
		}
	}
	for _, method := range []string{
		protocol.MethodTextDocumentCompletion, protocol.MethodTextDocumentRename, protocol.MethodTextDocumentFormatting,
		protocol.MethodWorkspaceSymbol, protocol.MethodTextDocumentCodeAction, "nobody/knows",
	} {
		m := c.call(method, map[string]any{"textDocument": map[string]any{"uri": "file:///a"}, "position": map[string]any{"line": 0, "character": 0}})
		if m.Error == nil || m.Error.Code != int(jsonrpc2.ErrMethodNotFound.Code) {
			t.Errorf("%s answers %+v %s", method, m.Error, m.Result)
		}
	}
	c.idle()
}

func TestPhases(t *testing.T) {
	c := dial(t, nil)
	if m := c.call("textDocument/hover", map[string]any{}); m.Error == nil || m.Error.Code != -32002 {
		t.Errorf("hover before initialize: %+v", m.Error)
	}
	c.open(home("early.sp"), smallDeck)
	c.initialize()
	if n := len(c.server.state.Load().open); n != 0 {
		t.Errorf("%d buffers were opened before initialize", n)
	}
	if m := c.call("initialize", map[string]any{"capabilities": map[string]any{}}); m.Error == nil || m.Error.Code != -32600 {
		t.Errorf("second initialize: %+v", m.Error)
	}
	if m := c.call("shutdown", nil); m.Error != nil {
		t.Errorf("shutdown: %+v", m.Error)
	}
	if m := c.call("textDocument/hover", map[string]any{}); m.Error == nil || m.Error.Code != -32600 {
		t.Errorf("hover after shutdown: %+v", m.Error)
	}
	c.notify("exit", nil)
	if err := <-c.ended; err != nil {
		t.Errorf("exit in order: %v", err)
	}
}

func TestExitWithoutShutdown(t *testing.T) {
	c := dial(t, nil)
	c.initialize()
	c.notify("exit", nil)
	if err := <-c.ended; !errors.Is(err, ErrNoShutdown) {
		t.Errorf("exit without shutdown: %v", err)
	}
}

func TestEndOfInput(t *testing.T) {
	c := dial(t, nil)
	c.initialize()
	c.in.Close()
	if err := <-c.ended; err != nil {
		t.Errorf("end of input: %v", err)
	}
}

// TestOrder types a text letter by letter, as fast as the pipe takes it.
func TestOrder(t *testing.T) {
	c := dial(t, nil)
	c.initialize()
	path := home("typed.sp")
	c.open(path, "")
	var want strings.Builder
	for i := range 300 {
		text := fmt.Sprintf("%d ", i)
		c.notify("textDocument/didChange", map[string]any{
			"textDocument": map[string]any{"uri": uriOf(path), "version": i + 2},
			"contentChanges": []any{map[string]any{"text": text, "range": map[string]any{
				"start": map[string]any{"line": 0, "character": want.Len()}, "end": map[string]any{"line": 0, "character": want.Len()},
			}}},
		})
		want.WriteString(text)
	}
	c.idle()
	if got := c.server.state.Load().open[path].file.Src; got != want.String() {
		t.Errorf("the text arrived as %q", got)
	}
}

// TestPanics has a rule that panics in the background and a query that panics in
// its handler; the server survives both.
func TestPanics(t *testing.T) {
	bad := &analysis.Rule{Name: "bad", Text: "Panics.", Scope: analysis.PerFile, Run: func(*analysis.Pass) { panic("rule") }}
	c := dial(t, []*analysis.Rule{bad})
	c.initialize()
	c.open(home("a.sp"), smallDeck)
	c.idle()
	s := c.server.state.Load()
	c.server.state.Store(nil)
	if m := c.call("textDocument/hover", map[string]any{"textDocument": map[string]any{"uri": uriOf(home("a.sp"))}}); m.Error == nil || m.Error.Code != -32603 {
		t.Errorf("hover that panics: %+v", m.Error)
	}
	c.notify("textDocument/didClose", map[string]any{"textDocument": map[string]any{"uri": uriOf(home("a.sp"))}})
	c.call("test/echo", nil)
	c.server.state.Store(s)
	c.idle()
}

// TestCancelledRequest cancels a request whose file takes long to read.
func TestCancelledRequest(t *testing.T) {
	c := dial(t, nil)
	c.initialize()
	path := home("slow.sp")
	c.files.write(path, smallDeck)
	gate := c.files.hold(path)
	id, answer := c.start("textDocument/hover", map[string]any{
		"textDocument": map[string]any{"uri": uriOf(path)}, "position": map[string]any{"line": 1, "character": 0},
	})
	<-gate.entered
	c.notify("$/cancelRequest", map[string]any{"id": id})
	c.call("test/echo", nil)
	close(gate.release)
	if m := c.wait("hover", answer); m.Error == nil || m.Error.Code != -32800 {
		t.Errorf("the cancelled hover answers %+v %s", m.Error, m.Result)
	}
	// The next one is answered: nothing of the cancellation is kept.
	m := c.call("textDocument/hover", map[string]any{
		"textDocument": map[string]any{"uri": uriOf(path)}, "position": map[string]any{"line": 1, "character": 0},
	})
	if m.Error != nil || !strings.Contains(string(m.Result), "deep triode") {
		t.Errorf("the next hover answers %+v %s", m.Error, m.Result)
	}
}

// TestSupersededPass has a slow pass overtaken by an edit.
func TestSupersededPass(t *testing.T) {
	entered, release := make(chan struct{}, 8), make(chan struct{})
	slow := &analysis.Rule{Name: "slow", Text: "Waits.", Scope: analysis.PerDesign, Run: func(p *analysis.Pass) {
		entered <- struct{}{}
		<-release
	}}
	c := dial(t, []*analysis.Rule{slow})
	c.initialize()
	c.open(home("a.sp"), smallDeck)
	<-entered
	// Queries are answered while a pass is stuck.
	m := c.call("textDocument/hover", map[string]any{"textDocument": map[string]any{"uri": uriOf(home("a.sp"))}, "position": map[string]any{"line": 1, "character": 0}})
	if m.Error != nil || !strings.Contains(string(m.Result), "deep triode") {
		t.Errorf("hover beside a slow pass: %+v %s", m.Error, m.Result)
	}
	c.notify("textDocument/didChange", map[string]any{
		"textDocument":   map[string]any{"uri": uriOf(home("a.sp")), "version": 2},
		"contentChanges": []any{map[string]any{"text": smallDeck + "* more\n"}},
	})
	c.call("test/echo", nil)
	close(release)
	// The pass over the first version, which ended late, tells nothing.
	var versions []int
	for _, n := range c.idle() {
		var p struct{ Version int }
		if err := json.Unmarshal(n.Params, &p); err != nil || n.Method != "textDocument/publishDiagnostics" {
			t.Errorf("unexpected notice %s %s", n.Method, n.Params)
		}
		versions = append(versions, p.Version)
	}
	if !slices.Equal(versions, []int{2}) {
		t.Errorf("diagnostics came for the versions %v, want 2 only", versions)
	}
}
