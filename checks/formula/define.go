package formula

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"eliminant/checks/diag"
)

// definition is a name of ParseOptions.Defines that has been read.
type definition struct {
	root    Node
	reading bool // not done yet
	size    int  // nodes
	depth   int  // levels of nesting
}

// validName tells whether a name is letters, digits and _, beginning with a
// letter.
func validName(name string) bool {
	l := lexer{text: name, line: 1}
	t := l.next()
	return t.kind == tokenName && t.start == 0 && t.end == len(name)
}

// nameFault tells whether no definition may have a name, and reports it once.
func (p *parser) nameFault(t token, name string) bool {
	good := validName(name)
	if good && !Reserved(name) {
		return false
	}
	if d := p.defined[name]; d != nil {
		return true
	}
	p.enter(name, &definition{root: zero()})
	if good {
		p.fail(t, "define", "choose another name", "the definition of %s takes a name that belongs to the language", name)
	} else {
		p.fail(t, "define", "names are letters, digits and _, beginning with a letter", "%q is no name for a definition", shorten(name))
	}
	return true
}

// enter remembers a definition.
func (c *common) enter(name string, d *definition) {
	if c.defined == nil {
		c.defined = map[string]*definition{}
	}
	c.defined[name] = d
}

// originOf says where the text of a definition begins.
func (c *common) originOf(name string) Origin {
	if at, ok := c.o.DefinedAt[name]; ok {
		return at
	}
	return Origin{File: "[define] " + name}
}

// definition puts the tree of a defined name in place. Every definition is read
// once and its tree shared.
func (p *parser) definition(t token, name, text string) Node {
	if p.nameFault(t, name) {
		return zero()
	}
	d := p.defined[name]
	if d != nil && d.reading {
		from := slices.Index(p.defining, name)
		p.fail(t, "define", "definitions must not lead back to themselves", "the definition of %s uses itself: %s",
			name, strings.Join(append(slices.Clone(p.defining[from:]), name), " -> "))
		return zero()
	}
	if d == nil {
		if d = p.read(t, name, text); d == nil {
			return zero()
		}
	}
	p.deepest = max(p.deepest, p.depth+d.depth)
	if p.deepest > MaxDepth {
		p.fail(t, "too-deep", "use fewer parentheses", "nesting deeper than %d in the definition of %s", MaxDepth, name)
		p.stopped = true
		return zero()
	}
	if p.expansion += d.size; p.expansion > MaxTerms {
		p.fail(t, "too-large", "", "definitions expand to more than %d terms", MaxTerms)
		p.stopped = true
		return zero()
	}
	return d.root
}

// read reads the text of a definition; nil if reading had to stop.
func (p *parser) read(t token, name, text string) *definition {
	if !p.deeper(t) {
		return nil
	}
	d := &definition{reading: true}
	p.enter(name, d)
	faults := len(p.errs)
	inner := newParser(text, p.originOf(name), p.common)
	inner.depth, inner.deepest = p.depth, p.depth
	inner.defining = append(slices.Clip(p.defining), name)
	d.root = inner.whole()
	p.depth--
	d.depth = inner.deepest - p.depth
	d.reading = false
	walk(d.root, func(Node) { d.size++ })
	p.adopt(t, name, faults)
	if p.stopped {
		return nil
	}
	return d
}

// adopt words the faults found in a definition, those from the given one on. A
// definition whose place is not known has them reported where it is used.
func (p *parser) adopt(t token, name string, from int) {
	if _, known := p.o.DefinedAt[name]; known {
		return
	}
	here := p.diagnostic(t, t.end)
	for i, e := range p.errs[from:] {
		if e.File != p.originOf(name).File {
			continue
		}
		d := here
		d.Code, d.Message, d.Hint = e.Code, e.Message, e.Hint
		switch {
		case e.Code == "define":
		case e.Line == 1:
			d.Message = fmt.Sprintf("in the definition of %s, column %d: %s", name, e.Column, e.Message)
		default:
			d.Message = fmt.Sprintf("in the definition of %s, line %d, column %d: %s", name, e.Line, e.Column, e.Message)
		}
		p.errs[from+i] = d
	}
}

// CheckDefinitions reads every definition of the options, in the order of their
// names, and returns what is wrong with them: names that belong to the language,
// texts that do not parse, definitions that lead back to themselves. Parse
// reports the same of the definitions that its formula uses.
func CheckDefinitions(o ParseOptions) diag.List {
	c := &common{o: o}
	names := slices.Sorted(maps.Keys(o.Defines))
	start := token{line: 1, column: 1}
	at := func(name string) *parser {
		if known, ok := o.DefinedAt[name]; ok {
			return newParser("", known, c)
		}
		return newParser("", Origin{o.File, o.Line, o.Column, o.Locate}, c)
	}
	for _, name := range names {
		at(name).nameFault(start, name)
	}
	for _, name := range names {
		if c.defined[name] == nil && !c.stopped {
			at(name).read(start, name, o.Defines[name])
			c.expansion = 0
		}
	}
	c.errs.Sort()
	return c.errs
}
