package kinematics

import (
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// Component is an exact component of a point: the polynomial
//
//	c_0 + c_1 e + ... + c_d e^d,  c_i rational,
//
// in the parameter e of a family; a constant has degree 0. The last coefficient
// is not zero, so zero is the empty Component, and components are equal exactly
// if their coefficients are. Coefficients are never changed in place.
type Component []*big.Rat

// Matrix is a table of components, one row for each leg. A nil row is a leg
// that has none (a leg without polarisation).
type Matrix [][]Component

// NewComponent returns the component with the given coefficients, lowest first,
// which are copied.
func NewComponent(coefficients ...*big.Rat) Component {
	n := len(coefficients)
	for n > 0 && coefficients[n-1].Sign() == 0 {
		n--
	}
	if n == 0 {
		return nil
	}
	c := make(Component, n)
	for i := range c {
		c[i] = new(big.Rat).Set(coefficients[i])
	}
	return c
}

// Int returns the constant v.
func Int(v int64) Component { return NewComponent(new(big.Rat).SetInt64(v)) }

// Degree returns the degree in the parameter, 0 for constants and zero.
func (c Component) Degree() int { return max(len(c)-1, 0) }

// IsZero reports whether c is the zero polynomial.
func (c Component) IsZero() bool { return len(c) == 0 }

// Coefficient returns a copy of the coefficient of e^i.
func (c Component) Coefficient(i int) *big.Rat {
	z := new(big.Rat)
	if i >= 0 && i < len(c) {
		z.Set(c[i])
	}
	return z
}

// At returns the value at e.
func (c Component) At(e *big.Rat) *big.Rat {
	z := new(big.Rat)
	for i := len(c) - 1; i >= 0; i-- {
		z.Mul(z, e)
		z.Add(z, c[i])
	}
	return z
}

// Equal reports whether c and d are the same polynomial.
func (c Component) Equal(d Component) bool {
	return slices.EqualFunc(c, d, func(x, y *big.Rat) bool { return x.Cmp(y) == 0 })
}

// String prints c in lowest terms: "-3/7", "1/2-e+3*e^2".
func (c Component) String() string {
	if len(c) == 0 {
		return "0"
	}
	var b strings.Builder
	for i, x := range c {
		if x.Sign() == 0 {
			continue
		}
		t := x.RatString()
		if i > 0 {
			power := "e"
			if i > 1 {
				power = fmt.Sprintf("e^%d", i)
			}
			switch t {
			case "1":
				t = power
			case "-1":
				t = "-" + power
			default:
				t += "*" + power
			}
		}
		if b.Len() > 0 && t[0] != '-' {
			b.WriteByte('+')
		}
		b.WriteString(t)
	}
	return b.String()
}

// trim drops zero coefficients at the end.
func (c Component) trim() Component {
	n := len(c)
	for n > 0 && c[n-1].Sign() == 0 {
		n--
	}
	if n == 0 {
		return nil
	}
	return c[:n]
}

func (c Component) plus(d Component) Component {
	if len(c) == 0 {
		return d
	}
	if len(d) == 0 {
		return c
	}
	if len(c) < len(d) {
		c, d = d, c
	}
	z := slices.Clone(c)
	for i, x := range d {
		z[i] = new(big.Rat).Add(c[i], x)
	}
	return z.trim()
}

func (c Component) negated() Component {
	z := make(Component, len(c))
	for i, x := range c {
		z[i] = new(big.Rat).Neg(x)
	}
	return z.trim()
}

func (c Component) minus(d Component) Component { return c.plus(d.negated()) }

func (c Component) times(d Component) Component {
	if len(c) == 0 || len(d) == 0 {
		return nil
	}
	z := make(Component, len(c)+len(d)-1)
	for i := range z {
		z[i] = new(big.Rat)
	}
	var t big.Rat
	for i, x := range c {
		for j, y := range d {
			z[i+j].Add(z[i+j], t.Mul(x, y))
		}
	}
	return z.trim()
}

func (c Component) scaled(r *big.Rat) Component {
	if r.Sign() == 0 {
		return nil
	}
	z := make(Component, len(c))
	for i, x := range c {
		z[i] = new(big.Rat).Mul(r, x)
	}
	return z
}

// degree returns the greatest degree of the entries.
func (m Matrix) degree() int {
	d := 0
	for _, row := range m {
		for _, c := range row {
			d = max(d, c.Degree())
		}
	}
	return d
}

// at returns the values at e.
func (m Matrix) at(e *big.Rat) Matrix {
	return m.each(func(c Component) Component { return NewComponent(c.At(e)) })
}

// each returns the matrix of the images of the entries.
func (m Matrix) each(f func(Component) Component) Matrix {
	if m == nil {
		return nil
	}
	z := make(Matrix, len(m))
	for i, row := range m {
		if row == nil {
			continue
		}
		z[i] = make([]Component, len(row))
		for j, c := range row {
			z[i][j] = f(c)
		}
	}
	return z
}

// equal reports whether the matrices agree, nil rows included.
func (m Matrix) equal(o Matrix) bool {
	return (m == nil) == (o == nil) && slices.EqualFunc(m, o, func(x, y []Component) bool {
		return (x == nil) == (y == nil) && slices.EqualFunc(x, y, Component.Equal)
	})
}

// NewMatrix returns the constant matrix with the given entries, which are
// copied. A nil row stays nil.
func NewMatrix(rows [][]*big.Rat) Matrix {
	m := make(Matrix, len(rows))
	for i, row := range rows {
		if row == nil {
			continue
		}
		m[i] = make([]Component, len(row))
		for j, x := range row {
			m[i][j] = NewComponent(x)
		}
	}
	return m
}

// rationals returns the values of a constant matrix.
func (m Matrix) rationals() [][]*big.Rat {
	z := make([][]*big.Rat, len(m))
	for i, row := range m {
		z[i] = make([]*big.Rat, len(row))
		for j, c := range row {
			z[i][j] = c.Coefficient(0)
		}
	}
	return z
}
