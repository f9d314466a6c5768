package formula

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"

	"eliminant/checks/diag"
)

// Limits of the language. What exceeds them is refused with a message that
// names the limit.
const (
	MaxText     = 4 << 20 // bytes of one formula
	MaxDepth    = 400     // nested parentheses, braces and definitions
	MaxExponent = 1000    // of ^, in absolute value
	MaxDigits   = 4096    // of a number
	MaxLegs     = 64      // largest leg
	MaxPerms    = 8       // legs of one perms(){}
	MaxTerms    = 1 << 20 // leaves after expanding definitions, cyclic{} and perms(){}
	maxErrors   = 50      // reported per formula
)

// ParseOptions says where a text stands and what names it may use; the zero
// value works.
type ParseOptions struct {
	File         string
	Line, Column int // of the first character; 0 means 1
	// Locate gives the place of the character at an offset in bytes, for a text
	// that does not stand in its file as it is (diag.LocateTOML); nil: it does,
	// from Line and Column on.
	Locate  func(offset int) (line, column int)
	Defines map[string]string // names usable in the formula, with their texts
	// DefinedAt says where the texts of Defines begin. Spans in the definition of
	// a name without a place are in a file called "[define] NAME".
	DefinedAt map[string]Origin
	Integrand bool // punctures, PT, detPhi and J in place of amplitudes
}

// Origin is where a text begins, as in ParseOptions.
type Origin struct {
	File         string
	Line, Column int
	Locate       func(offset int) (line, column int)
}

// Parse reads a formula. All errors are returned together, in the order of
// their places, each with line and column, what was expected and what to try.
// Cost: linear in the text and its definitions.
func Parse(text string, o ParseOptions) (*Formula, diag.List) {
	p := newParser(text, Origin{o.File, o.Line, o.Column, o.Locate}, &common{o: o})
	root := p.whole()
	if len(p.errs) > 0 {
		p.errs.Sort()
		return nil, p.errs
	}
	f := &Formula{Root: root, Text: strings.TrimSpace(strings.TrimPrefix(text, byteOrderMark))}
	legs, tells := f.Legs()
	if tells {
		if errs := checkAmplitudes(root, legs); len(errs) > 0 {
			return nil, errs
		}
	}
	if errs := checkPowers(root, legs); len(errs) > 0 {
		return nil, errs
	}
	return f, nil
}

// common is what the parsers of a formula and of its definitions share.
type common struct {
	o         ParseOptions
	defined   map[string]*definition
	expansion int  // nodes that definitions have expanded to
	stopped   bool // too deep or too many errors: unwind quietly
	plain     bool // hints need not be worded
	errs      diag.List
}

// parser reads one text.
type parser struct {
	*common
	text     string
	origin   Origin
	lex      lexer
	tok      token // the next one
	last     int   // end of the token before
	depth    int
	deepest  int      // largest depth so far
	defining []string // definitions being read
	fault    int      // offset of the last fault: one is reported per place
	legs     []int    // scratch of list
	places   []token  // scratch of list
}

// byteOrderMark is what some editors write before a text.
const byteOrderMark = "\ufeff"

func newParser(text string, at Origin, c *common) *parser {
	at.Line, at.Column = max(at.Line, 1), max(at.Column, 1)
	p := &parser{common: c, text: text, origin: at, fault: -1}
	p.lex = lexer{text: text, line: 1}
	if strings.HasPrefix(text, byteOrderMark) {
		p.lex.at, p.lex.base = len(byteOrderMark), len(byteOrderMark)
	}
	return p
}

// whole reads the text to its end.
func (p *parser) whole() Node {
	if len(p.text) > MaxText {
		p.fail(token{line: 1, column: 1}, "too-large", "split it with [define] names", "the formula has %d bytes, at most %d are read", len(p.text), MaxText)
		return zero()
	}
	if !utf8.ValidString(p.text) {
		p.fail(p.invalid(), "encoding", "save the text as UTF-8", "the formula is not valid UTF-8 from here on")
		return zero()
	}
	p.tok = p.lex.next()
	if p.tok.kind == tokenEnd {
		p.fail(p.tok, "empty", "write a formula, for instance s12 or BS(1,2,3,4|1,3,2,4)", "the formula is empty")
		return zero()
	}
	n := p.sum()
	for p.tok.kind != tokenEnd && !p.stopped {
		p.surplus()
		if p.tok.kind != tokenEnd {
			p.sum()
		}
	}
	return n
}

// surplus reports and passes what no formula can go on with.
func (p *parser) surplus() {
	t := p.tok
	switch t.symbol {
	case ')', '}', ']', '>':
		p.fail(t, "unbalanced", "delete it or open it before", "%q closes nothing", p.of(t))
		for p.tok.symbol != 0 && strings.IndexByte(")}]>", p.tok.symbol) >= 0 {
			p.advance()
		}
	case '{':
		p.fail(t, "syntax", "braces belong to cyclic{...}, perms(...){...} and phi3{...}, with no space before them", "unexpected %s", p.describe(t))
		p.advance()
		p.skipGroup()
	case ',':
		p.fail(t, "syntax", "numbers have no separators and a formula is one expression", "unexpected %s", p.describe(t))
		p.advance()
	default:
		p.fail(t, "syntax", "", "unexpected %s", p.describe(t))
		p.advance()
	}
	if p.tok.symbol == '*' || p.tok.symbol == '/' {
		p.advance()
	}
}

// invalid returns the place of the first byte that is not UTF-8.
func (p *parser) invalid() token {
	t := token{line: 1, column: 1}
	for i, r := range p.text {
		t.start, t.end = i, i+1
		if r == utf8.RuneError && !utf8.FullRuneInString(p.text[i:]) {
			break
		}
		if _, size := utf8.DecodeRuneInString(p.text[i:]); r == utf8.RuneError && size == 1 {
			break
		}
		if r == '\n' {
			t.line, t.column = t.line+1, 1
		} else {
			t.column++
		}
	}
	return t
}

// advance takes the next token.
func (p *parser) advance() token {
	t := p.tok
	p.last = t.end
	p.tok = p.lex.next()
	return t
}

// is tells whether the next token is the symbol.
func (p *parser) is(symbol byte) bool { return p.tok.symbol == symbol }

// touches tells whether the next token is the symbol, with no space before it.
func (p *parser) touches(symbol byte) bool { return p.tok.symbol == symbol && !p.tok.spaced }

// of returns the text of a token.
func (p *parser) of(t token) string { return p.text[t.start:t.end] }

func (p *parser) place(t token) (line, column int) {
	switch {
	case p.origin.Locate != nil:
		return p.origin.Locate(t.start)
	case t.line == 1:
		return p.origin.Line, p.origin.Column + t.column - 1
	}
	return p.origin.Line + t.line - 1, t.column
}

// from returns the span from a token to the last one taken.
func (p *parser) from(t token) span {
	line, column := p.place(t)
	return span{Span{p.origin.File, line, column, max(p.last-t.start, 0)}}
}

// fail reports a fault at a token, see failAt.
func (p *parser) fail(t token, code, hint, format string, a ...any) {
	p.failAt(t, t.end, code, hint, format, a...)
}

// failAt reports a fault in the text from a token to an offset. A second fault
// at the same place is a consequence of the first and not reported.
func (p *parser) failAt(t token, end int, code, hint, format string, a ...any) {
	if p.stopped || t.start == p.fault {
		return
	}
	p.fault = t.start
	d := p.diagnostic(t, end)
	d.Code, d.Message, d.Hint = code, fmt.Sprintf(format, a...), hint
	p.errs = append(p.errs, d)
	if len(p.errs) >= maxErrors {
		p.stopped = true
		p.lex.at = len(p.text) // the rest is not read
	}
}

// diagnostic returns one without its words, for the text from a token to an
// offset.
func (p *parser) diagnostic(t token, end int) diag.Diagnostic {
	d := diag.Diagnostic{File: p.origin.File}
	d.Line, d.Column = p.place(t)
	if end > t.start && end <= len(p.text) {
		d.Length = utf8.RuneCountInString(p.text[t.start:end])
	}
	from := strings.LastIndexByte(p.text[:t.start], '\n') + 1
	to := len(p.text)
	if i := strings.IndexByte(p.text[t.start:], '\n'); i >= 0 {
		to = t.start + i
	}
	if d.Column >= t.column {
		// what stands before the text in its line is not known here
		d.Source = strings.Repeat(" ", d.Column-t.column) + strings.ToValidUTF8(strings.TrimSuffix(p.text[from:to], "\r"), "\ufffd")
	}
	return d
}

func (p *parser) describe(t token) string {
	if t.kind == tokenEnd {
		return "end of the formula"
	}
	return strconv.Quote(shorten(p.of(t)))
}

func shorten(s string) string {
	if len(s) > 40 {
		return s[:17] + "..."
	}
	return s
}

// deeper guards every recursion of the grammar; false: unwind.
func (p *parser) deeper(t token) bool {
	p.depth++
	p.deepest = max(p.deepest, p.depth)
	if p.depth > MaxDepth {
		p.fail(t, "too-deep", "use fewer parentheses", "nesting deeper than %d", MaxDepth)
		p.stopped = true
	}
	if p.stopped {
		p.depth--
		p.lex.at = len(p.text)
		p.tok = p.lex.next()
		return false
	}
	return true
}
