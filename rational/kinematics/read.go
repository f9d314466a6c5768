package kinematics

import (
	"bytes"
	"cmp"
	"errors"
	"fmt"
	"io"
	"math/big"
	"os"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Format names the version of points files that is read and written.
const Format = "eliminant/points/1"

// Limits of a points file, beside MaxDigits, MaxLegs and MaxDimension.
const (
	MaxFileBytes = 16 << 20
	MaxDegree    = 64 // of a component of a family
	MaxLabel     = 100
	maxErrors    = 100
)

// ReadPoints reads a points file, strictly: the text must be JSON in UTF-8,
// every key known, every number exact, and every point valid. Labels default to
// p1, p2, ... The error is of type InputErrors: everything that is wrong in the
// file (at most 100 errors are listed), with line and column of the offending
// value; file is only the name used there.
func ReadPoints(r io.Reader, file string) ([]*Point, error) {
	src, err := io.ReadAll(io.LimitReader(r, MaxFileBytes+1))
	if err != nil {
		return nil, InputErrors{{Code: CodeFile, File: file, Message: "cannot be read: " + reason(err)}}
	}
	if len(src) > MaxFileBytes {
		return nil, InputErrors{{Code: CodeFile, File: file, Message: fmt.Sprintf("more than the limit of %d bytes", MaxFileBytes), Hint: "split the file"}}
	}
	d := &decoder{src: src, file: file}
	points := d.document()
	if len(d.errs) > 0 {
		slices.SortStableFunc(d.errs, func(x, y InputError) int {
			return cmp.Or(cmp.Compare(x.Line, y.Line), cmp.Compare(x.Column, y.Column))
		})
		if d.more > 0 {
			d.errs = append(d.errs, InputError{Code: CodeFurther, File: file, Message: fmt.Sprintf("%d further errors are not listed", d.more)})
		}
		return nil, d.errs
	}
	return points, nil
}

// ReadPointsFile reads the points file at a path.
func ReadPointsFile(path string) ([]*Point, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, InputErrors{{Code: CodeFile, File: path, Message: "cannot be read: " + reason(err)}}
	}
	defer f.Close()
	return ReadPoints(f, path)
}

// reason drops the path from an error of the file system.
func reason(err error) string {
	var e *os.PathError
	if errors.As(err, &e) {
		return e.Err.Error()
	}
	return err.Error()
}

// decoder turns a JSON text into points.
type decoder struct {
	src    []byte
	file   string
	label  string
	errs   InputErrors
	more   int  // errors that are not listed
	broken bool // something of the point at hand could not be read
}

// position returns line and column of an offset, counted from 1.
func (d *decoder) position(offset int) (line, column int) {
	before := d.src[:offset]
	line = bytes.Count(before, []byte{'\n'}) + 1
	before = bytes.TrimPrefix(before[bytes.LastIndexByte(before, '\n')+1:], []byte("\ufeff"))
	return line, utf8.RuneCount(before) + 1
}

// fail records an error after which the point at hand is not validated.
func (d *decoder) fail(offset int, code string, leg int, hint, format string, args ...any) {
	d.broken = true
	d.note(offset, code, leg, hint, format, args...)
}

// note records an error.
func (d *decoder) note(offset int, code string, leg int, hint, format string, args ...any) {
	if len(d.errs) == maxErrors {
		d.more++
		return
	}
	e := InputError{Code: code, File: d.file, Point: d.label, Leg: leg, Message: fmt.Sprintf(format, args...), Hint: hint}
	e.Line, e.Column = d.position(offset)
	d.errs = append(d.errs, e)
}

// document reads the whole file.
func (d *decoder) document() []*Point {
	root, err := parseJSON(d.src)
	if err != nil {
		d.fail(err.offset, CodeJSON, 0, "a points file is JSON", "%s", err.reason)
		return nil
	}
	if root.kind != '{' {
		d.fail(root.offset, CodeFormat, 0, `begin with {"format": "`+Format+`", "points": [...]}`, "expected an object, found %s", root.describe())
		return nil
	}
	switch f := root.child("format"); {
	case f == nil:
		d.fail(root.offset, CodeFormat, 0, `add "format": "`+Format+`"`, `the key "format" is missing`)
		return nil
	case f.kind != '"' || f.text != Format:
		d.fail(f.offset, CodeFormat, 0, "", "the format is %s, expected %q", f.describe(), Format)
		return nil
	}
	d.knownKeys(root, "format", "points")
	list := root.child("points")
	if list == nil {
		d.fail(root.offset, CodeKey, 0, "", `the key "points" is missing`)
		return nil
	}
	if list.kind != '[' || len(list.items) == 0 {
		d.fail(list.offset, CodeShape, 0, "", `"points" must be an array of points, found %s`, describeEmpty(list))
		return nil
	}
	var points []*Point
	labels := map[string]bool{}
	for i, n := range list.items {
		d.label = fmt.Sprintf("p%d", i+1)
		d.broken = false
		p := d.point(n, labels)
		d.label = ""
		points = append(points, p)
	}
	return points
}

func describeEmpty(n *node) string {
	if len(n.items) == 0 && n.kind == '[' {
		return "an empty array"
	}
	return n.describe()
}

// knownKeys refuses every other key of an object.
func (d *decoder) knownKeys(n *node, known ...string) {
	for _, k := range n.keys {
		if slices.Contains(known, k.name) {
			continue
		}
		hint := "known here: " + strings.Join(known, ", ")
		if c := closest(k.name, known); c != "" {
			hint = fmt.Sprintf("%q is meant?", c)
		}
		d.note(k.offset, CodeKey, 0, hint, "unknown key %q", shorten(k.name))
	}
}

func shorten(s string) string {
	if utf8.RuneCountInString(s) > 60 {
		return string([]rune(s)[:57]) + "..."
	}
	return s
}

// closest returns the candidate at most two edits away from name, "" if none is.
func closest(name string, candidates []string) string {
	if len(name) > 40 {
		return ""
	}
	best, least := "", 3
	for _, c := range candidates {
		row := make([]int, len(c)+1)
		for j := range row {
			row[j] = j
		}
		for i := range len(name) {
			diagonal := row[0]
			row[0] = i + 1
			for j := range len(c) {
				cost := diagonal
				if name[i] != c[j] {
					cost++
				}
				diagonal = row[j+1]
				row[j+1] = min(cost, row[j]+1, row[j+1]+1)
			}
		}
		if row[len(c)] < least {
			best, least = c, row[len(c)]
		}
	}
	return best
}

// point reads and validates one point.
func (d *decoder) point(n *node, labels map[string]bool) *Point {
	if n.kind != '{' {
		d.fail(n.offset, CodeShape, 0, "", "a point must be an object, found %s", n.describe())
		return nil
	}
	at := n.offset
	if l := n.child("label"); l != nil {
		at = l.offset
		if l.kind != '"' || !printable(l.text) {
			d.fail(at, CodeLabel, 0, fmt.Sprintf("from 1 to %d printable characters", MaxLabel), "a label must be text, found %s", l.describe())
			return nil
		}
		d.label = l.text
	}
	if labels[d.label] {
		d.note(at, CodeLabel, 0, "points without label are called p1, p2, ...", "the label %q is used twice", d.label)
	}
	labels[d.label] = true
	var kinds []string
	for _, k := range Kinds {
		if n.child(string(k)) != nil {
			kinds = append(kinds, string(k))
		}
	}
	p := &Point{Label: d.label}
	switch len(kinds) {
	case 1:
		p.Kind = Kind(kinds[0])
	case 0:
		d.knownKeys(n, "label", "twistors", "spinors", "momenta", "invariants", "products", "metric", "polarisations", "polarisations2", "masses_squared")
		d.fail(n.offset, CodeKind, 0, "give one of twistors, spinors, momenta, invariants, products", "the point has no kinematics")
		return nil
	default:
		d.fail(n.offset, CodeKind, 0, "give one point for each", "the point has several kinds of kinematics: %s", strings.Join(kinds, ", "))
		return nil
	}
	d.kind(p, n)
	if d.broken {
		return nil
	}
	for _, q := range p.problems() {
		d.note(d.locate(p, n, q.at), q.code, q.leg, q.hint, "%s", q.message)
	}
	return p
}

func printable(s string) bool {
	n := utf8.RuneCountInString(s)
	return n > 0 && n <= MaxLabel && !strings.ContainsFunc(s, func(r rune) bool { return !unicode.IsPrint(r) })
}

// kind reads the keys that belong to the kind.
func (d *decoder) kind(p *Point, n *node) {
	main := n.child(string(p.Kind))
	switch p.Kind {
	case KindTwistors:
		d.knownKeys(n, "label", "twistors")
		p.Twistors = d.matrix(main, "twistors", false)
	case KindSpinors:
		d.knownKeys(n, "label", "spinors")
		if !d.object(main, "spinors", "angle", "square") {
			return
		}
		p.Angle = d.required(main, "angle")
		p.Square = d.required(main, "square")
	case KindMomenta:
		d.knownKeys(n, "label", "momenta", "metric", "polarisations", "polarisations2", "masses_squared")
		p.Momenta = d.matrix(main, "momenta", false)
		p.Polarisations = d.optional(n, "polarisations")
		p.Polarisations2 = d.optional(n, "polarisations2")
		p.MassesSquared = d.masses(n.child("masses_squared"), len(p.Momenta))
		d.metric(p, n.child("metric"))
	case KindInvariants:
		d.knownKeys(n, "label", "invariants", "masses_squared")
		p.S = d.matrix(main, "invariants", false)
		p.MassesSquared = d.masses(n.child("masses_squared"), len(p.S))
	case KindProducts:
		d.knownKeys(n, "label", "products")
		if !d.object(main, "products", "k.k", "e.k", "e.e", "f.k", "f.e", "f.f") {
			return
		}
		q := &p.Products
		q.KK = d.required(main, "k.k")
		q.EK, q.EE = d.optional(main, "e.k"), d.optional(main, "e.e")
		q.FK, q.FE, q.FF = d.optional(main, "f.k"), d.optional(main, "f.e"), d.optional(main, "f.f")
		d.nulls(main, "e.k", nil)
		d.nulls(main, "e.e", q.EK)
		d.nulls(main, "f.k", nil)
		d.nulls(main, "f.e", q.EK)
		d.nulls(main, "f.f", q.FK)
	}
}

func (d *decoder) object(n *node, name string, known ...string) bool {
	if n.kind != '{' {
		d.fail(n.offset, CodeShape, 0, "keys: "+strings.Join(known, ", "), "%q must be an object, found %s", name, n.describe())
		return false
	}
	d.knownKeys(n, known...)
	return true
}

func (d *decoder) required(n *node, name string) Matrix {
	c := n.child(name)
	if c == nil {
		d.fail(n.offset, CodeKey, 0, "", "the key %q is missing", name)
		return nil
	}
	return d.matrix(c, name, false)
}

func (d *decoder) optional(n *node, name string) Matrix {
	if c := n.child(name); c != nil {
		return d.matrix(c, name, true)
	}
	return nil
}

// matrix reads an array of rows, of which some may be null if optional. Null
// entries of optional rows are read as zero; see nulls.
func (d *decoder) matrix(n *node, name string, optional bool) Matrix {
	if n.kind != '[' {
		d.fail(n.offset, CodeShape, 0, "one row for each leg", "%s must be an array of rows, found %s", name, n.describe())
		return nil
	}
	if len(n.items) > MaxLegs {
		d.fail(n.offset, CodeLegs, 0, "", "%s: %d rows; up to %d legs are possible", name, len(n.items), MaxLegs)
		return nil
	}
	m := make(Matrix, len(n.items))
	for i, row := range n.items {
		if row.kind == 'n' && optional {
			continue
		}
		if row.kind != '[' {
			d.fail(row.offset, CodeShape, i+1, "", "%s of leg %d must be an array, found %s", name, i+1, row.describe())
			continue
		}
		m[i] = make([]Component, len(row.items))
		for j, x := range row.items {
			if x.kind == 'n' && optional {
				continue
			}
			m[i][j] = d.component(x, i+1)
		}
	}
	return m
}

// nulls refuses null entries of products but in the columns of legs without
// polarisation, the nil rows of columns.
func (d *decoder) nulls(products *node, name string, columns Matrix) {
	n := products.child(name)
	if n == nil {
		return
	}
	for a, row := range n.items {
		for b, x := range row.items {
			if x.kind == 'n' && (b >= len(columns) || columns[b] != nil) {
				d.fail(x.offset, CodeShape, a+1, "", "%s: entry (%d,%d) is null", name, a+1, b+1)
			}
		}
	}
}

// component reads a number or the coefficients of a polynomial.
func (d *decoder) component(n *node, leg int) Component {
	if n.kind != '[' {
		if r := d.number(n, leg); r != nil {
			return NewComponent(r)
		}
		return nil
	}
	if len(n.items) == 0 || len(n.items) > MaxDegree+1 {
		d.fail(n.offset, CodeShape, leg, `coefficients ["c0", "c1", ...] of a polynomial in the parameter`, "%d coefficients; from 1 to %d are possible", len(n.items), MaxDegree+1)
		return nil
	}
	c := make([]*big.Rat, len(n.items))
	for i, x := range n.items {
		if c[i] = d.number(x, leg); c[i] == nil {
			c[i] = new(big.Rat)
		}
	}
	return NewComponent(c...)
}

// number reads an exact number; nil after an error.
func (d *decoder) number(n *node, leg int) *big.Rat {
	if n.kind != '"' && n.kind != '0' {
		d.fail(n.offset, CodeNumber, leg, `write an integer or a fraction in quotes: 12, "12", "-3/7"`, "expected an exact number, found %s", n.describe())
		return nil
	}
	r, err := ParseRational(n.text)
	if err != nil {
		hint := ""
		var e *NumberError
		if errors.As(err, &e) {
			hint = e.Hint
		}
		d.fail(n.offset, CodeNumber, leg, hint, "%v", err)
		return nil
	}
	return r
}

// masses reads one squared mass for all n legs or one for each; nil if massless.
func (d *decoder) masses(n *node, legs int) []*big.Rat {
	if n == nil {
		return nil
	}
	var out []*big.Rat
	if n.kind == '[' {
		if len(n.items) != legs {
			d.fail(n.offset, CodeMass, 0, "give one number for all legs, or one for each", "%d squared masses for %d legs", len(n.items), legs)
			return nil
		}
		for a, x := range n.items {
			if x.kind == '[' {
				d.fail(x.offset, CodeMass, a+1, "", "the squared mass of leg %d must be a number: masses do not depend on the parameter", a+1)
				return nil
			}
			r := d.number(x, a+1)
			if r == nil {
				return nil
			}
			out = append(out, r)
		}
	} else {
		r := d.number(n, 0)
		if r == nil {
			return nil
		}
		for range legs {
			out = append(out, r)
		}
	}
	if !slices.ContainsFunc(out, func(m *big.Rat) bool { return m.Sign() != 0 }) {
		return nil
	}
	return out
}

// metric reads the signs; the default is mostly minus.
func (d *decoder) metric(p *Point, n *node) {
	if n == nil {
		if len(p.Momenta) > 0 && len(p.Momenta[0]) > 0 {
			p.Metric = mostlyMinus(len(p.Momenta[0]))
		}
		return
	}
	if n.kind != '"' {
		d.fail(n.offset, CodeMetric, 0, `for instance "+---"`, "the metric must be a string of signs, found %s", n.describe())
		return
	}
	p.Metric = n.text
}

// mostlyMinus returns "+---" with d signs.
func mostlyMinus(d int) string { return "+" + strings.Repeat("-", d-1) }

// locate returns the offset of a place of a point.
func (d *decoder) locate(p *Point, n *node, at place) int {
	value := n
	if at.field != "" {
		container := n
		if p.Kind == KindSpinors || p.Kind == KindProducts {
			container = n.child(string(p.Kind))
		}
		if c := container.child(at.field); c != nil {
			value = c
		} else if c := n.child(string(p.Kind)); c != nil {
			value = c
		}
	} else if c := n.child(string(p.Kind)); c != nil {
		value = c
	}
	if c := value.item(at.row); c != nil {
		value = c
		if c := value.item(at.column); c != nil {
			value = c
		}
	}
	return value.offset
}
