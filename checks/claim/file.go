// Package claim settles claims: equalities and relations between amplitudes,
// over all kinematics or at given points, by exact evaluation.
//
// A claim over all kinematics is tested in rounds, each at a fresh random point
// modulo a fresh random prime, until the proven bound on accepting a false
// claim is below what the file asks for. A refutation carries an exact rational
// point at which the two sides differ. What can be neither proved nor refuted
// is undecided, never certified.
package claim

import (
	"fmt"
	"math/big"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/rational/kinematics"

	"github.com/pelletier/go-toml/v2/unstable"
)

// DefaultBits is the default bound on false acceptance: 2^-DefaultBits.
const DefaultBits = 100

// MaxBits is the smallest bound on false acceptance that may be asked for.
const MaxBits = 100000

// File is a claims file, read and checked.
type File struct {
	Path   string
	Title  string
	Seed   string // decimal; part of what every random draw is hashed from
	Bits   float64
	Claims []Claim
}

// Masses says what the masses are over which a claim is tested.
type Masses struct {
	Free    bool     // one mass squared common to all legs, drawn like an invariant
	Squared *big.Rat // nil: massless, unless Free
}

// Claim is one claim to be settled.
type Claim struct {
	Name     string
	Kind     string              // "equal" or the name of the relation
	Sides    [2]*formula.Formula // of "equal"
	Of       *formula.Formula    // of a relation
	Legs     int
	Points   []*kinematics.Point // nil: all kinematics in any dimension
	Masses   Masses
	File     string
	Line     int
	defining map[string]string
}

// Relations lists the relations that can be claimed.
func Relations() []string {
	return []string{"bcj", "cyclicity", "kleiss-kuijf", "moebius", "reflection", "routes", "u1-decoupling"}
}

// laterRelations are part of the file format but come with other theories.
var laterRelations = []string{"gauge-invariance", "helicity-support", "klt-inverse", "weights"}

// Load reads a claims file. Every error of the file, of its formulas and of
// the points files it names is reported, together, as a diag.List.
func Load(path string) (*File, error) {
	text, err := os.ReadFile(path)
	if err != nil {
		return nil, diag.List{{Code: "unreadable", File: path, Message: err.Error(), Hint: "give the path of a claims file (TOML)"}}
	}
	l := &loader{path: path, dir: filepath.Dir(path), file: &File{Path: path, Bits: DefaultBits, Seed: "1"}}
	sections, errs := readDocument(path, text)
	if len(errs) > 0 {
		return nil, errs
	}
	l.read(sections)
	if len(l.errs) > 0 {
		return nil, l.errs
	}
	return l.file, nil
}

// loader gathers what a claims file says and everything wrong with it.
type loader struct {
	path, dir string
	file      *File
	errs      diag.List
	defines   map[string]string
	points    map[string][]*kinematics.Point
}

func (l *loader) fail(code string, line, column int, hint, format string, a ...any) {
	l.errs = append(l.errs, diag.Diagnostic{Code: code, File: l.path, Line: line, Column: column,
		Message: fmt.Sprintf(format, a...), Hint: hint})
}

func (l *loader) read(sections []section) {
	l.defines = map[string]string{}
	l.points = map[string][]*kinematics.Point{}
	for _, s := range sections {
		switch {
		case s.name == "":
			l.top(s)
		case s.name == "define" && !s.array:
			for _, e := range s.entries {
				if text, ok := l.text(e); ok {
					l.define(e, text)
				}
			}
		}
	}
	names := map[string]int{}
	for _, s := range sections {
		switch {
		case s.name == "" || s.name == "define" && !s.array:
		case s.name == "claim" && s.array:
			l.claim(s, names)
		case s.name == "claim" || s.name == "define":
			l.fail("table", s.line, s.column, "write [[claim]] for every claim and [define] once", "[%s] has the wrong number of brackets", s.name)
		case s.name == "reference" || s.name == "macros":
			l.fail("not-available", s.line, s.column, "", "[%s] is not available yet", s.name)
		default:
			l.fail("unknown-table", s.line, s.column, "tables are [define] and [[claim]]", "unknown table [%s]", s.name)
		}
	}
	if len(l.file.Claims) == 0 && len(l.errs) == 0 {
		l.fail("no-claims", 1, 1, "add a table [[claim]] with name = \"...\" and equal = [\"...\", \"...\"]", "the file has no claims")
	}
}

// top reads the keys before the first table.
func (l *loader) top(s section) {
	for _, e := range s.entries {
		switch e.key {
		case "title":
			if t, ok := l.text(e); ok {
				l.file.Title = t
			}
		case "seed":
			switch {
			case e.value.kind == unstable.Integer:
				if n, err := strconv.ParseInt(strings.ReplaceAll(e.value.text, "_", ""), 0, 64); err == nil {
					l.file.Seed = strconv.FormatInt(n, 10)
					continue
				}
				fallthrough
			default:
				l.fail("seed", e.value.line, e.value.column, "for instance seed = 20261201", "seed must be a 64-bit integer, found %s", e.value.describe())
			}
		case "false_acceptance":
			t, ok := l.text(e)
			if !ok {
				continue
			}
			bits, err := parseBound(t)
			if err != nil {
				l.fail("false-acceptance", e.value.line, e.value.column, "for instance false_acceptance = \"2^-100\"", "%v", err)
				continue
			}
			l.file.Bits = bits
		case "square_bracket":
			l.fail("not-available", e.line, e.column, "", "square_bracket is not available yet: there are no brackets in the formulas present")
		default:
			l.fail("unknown-key", e.line, e.column, "keys before the first table: title, seed, false_acceptance", "unknown key %q", e.key)
		}
	}
}

// parseBound reads "2^-100" or an exact fraction between 0 and 1 and returns
// its number of bits.
func parseBound(t string) (float64, error) {
	if exp, ok := strings.CutPrefix(strings.ReplaceAll(t, " ", ""), "2^-"); ok {
		n, err := strconv.Atoi(exp)
		if err != nil || n < 1 || n > MaxBits {
			return 0, fmt.Errorf("false_acceptance is 2^-N with N between 1 and %d, found %q", MaxBits, t)
		}
		return float64(n), nil
	}
	r, ok := new(big.Rat).SetString(t)
	if !ok || strings.ContainsAny(t, ".eEpPxX") || len(t) > 1000 || r.Sign() <= 0 || r.Cmp(big.NewRat(1, 1)) >= 0 {
		return 0, fmt.Errorf("false_acceptance must be \"2^-N\" or a fraction between 0 and 1, found %q", t)
	}
	// r < 2^(num - den + 1): rounded to the stricter side
	return float64(max(1, r.Denom().BitLen()-r.Num().BitLen()+1)), nil
}

// text expects a string.
func (l *loader) text(e entry) (string, bool) {
	if e.value.kind != unstable.String {
		l.fail("type", e.value.line, e.value.column, "put it in quotes", "%s must be a string, found %s", e.key, e.value.describe())
		return "", false
	}
	return e.value.text, true
}

// define remembers a name; its text is parsed here once so that a mistake is
// reported where it stands.
func (l *loader) define(e entry, text string) {
	l.defines[e.key] = text
	if strings.HasPrefix(text, "@") {
		if t, ok := l.include(text, e.value); ok {
			l.defines[e.key] = t
		}
	}
}

// maxFormulaFile is the largest formula file read, in bytes.
const maxFormulaFile = 1 << 20

// include reads a formula from the file named after @.
func (l *loader) include(text string, v value) (string, bool) {
	name := strings.TrimSpace(text[1:])
	path := name
	if !filepath.IsAbs(path) {
		path = filepath.Join(l.dir, name)
	}
	info, err := os.Stat(path)
	if err == nil && info.Size() > maxFormulaFile {
		err = fmt.Errorf("%s has %d bytes, at most %d are read", name, info.Size(), maxFormulaFile)
	}
	var b []byte
	if err == nil {
		b, err = os.ReadFile(path)
	}
	if err != nil {
		l.fail("unreadable", v.line, v.column, "paths are relative to the claims file", "%v", err)
		return "", false
	}
	return string(b), true
}

// formula parses a formula that stands in the file, or in a file it names.
func (l *loader) formula(v value) *formula.Formula {
	if v.kind != unstable.String {
		l.fail("type", v.line, v.column, "write the formula in quotes", "a formula must be a string, found %s", v.describe())
		return nil
	}
	o := formula.ParseOptions{File: l.path, Line: v.line, Column: v.column, Defines: l.defines}
	text := v.text
	if strings.HasPrefix(text, "@") {
		t, ok := l.include(text, v)
		if !ok {
			return nil
		}
		o.File, o.Line, o.Column, text = filepath.Join(l.dir, strings.TrimSpace(text[1:])), 1, 1, t
	}
	f, errs := formula.Parse(text, o)
	l.errs = append(l.errs, errs...)
	if len(errs) > 0 {
		return nil
	}
	return f
}

// claim reads one [[claim]].
func (l *loader) claim(s section, names map[string]int) {
	before := len(l.errs)
	c := Claim{File: l.path, Line: s.line}
	keys := map[string]entry{}
	for _, e := range s.entries {
		keys[e.key] = e
		switch e.key {
		case "name":
			c.Name, _ = l.text(e)
		case "equal":
			c.Kind = "equal"
			if e.value.kind != unstable.Array || len(e.value.items) != 2 {
				l.fail("equal", e.value.line, e.value.column, "write equal = [\"LEFT\", \"RIGHT\"]", "equal takes two formulas, found %s", e.value.describe())
				continue
			}
			for i, v := range e.value.items {
				c.Sides[i] = l.formula(v)
			}
		case "relation":
			if t, ok := l.text(e); ok {
				c.Kind = t
				l.relationName(e, t)
			}
		case "of":
			c.Of = l.formula(e.value)
		case "legs":
			n, err := strconv.Atoi(e.value.text)
			if e.value.kind != unstable.Integer || err != nil || n < kinematics.MinLegs || n > kinematics.MaxLegs {
				l.fail("legs", e.value.line, e.value.column, "", "legs must be an integer from %d to %d, found %s", kinematics.MinLegs, kinematics.MaxLegs, e.value.describe())
				continue
			}
			c.Legs = n
		case "points":
			c.Points = l.readPoints(e)
		case "space":
			t, ok := l.text(e)
			switch {
			case !ok || t == "any":
			case t == "4d":
				l.fail("not-available", e.value.line, e.value.column, "formulas of invariants are tested over \"any\"", "space = \"4d\" is not available yet")
			default:
				l.fail("space", e.value.line, e.value.column, "space = \"any\" draws every invariant freely", "unknown space %q", t)
			}
		case "masses_squared":
			c.Masses = l.masses(e)
		case "limit", "at", "order", "poles", "conditions", "square_bracket":
			l.fail("not-available", e.line, e.column, "", "%s is not available yet", e.key)
		default:
			l.fail("unknown-key", e.line, e.column, "keys of a claim: name, equal, relation, of, legs, points, space, masses_squared", "unknown key %q", e.key)
		}
	}
	l.complete(&c, s, keys, names)
	if len(l.errs) == before {
		c.defining = l.defines
		l.file.Claims = append(l.file.Claims, c)
	}
}

// complete checks what a claim needs as a whole.
func (l *loader) complete(c *Claim, s section, keys map[string]entry, names map[string]int) {
	if _, ok := keys["name"]; !ok {
		l.fail("name", s.line, s.column, "add name = \"...\"", "the claim has no name")
	} else if strings.TrimSpace(c.Name) == "" {
		l.fail("name", keys["name"].value.line, keys["name"].value.column, "", "the name is empty")
	} else if first, ok := names[c.Name]; ok {
		l.fail("duplicate-name", keys["name"].value.line, keys["name"].value.column, "every claim has a name of its own", "the name %q is taken by the claim at line %d", c.Name, first)
	} else {
		names[c.Name] = s.line
	}
	equal, isEqual := keys["equal"]
	relation, isRelation := keys["relation"]
	_, hasOf := keys["of"]
	switch {
	case isEqual && isRelation:
		l.fail("claim", relation.line, relation.column, "make two claims of it", "a claim has either equal or relation, this one has both")
	case !isEqual && !isRelation:
		for _, k := range []string{"limit", "poles"} {
			if _, later := keys[k]; later {
				return
			}
		}
		l.fail("claim", s.line, s.column, "add equal = [\"LEFT\", \"RIGHT\"], or relation = \"...\" with of = \"...\"", "the claim says nothing")
	case isEqual && hasOf:
		l.fail("claim", keys["of"].line, keys["of"].column, "of belongs to relation", "equal takes no of")
	case isRelation && !hasOf:
		l.fail("claim", relation.line, relation.column, "add of = \"BS(1,2,3,4|1,2,4,3)\"", "relation needs of")
	}
	if m, ok := keys["masses_squared"]; ok && c.Points != nil {
		l.fail("claim", m.line, m.column, "the points file carries the masses", "masses_squared and points exclude each other")
	}
	place := equal
	if isRelation {
		place = keys["of"]
	}
	l.countLegs(c, place)
	if isRelation && c.Of != nil {
		l.relationOf(c, keys["of"])
	}
}

// countLegs settles the number of legs of a claim.
func (l *loader) countLegs(c *Claim, place entry) {
	n := c.Legs
	known := n > 0
	for _, f := range []*formula.Formula{c.Sides[0], c.Sides[1], c.Of} {
		if f == nil {
			continue
		}
		m, tells := f.Legs()
		switch {
		case tells && known && m != n:
			l.fail("legs", place.value.line, place.value.column, "", "%q has %d legs, expected %d", f.Text, m, n)
		case tells:
			n, known = m, true
		}
	}
	for _, p := range c.Points {
		m := p.Legs()
		if known && m != n {
			l.fail("legs", place.value.line, place.value.column, "", "point %q has %d legs, the claim has %d", p.Label, m, n)
			return
		}
		n, known = m, true
	}
	for _, f := range []*formula.Formula{c.Sides[0], c.Sides[1], c.Of} {
		if f == nil || !known {
			continue
		}
		if m, _ := f.Legs(); m > n {
			l.fail("legs", place.value.line, place.value.column, "", "%q names leg %d, the claim has %d legs", f.Text, m, n)
		}
	}
	if !known && (c.Sides[0] != nil && c.Sides[1] != nil || c.Of != nil) {
		l.fail("legs", place.value.line, place.value.column, "add legs = 5 (the number of legs) to the claim", "the formulas do not tell the number of legs")
	}
	c.Legs = n
}

func (l *loader) relationName(e entry, t string) {
	if slices.Contains(Relations(), t) {
		return
	}
	if slices.Contains(laterRelations, t) {
		l.fail("not-available", e.value.line, e.value.column, "", "relation %q is not available yet", t)
		return
	}
	l.fail("relation", e.value.line, e.value.column, "relations: "+strings.Join(Relations(), ", "), "unknown relation %q", t)
}

// relationOf checks that a relation is claimed of one amplitude it applies to.
func (l *loader) relationOf(c *Claim, e entry) {
	if c.Kind == "routes" || c.Kind == "moebius" {
		if len(c.Of.Amplitudes()) == 0 {
			l.fail("relation", e.value.line, e.value.column, "", "%s needs an amplitude in the formula", c.Kind)
		}
		for _, a := range c.Of.Amplitudes() {
			if c.Kind == "moebius" && a.Braces {
				l.fail("relation", e.value.line, e.value.column, "name one ordering", "moebius needs a single residue sum, phi3{} is a sum over orderings")
			}
		}
		return
	}
	a, ok := c.Of.Root.(*formula.Amplitude)
	if !ok {
		l.fail("relation", e.value.line, e.value.column, "for instance of = \"BS(1,2,3,4|1,2,4,3)\"; write other combinations out with equal", "%s is claimed of one amplitude, found %q", c.Kind, c.Of.Text)
		return
	}
	if a.Braces {
		l.fail("relation", e.value.line, e.value.column, "write phi3(1,2,3,4) for one ordering", "%s needs an ordering, %s sums over all of them", c.Kind, c.Of.Text)
	}
}

// masses reads masses_squared: an exact number or "free".
func (l *loader) masses(e entry) Masses {
	t := e.value.text
	if e.value.kind == unstable.String && t == "free" {
		return Masses{Free: true}
	}
	if e.value.kind != unstable.String && e.value.kind != unstable.Integer {
		l.fail("type", e.value.line, e.value.column, "for instance masses_squared = \"7/2\"", "masses_squared must be an exact number or \"free\", found %s", e.value.describe())
		return Masses{}
	}
	r, err := kinematics.ParseRational(t)
	if err != nil {
		l.fail("number", e.value.line, e.value.column, "exact numbers: 2, \"7/2\", or \"free\"", "masses_squared: %v", err)
		return Masses{}
	}
	if r.Sign() == 0 {
		return Masses{}
	}
	return Masses{Squared: r}
}

// readPoints reads the points file of a claim, once per file.
func (l *loader) readPoints(e entry) []*kinematics.Point {
	name, ok := l.text(e)
	if !ok {
		return nil
	}
	path := name
	if !filepath.IsAbs(path) {
		path = filepath.Join(l.dir, name)
	}
	if p, ok := l.points[path]; ok {
		return p
	}
	p, err := kinematics.ReadPointsFile(path)
	if err != nil {
		l.errs = append(l.errs, PointDiagnostics(err, path, e.value.line, e.value.column, l.path)...)
		return nil
	}
	for _, q := range p {
		if q.IsFamily() {
			l.fail("family", e.value.line, e.value.column, "", "point %q of %s is a family: claims at families are not available yet", q.Label, name)
			return nil
		}
	}
	l.points[path] = p
	return p
}
