package settings

import (
	"errors"
	"strconv"
	"strings"

	"github.com/pelletier/go-toml/v2"
	"github.com/pelletier/go-toml/v2/unstable"

	"triodeck/parser/source"
)

// kind says what a value is.
type kind uint8

const (
	other kind = iota // a date or another thing that no setting takes
	tableValue
	arrayValue
	stringValue
	numberValue
	boolValue
)

// node is a value of the file with the places of it and of its key.
type node struct {
	kind   kind
	key    string
	at     source.Span // of the key; of the value inside an array
	span   source.Span // of the value; of the header for a table
	text   string      // of a string
	number float64
	fields []*node // of a table, in the order of the text
	items  []*node // of an array
}

func (n *node) field(name string) *node {
	for _, f := range n.fields {
		if f.key == name {
			return f
		}
	}
	return nil
}

// parseTree reads a text; the problem is its first error of syntax.
func parseTree(src []byte) (*node, *Problem) {
	root := &node{kind: tableValue}
	var all map[string]any
	if err := toml.Unmarshal(src, &all); err != nil {
		return root, syntaxProblem(src, err)
	}
	var p unstable.Parser
	p.Reset(src)
	at := root
	for p.NextExpression() {
		e := p.Expression()
		switch e.Kind {
		case unstable.Table:
			at = descend(root, e.Key())
		case unstable.ArrayTable:
			at = appendTable(root, e.Key())
		case unstable.KeyValue:
			keyValue(at, e)
		}
	}
	return root, nil
}

func syntaxProblem(src []byte, err error) *Problem {
	var bad *toml.DecodeError
	if !errors.As(err, &bad) {
		return &Problem{Message: "the file cannot be read: " + err.Error()}
	}
	row, column := bad.Position()
	line := source.NewLineIndex(string(src)).LineSpan(row - 1)
	start := min(line.Start+int32(column-1), line.End)
	message := strings.TrimPrefix(bad.Error(), "toml: ")
	return &Problem{source.Span{Start: start, End: line.End}, "the file cannot be read: " + message}
}

func spanOf(n *unstable.Node) source.Span {
	return source.Span{Start: int32(n.Raw.Offset), End: int32(n.Raw.Offset + n.Raw.Length)}
}

// descend leads a dotted key to its table, made where it is new. An array of
// tables stands for its last one.
func descend(from *node, key unstable.Iterator) *node {
	for key.Next() {
		k := key.Node()
		next := from.field(string(k.Data))
		if next == nil {
			next = &node{kind: tableValue, key: string(k.Data), at: spanOf(k), span: spanOf(k)}
			from.fields = append(from.fields, next)
		}
		if next.kind == arrayValue && len(next.items) > 0 {
			next = next.items[len(next.items)-1]
		}
		from = next
	}
	return from
}

func appendTable(from *node, key unstable.Iterator) *node {
	for key.Next() {
		k := key.Node()
		if !key.IsLast() {
			from = descendOne(from, k)
			continue
		}
		list := from.field(string(k.Data))
		if list == nil {
			list = &node{kind: arrayValue, key: string(k.Data), at: spanOf(k), span: spanOf(k)}
			from.fields = append(from.fields, list)
		}
		item := &node{kind: tableValue, at: spanOf(k), span: spanOf(k)}
		list.items = append(list.items, item)
		return item
	}
	return from
}

func descendOne(from *node, k *unstable.Node) *node {
	next := from.field(string(k.Data))
	if next == nil {
		next = &node{kind: tableValue, key: string(k.Data), at: spanOf(k), span: spanOf(k)}
		from.fields = append(from.fields, next)
	}
	if next.kind == arrayValue && len(next.items) > 0 {
		return next.items[len(next.items)-1]
	}
	return next
}

func keyValue(from *node, e *unstable.Node) {
	key := e.Key()
	for key.Next() {
		k := key.Node()
		if !key.IsLast() {
			from = descendOne(from, k)
			continue
		}
		v := value(e.Value())
		v.key, v.at = string(k.Data), spanOf(k)
		if v.kind == tableValue || v.kind == arrayValue {
			v.span = v.at // their own extent is not told
		}
		from.fields = append(from.fields, v)
	}
}

func value(n *unstable.Node) *node {
	v := &node{span: spanOf(n), at: spanOf(n)}
	switch n.Kind {
	case unstable.String:
		v.kind, v.text = stringValue, string(n.Data)
	case unstable.Integer, unstable.Float:
		v.number, v.kind = numberOf(string(n.Data)), numberValue
	case unstable.Bool:
		v.kind = boolValue
	case unstable.Array:
		v.kind = arrayValue
		for it := n.Children(); it.Next(); {
			if it.Node().Kind != unstable.Comment {
				v.items = append(v.items, value(it.Node()))
			}
		}
	case unstable.InlineTable:
		v.kind = tableValue
		for it := n.Children(); it.Next(); {
			if it.Node().Kind == unstable.KeyValue {
				keyValue(v, it.Node())
			}
		}
	}
	return v
}

func numberOf(text string) float64 {
	text = strings.ReplaceAll(text, "_", "")
	if i, err := strconv.ParseInt(text, 0, 64); err == nil {
		return float64(i)
	}
	x, _ := strconv.ParseFloat(text, 64)
	return x
}
