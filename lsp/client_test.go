package lsp

import (
	"bufio"
	"context"
	"encoding/json"
	"fmt"
	"io"
	"io/fs"
	"net/textproto"
	"strconv"
	"sync"
	"testing"
	"time"

	"triodeck/analysis"
)

// client is the other end of the protocol, written without the libraries of the
// server: it frames JSON by hand and takes the answers as they come.
type client struct {
	t      testing.TB
	server *server
	files  *memory
	in     *io.PipeWriter
	ended  chan error // what Serve returned
	nextID int

	formats []string // of texts, as the client prefers them; none: it does not say

	mu       sync.Mutex
	answers  map[string]chan message
	notices  []message
	strays   []message // answers without an id
	finished chan struct{}
}

// message is any message of the protocol.
type message struct {
	ID     json.RawMessage `json:"id"`
	Method string          `json:"method"`
	Params json.RawMessage `json:"params"`
	Result json.RawMessage `json:"result"`
	Error  *struct {
		Code    int    `json:"code"`
		Message string `json:"message"`
	} `json:"error"`
}

// patience is how long a test waits for what must come at once.
const patience = 30 * time.Second

// dial starts a server and a client of it. Nothing is sent yet.
func dial(t testing.TB, rules []*analysis.Rule) *client {
	t.Helper()
	toServer, fromClient := io.Pipe()
	toClient, fromServer := io.Pipe()
	c := &client{t: t, files: &memory{files: map[string]string{}}, in: fromClient, ended: make(chan error, 1), answers: map[string]chan message{}, finished: make(chan struct{})}
	started := make(chan *server, 1)
	go func() {
		err := Serve(context.Background(), toServer, fromServer, Options{
			Version: "test", Rules: rules, Files: c.files, started: func(s *server) { started <- s },
		})
		fromServer.Close()
		// Nobody reads the requests any more; writing them must not block.
		go io.Copy(io.Discard, toServer)
		c.ended <- err
	}()
	c.server = <-started
	go c.read(toClient)
	t.Cleanup(func() {
		fromClient.Close()
		select {
		case <-c.finished:
		case <-time.After(patience):
			t.Error("the server did not end with its input")
		}
	})
	return c
}

func (c *client) read(r io.Reader) {
	defer close(c.finished)
	in := bufio.NewReader(r)
	for {
		header, err := textproto.NewReader(in).ReadMIMEHeader()
		if err != nil {
			return
		}
		n, err := strconv.Atoi(header.Get("Content-Length"))
		if err != nil {
			c.t.Errorf("bad frame from the server: %v", header)
			return
		}
		body := make([]byte, n)
		if _, err := io.ReadFull(in, body); err != nil {
			return
		}
		var m message
		if err := json.Unmarshal(body, &m); err != nil {
			c.t.Errorf("bad message from the server: %v: %s", err, body)
			return
		}
		c.mu.Lock()
		switch ch := c.answers[string(m.ID)]; {
		case m.Method != "":
			c.notices = append(c.notices, m)
		case ch != nil:
			delete(c.answers, string(m.ID))
			ch <- m
		default:
			c.strays = append(c.strays, m)
		}
		c.mu.Unlock()
	}
}

// send writes a message body as it is.
func (c *client) send(body string) {
	c.t.Helper()
	if _, err := fmt.Fprintf(c.in, "Content-Length: %d\r\n\r\n%s", len(body), body); err != nil {
		c.t.Fatalf("the server no longer reads: %v", err)
	}
}

// notify sends a notification.
func (c *client) notify(method string, params any) {
	c.t.Helper()
	c.send(encode(map[string]any{"jsonrpc": "2.0", "method": method, "params": params}))
}

// start sends a request; the channel gives the answer.
func (c *client) start(method string, params any) (id int, answer chan message) {
	c.t.Helper()
	c.nextID++
	answer = make(chan message, 1)
	c.mu.Lock()
	c.answers[strconv.Itoa(c.nextID)] = answer
	c.mu.Unlock()
	c.send(encode(map[string]any{"jsonrpc": "2.0", "id": c.nextID, "method": method, "params": params}))
	return c.nextID, answer
}

// call sends a request and waits for its answer.
func (c *client) call(method string, params any) message {
	c.t.Helper()
	_, answer := c.start(method, params)
	return c.wait(method, answer)
}

func (c *client) wait(method string, answer chan message) message {
	c.t.Helper()
	select {
	case m := <-answer:
		return m
	case <-c.finished:
		c.t.Fatalf("the connection ended before %s was answered", method)
	case <-time.After(patience):
		c.t.Fatalf("%s was not answered", method)
	}
	return message{}
}

// idle waits until everything sent has been dealt with and everything published
// has arrived, and gives the notices that came since the last time.
func (c *client) idle() []message {
	c.t.Helper()
	// Messages act in order: when this one is answered, all before it are done.
	c.call("test/echo", nil)
	ctx, cancel := context.WithTimeout(context.Background(), patience)
	defer cancel()
	if err := c.server.diagnostics.idle(ctx); err != nil {
		c.t.Fatalf("the diagnostics did not settle: %v", err)
	}
	c.call("test/echo", nil)
	c.mu.Lock()
	defer c.mu.Unlock()
	got := c.notices
	c.notices = nil
	return got
}

// initialize is the usual beginning of a session.
func (c *client) initialize(encodings ...string) message {
	c.t.Helper()
	m := c.call("initialize", map[string]any{
		"processId": nil, "rootUri": nil,
		"capabilities": map[string]any{
			"general":      map[string]any{"positionEncodings": encodings},
			"textDocument": map[string]any{"hover": map[string]any{"contentFormat": c.formats}},
		},
	})
	c.notify("initialized", map[string]any{})
	return m
}

func (c *client) open(path, text string) {
	c.t.Helper()
	c.notify("textDocument/didOpen", map[string]any{"textDocument": map[string]any{
		"uri": uriOf(path), "languageId": "spice-deck", "version": 1, "text": text,
	}})
}

func encode(v any) string {
	b, err := json.Marshal(v)
	if err != nil {
		panic(err)
	}
	return string(b)
}

// memory is a file system that a test may write to while the server reads.
type memory struct {
	mu    sync.Mutex
	files map[string]string
	held  map[string]gate
}

// gate holds whoever reads a file until a test lets go.
type gate struct{ entered, release chan struct{} }

// hold has the reading of a path wait.
func (m *memory) hold(path string) gate {
	m.mu.Lock()
	defer m.mu.Unlock()
	g := gate{make(chan struct{}, 8), make(chan struct{})}
	m.held = map[string]gate{path: g}
	return g
}

func (m *memory) ReadFile(path string) ([]byte, error) {
	m.mu.Lock()
	g, held := m.held[path]
	m.mu.Unlock()
	if held {
		g.entered <- struct{}{}
		<-g.release
	}
	m.mu.Lock()
	defer m.mu.Unlock()
	if s, ok := m.files[path]; ok {
		return []byte(s), nil
	}
	return nil, &fs.PathError{Op: "open", Path: path, Err: fs.ErrNotExist}
}

func (m *memory) write(path, text string) {
	m.mu.Lock()
	defer m.mu.Unlock()
	m.files[path] = text
}
