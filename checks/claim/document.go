package claim

import (
	"bytes"
	"errors"
	"fmt"
	"strconv"
	"strings"

	"eliminant/checks/diag"

	"github.com/pelletier/go-toml/v2"
	"github.com/pelletier/go-toml/v2/unstable"
)

// value is one TOML value with the place it stands at, so that every message
// about a claims file can point into it.
type value struct {
	kind         unstable.Kind
	text         string  // strings: decoded; others: as written
	items        []value // arrays
	line, column int     // of the first character of a string's content
}

// entry is one key of a section.
type entry struct {
	key          string
	value        value
	line, column int
}

// section is the top of the file or one table.
type section struct {
	name         string // "", "define", "claim", ...
	array        bool   // [[name]]
	line, column int
	entries      []entry
}

// maxFile is the largest claims file read, in bytes.
const maxFile = 16 << 20

// readDocument splits a TOML text into sections with positions. Syntax errors
// and duplicate keys are returned as diagnostics.
func readDocument(file string, text []byte) ([]section, diag.List) {
	if len(text) > maxFile {
		return nil, diag.List{{Code: "too-large", File: file, Message: fmt.Sprintf("the file has %d bytes, at most %d are read", len(text), maxFile)}}
	}
	text = bytes.TrimPrefix(text, []byte("\xef\xbb\xbf")) // editors put a byte order mark there
	// the decoder knows all of TOML's rules, duplicate keys among them
	var all map[string]any
	if err := toml.Unmarshal(text, &all); err != nil {
		d := diag.Diagnostic{Code: "toml", File: file, Message: err.Error(), Hint: "a claims file is TOML 1.0: key = \"value\" lines and [[claim]] tables"}
		var de *toml.DecodeError
		if errors.As(err, &de) {
			d.Line, d.Column = de.Position()
			d.Message = strings.TrimPrefix(de.Error(), "toml: ")
		}
		return nil, diag.List{d}
	}
	var p unstable.Parser
	p.Reset(text)
	sections := []section{{line: 1, column: 1}}
	for p.NextExpression() {
		e := p.Expression()
		switch e.Kind {
		case unstable.Table, unstable.ArrayTable:
			s := section{array: e.Kind == unstable.ArrayTable}
			s.name, s.line, s.column = dotted(&p, e.Key())
			sections = append(sections, s)
		case unstable.KeyValue:
			s := &sections[len(sections)-1]
			var en entry
			en.key, en.line, en.column = dotted(&p, e.Key())
			en.value = convert(&p, text, e.Value())
			if en.value.line == 0 {
				en.value.line, en.value.column = en.line, en.column
			}
			s.entries = append(s.entries, en)
		}
	}
	if err := p.Error(); err != nil {
		return nil, diag.List{{Code: "toml", File: file, Message: err.Error()}}
	}
	return sections, nil
}

// dotted joins the parts of a key and tells where it begins.
func dotted(p *unstable.Parser, it unstable.Iterator) (name string, line, column int) {
	var parts []string
	for it.Next() {
		n := it.Node()
		if line == 0 {
			start := p.Shape(n.Raw).Start
			line, column = start.Line, start.Column
		}
		parts = append(parts, string(n.Data))
	}
	return strings.Join(parts, "."), line, column
}

// convert copies a value out of the parser.
func convert(p *unstable.Parser, text []byte, n *unstable.Node) value {
	v := value{kind: n.Kind, text: string(n.Data)}
	if n.Raw.Length > 0 {
		start := p.Shape(n.Raw).Start
		v.line, v.column = start.Line, start.Column
		if n.Kind == unstable.String {
			// step over the opening quotes; a multi-line string also drops
			// the line end right after them
			raw := text[n.Raw.Offset : n.Raw.Offset+n.Raw.Length]
			switch {
			case len(raw) >= 6 && (strings.HasPrefix(string(raw), `"""`) || strings.HasPrefix(string(raw), "'''")):
				v.column += 3
				if rest := strings.TrimPrefix(string(raw[3:]), "\r"); strings.HasPrefix(rest, "\n") {
					v.line, v.column = v.line+1, 1
				}
			default:
				v.column++
			}
		}
	}
	if n.Kind == unstable.Array {
		for it := n.Children(); it.Next(); {
			if it.Node().Kind != unstable.Comment {
				v.items = append(v.items, convert(p, text, it.Node()))
			}
		}
	}
	return v
}

// describe names the kind of a value for messages.
func (v value) describe() string {
	switch v.kind {
	case unstable.String:
		return "the string " + strconv.Quote(v.text)
	case unstable.Array:
		return fmt.Sprintf("an array of %d values", len(v.items))
	case unstable.InlineTable:
		return "a table"
	}
	return strings.ToLower(v.kind.String()) + " " + v.text
}
