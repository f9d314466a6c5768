package kinematics

import (
	"fmt"
	"slices"
	"strconv"
	"unicode/utf8"
)

// node is one value of a JSON text together with its position.
type node struct {
	kind   byte // '{' '[' '"' '0' (number) 't' 'f' 'n'
	offset int
	text   string // of a string, decoded; of a number, as written
	items  []*node
	keys   []key // of an object, beside items
}

type key struct {
	name   string
	offset int
}

// child returns the value of a key, nil if it is absent.
func (n *node) child(name string) *node {
	if n == nil || n.kind != '{' {
		return nil
	}
	for i, k := range n.keys {
		if k.name == name {
			return n.items[i]
		}
	}
	return nil
}

// item returns an entry of an array, nil if it is absent.
func (n *node) item(i int) *node {
	if n == nil || n.kind != '[' || i < 0 || i >= len(n.items) {
		return nil
	}
	return n.items[i]
}

// describe names the kind of value for messages.
func (n *node) describe() string {
	switch n.kind {
	case '{':
		return "an object"
	case '[':
		return "an array"
	case '"':
		if len(n.text) > 40 {
			return "a string"
		}
		return "the string " + strconv.Quote(n.text)
	case '0':
		if len(n.text) > 40 {
			return "a number"
		}
		return "the number " + n.text
	case 't':
		return "true"
	case 'f':
		return "false"
	}
	return "null"
}

// Limits of a document: nesting and number of values.
const (
	maxDepth  = 8
	maxValues = 1 << 20
)

// syntaxError is a violation of JSON (RFC 8259) or of a limit, at an offset.
type syntaxError struct {
	offset int
	reason string
}

func (e *syntaxError) Error() string { return e.reason }

// jsonParser reads JSON and keeps the positions. Keys of an object must be
// distinct.
type jsonParser struct {
	src    []byte
	pos    int
	values int
}

// parseJSON reads one JSON value and nothing after it.
func parseJSON(src []byte) (*node, *syntaxError) {
	p := &jsonParser{src: src}
	if len(src) >= 3 && src[0] == 0xEF && src[1] == 0xBB && src[2] == 0xBF {
		p.pos = 3 // byte order mark
	}
	if i := invalidUTF8(src); i >= 0 {
		return nil, &syntaxError{i, "not UTF-8"}
	}
	n, err := p.value(0)
	if err != nil {
		return nil, err
	}
	p.space()
	if p.pos < len(src) {
		return nil, p.unexpected("the end of the file")
	}
	return n, nil
}

func invalidUTF8(src []byte) int {
	if utf8.Valid(src) {
		return -1
	}
	for i := 0; i < len(src); {
		r, size := utf8.DecodeRune(src[i:])
		if r == utf8.RuneError && size == 1 {
			return i
		}
		i += size
	}
	return -1
}

func (p *jsonParser) space() {
	for p.pos < len(p.src) {
		switch p.src[p.pos] {
		case ' ', '\t', '\n', '\r':
			p.pos++
		default:
			return
		}
	}
}

// peek returns the next byte, 0 at the end.
func (p *jsonParser) peek() byte {
	if p.pos < len(p.src) {
		return p.src[p.pos]
	}
	return 0
}

func (p *jsonParser) unexpected(wanted string) *syntaxError {
	if p.pos >= len(p.src) {
		return &syntaxError{len(p.src), "expected " + wanted + ", the file ends here"}
	}
	r, _ := utf8.DecodeRune(p.src[p.pos:])
	return &syntaxError{p.pos, fmt.Sprintf("expected %s, found %q", wanted, r)}
}

func (p *jsonParser) value(depth int) (*node, *syntaxError) {
	p.space()
	if p.values++; p.values > maxValues {
		return nil, &syntaxError{p.pos, fmt.Sprintf("more than %d values", maxValues)}
	}
	if depth > maxDepth {
		return nil, &syntaxError{p.pos, fmt.Sprintf("nested more than %d levels deep", maxDepth)}
	}
	n := &node{offset: p.pos}
	switch c := p.peek(); {
	case c == '{':
		return n, p.object(n, depth)
	case c == '[':
		return n, p.array(n, depth)
	case c == '"':
		text, err := p.quoted()
		n.kind, n.text = '"', text
		return n, err
	case c == '-' || c >= '0' && c <= '9':
		return n, p.number(n)
	}
	for _, word := range []string{"true", "false", "null"} {
		if end := p.pos + len(word); end <= len(p.src) && string(p.src[p.pos:end]) == word {
			n.kind = word[0]
			p.pos = end
			return n, nil
		}
	}
	return nil, p.unexpected("a value")
}

func (p *jsonParser) array(n *node, depth int) *syntaxError {
	n.kind = '['
	p.pos++
	if p.space(); p.peek() == ']' {
		p.pos++
		return nil
	}
	for {
		v, err := p.value(depth + 1)
		if err != nil {
			return err
		}
		n.items = append(n.items, v)
		p.space()
		switch p.peek() {
		case ',':
			p.pos++
		case ']':
			p.pos++
			return nil
		default:
			return p.unexpected("',' or ']'")
		}
	}
}

func (p *jsonParser) object(n *node, depth int) *syntaxError {
	n.kind = '{'
	p.pos++
	if p.space(); p.peek() == '}' {
		p.pos++
		return nil
	}
	for {
		p.space()
		offset := p.pos
		if p.peek() != '"' {
			return p.unexpected("a key in quotes")
		}
		name, err := p.quoted()
		if err != nil {
			return err
		}
		if slices.ContainsFunc(n.keys, func(k key) bool { return k.name == name }) {
			return &syntaxError{offset, fmt.Sprintf("the key %q is given twice", name)}
		}
		if len(n.keys) == maxKeys {
			return &syntaxError{offset, fmt.Sprintf("more than %d keys in one object", maxKeys)}
		}
		if p.space(); p.peek() != ':' {
			return p.unexpected("':'")
		}
		p.pos++
		v, err := p.value(depth + 1)
		if err != nil {
			return err
		}
		n.keys = append(n.keys, key{name, offset})
		n.items = append(n.items, v)
		p.space()
		switch p.peek() {
		case ',':
			p.pos++
		case '}':
			p.pos++
			return nil
		default:
			return p.unexpected("',' or '}'")
		}
	}
}

// maxKeys bounds the keys of an object.
const maxKeys = 100

// quoted reads a string; strconv decodes nothing that JSON writes differently
// but the escapes, which are done here.
func (p *jsonParser) quoted() (string, *syntaxError) {
	start := p.pos
	p.pos++
	var out []byte
	for {
		if p.pos >= len(p.src) {
			return "", &syntaxError{start, "the string that begins here has no closing quote"}
		}
		c := p.src[p.pos]
		switch {
		case c == '"':
			p.pos++
			return string(out), nil
		case c < ' ':
			return "", &syntaxError{p.pos, "a control character inside a string"}
		case c == '\\':
			r, err := p.escape()
			if err != nil {
				return "", err
			}
			out = utf8.AppendRune(out, r)
		default:
			out = append(out, c)
			p.pos++
		}
	}
}

// escape reads a backslash sequence.
func (p *jsonParser) escape() (rune, *syntaxError) {
	bad := &syntaxError{p.pos, "not an escape sequence of JSON"}
	if p.pos+1 >= len(p.src) {
		return 0, bad
	}
	c := p.src[p.pos+1]
	if c != 'u' {
		const from, to = `"\/bfnrt`, "\"\\/\b\f\n\r\t"
		for i := range len(from) {
			if from[i] == c {
				p.pos += 2
				return rune(to[i]), nil
			}
		}
		return 0, bad
	}
	r, ok := p.hex(p.pos + 2)
	if !ok {
		return 0, bad
	}
	p.pos += 6
	if r < 0xD800 || r > 0xDFFF {
		return r, nil
	}
	// a surrogate is half of a character
	if r < 0xDC00 && p.pos+1 < len(p.src) && p.src[p.pos] == '\\' && p.src[p.pos+1] == 'u' {
		if low, ok := p.hex(p.pos + 2); ok && low >= 0xDC00 && low <= 0xDFFF {
			p.pos += 6
			return 0x10000 + (r-0xD800)<<10 + (low - 0xDC00), nil
		}
	}
	bad.reason = "half of a surrogate pair"
	return 0, bad
}

// hex reads four hexadecimal digits.
func (p *jsonParser) hex(at int) (rune, bool) {
	if at+4 > len(p.src) {
		return 0, false
	}
	for _, c := range p.src[at : at+4] {
		if (c < '0' || c > '9') && (c|0x20 < 'a' || c|0x20 > 'f') {
			return 0, false
		}
	}
	v, err := strconv.ParseUint(string(p.src[at:at+4]), 16, 16)
	return rune(v), err == nil
}

// number reads a number as JSON writes it and keeps its text.
func (p *jsonParser) number(n *node) *syntaxError {
	n.kind = '0'
	start := p.pos
	if p.peek() == '-' {
		p.pos++
	}
	leading := p.pos
	if !p.run() {
		return p.unexpected("a digit")
	}
	if p.src[leading] == '0' && p.pos > leading+1 {
		return &syntaxError{start, "a number with leading zeros"}
	}
	if p.peek() == '.' {
		p.pos++
		if !p.run() {
			return p.unexpected("a digit")
		}
	}
	if c := p.peek(); c == 'e' || c == 'E' {
		p.pos++
		if c := p.peek(); c == '+' || c == '-' {
			p.pos++
		}
		if !p.run() {
			return p.unexpected("a digit")
		}
	}
	n.text = string(p.src[start:p.pos])
	return nil
}

// run skips digits and reports whether there were any.
func (p *jsonParser) run() bool {
	start := p.pos
	for c := p.peek(); c >= '0' && c <= '9'; c = p.peek() {
		p.pos++
	}
	return p.pos > start
}
