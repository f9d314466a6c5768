package kinematics

import (
	"bytes"
	"encoding/json"
	"io"
	"math/big"
)

// WritePoints writes a points file: deterministic, one row of a matrix per line,
// numbers in lowest terms. Integers below 2^53 in magnitude are JSON numbers,
// everything else is a string "p/q", so no reader rounds. ReadPoints gives the
// same points back; a point without label gets p1, p2, ... there.
func WritePoints(w io.Writer, points []*Point) error {
	var b bytes.Buffer
	b.WriteString("{\n  \"format\": \"" + Format + "\",\n  \"points\": [")
	for i, p := range points {
		if i > 0 {
			b.WriteByte(',')
		}
		b.WriteString("\n    ")
		p.write(&b, "\n    ")
	}
	b.WriteString("\n  ]\n}\n")
	_, err := w.Write(b.Bytes())
	return err
}

// MarshalJSON returns the point as it stands in a points file.
func (p *Point) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	p.write(&b, "")
	return b.Bytes(), nil
}

// write appends the point; newline is the line break with the indentation of its
// braces, or empty for a single line.
func (p *Point) write(b *bytes.Buffer, newline string) {
	w := &pointWriter{b: b, newline: newline}
	w.open()
	if p.Label != "" {
		w.key("label")
		w.quoted(p.Label)
	}
	nested := p.Kind == KindSpinors || p.Kind == KindProducts
	if nested {
		w.key(string(p.Kind))
		w.open()
	}
	for _, f := range p.fields() {
		if *f.matrix != nil {
			w.key(f.name)
			w.matrix(*f.matrix, p.absentColumns(f.name))
		}
		if f.name == "momenta" {
			w.key("metric")
			w.quoted(p.Metric)
		}
	}
	if nested {
		w.close()
	}
	if !p.massless() {
		w.key("masses_squared")
		w.masses(p.MassesSquared)
	}
	w.close()
}

// absentColumns returns the matrix whose nil rows are the legs that have no
// column entry in a field of products, nil if all have.
func (p *Point) absentColumns(name string) Matrix {
	switch name {
	case "e.e", "f.e":
		return p.Products.EK
	case "f.f":
		return p.Products.FK
	}
	return nil
}

// pointWriter lays out JSON by hand: encoding/json would put every number on a
// line of its own.
type pointWriter struct {
	b       *bytes.Buffer
	newline string
	first   bool
}

func (w *pointWriter) indent(by int) {
	if w.newline == "" {
		return
	}
	if by > 0 {
		w.newline += "  "
	} else {
		w.newline = w.newline[:len(w.newline)-2]
	}
}

func (w *pointWriter) open() {
	w.b.WriteByte('{')
	w.indent(1)
	w.first = true
}

func (w *pointWriter) close() {
	w.indent(-1)
	w.b.WriteString(w.newline + "}")
	w.first = false
}

func (w *pointWriter) key(name string) {
	if !w.first {
		w.b.WriteByte(',')
	}
	w.first = false
	w.b.WriteString(w.newline + `"` + name + `": `)
}

func (w *pointWriter) quoted(s string) {
	t, _ := json.Marshal(s) // strings always marshal
	w.b.Write(t)
}

func (w *pointWriter) matrix(m Matrix, columns Matrix) {
	w.b.WriteByte('[')
	w.indent(1)
	for i, row := range m {
		if i > 0 {
			w.b.WriteByte(',')
		}
		w.b.WriteString(w.newline)
		if row == nil {
			w.b.WriteString("null")
			continue
		}
		w.b.WriteByte('[')
		for j, c := range row {
			if j > 0 {
				w.b.WriteString(", ")
			}
			if j < len(columns) && columns[j] == nil {
				w.b.WriteString("null")
				continue
			}
			w.component(c)
		}
		w.b.WriteByte(']')
	}
	w.indent(-1)
	w.b.WriteString(w.newline + "]")
}

func (w *pointWriter) component(c Component) {
	switch len(c) {
	case 0:
		w.b.WriteByte('0')
	case 1:
		w.number(c[0])
	default:
		w.b.WriteByte('[')
		for i, x := range c {
			if i > 0 {
				w.b.WriteString(", ")
			}
			w.number(x)
		}
		w.b.WriteByte(']')
	}
}

// exactBits is the size below which every binary64 program keeps an integer.
const exactBits = 53

func (w *pointWriter) number(x *big.Rat) {
	t := x.RatString()
	if !x.IsInt() || x.Num().BitLen() > exactBits {
		t = `"` + t + `"`
	}
	w.b.WriteString(t)
}

func (w *pointWriter) masses(m []*big.Rat) {
	common := true
	for _, x := range m[1:] {
		common = common && x.Cmp(m[0]) == 0
	}
	if common {
		w.number(m[0])
		return
	}
	w.b.WriteByte('[')
	for i, x := range m {
		if i > 0 {
			w.b.WriteString(", ")
		}
		w.number(x)
	}
	w.b.WriteByte(']')
}
