package poly

import (
	"context"
	"errors"
	"slices"

	"eliminant/rational/prime"
)

// ErrNodes is returned by Interpolate for repeated nodes.
var ErrNodes = errors.New("interpolation nodes must be distinct, one value each")

// EvalMany returns the values at several points. Cost: Degree products a point.
func (z *Poly) EvalMany(points []prime.Element) []prime.Element {
	v := make([]prime.Element, len(points))
	for i, x := range points {
		v[i] = z.Eval(x)
	}
	return v
}

// Interpolate returns the polynomial of degree below len(x) with values y at
// distinct x, by Newton's divided differences. Cost: quadratic.
func Interpolate(f *prime.Field, x, y []prime.Element) (*Poly, error) {
	if len(x) != len(y) {
		return nil, ErrNodes
	}
	d := slices.Clone(y)
	gaps, inverse := make([]prime.Element, len(x)), make([]prime.Element, len(x))
	for k := 1; k < len(x); k++ {
		for i := k; i < len(x); i++ {
			gaps[i] = f.Sub(x[i], x[i-k])
		}
		if _, ok := f.InvertRow(inverse[k:], gaps[k:]); !ok {
			return nil, ErrNodes
		}
		for i := len(x) - 1; i >= k; i-- {
			d[i] = f.Mul(f.Sub(d[i], d[i-1]), inverse[i])
		}
	}
	z := New(f)
	for i := len(x) - 1; i >= 0; i-- {
		z.Mul(z, New(f, f.Neg(x[i]), f.One()))
		z.Add(z, New(f, d[i]))
	}
	return z, nil
}

// Roots returns the distinct roots of a nonzero polynomial in GF(p), in
// ascending order of their representatives: the part dividing x^p - x, split by
// random shifts (D. G. Cantor, H. Zassenhaus, Math. Comp. 36 (1981) 587); the
// shifts are fixed, so are the roots. Errors: a zero polynomial, a cancelled
// context.
func Roots(ctx context.Context, p *Poly) ([]prime.Element, error) {
	if p.IsZero() {
		return nil, errors.New("every element is a root of the zero polynomial")
	}
	if p.Degree() == 0 {
		return nil, nil
	}
	f := p.f
	m, err := NewModulus(p)
	if err != nil {
		return nil, err
	}
	x := X(f)
	h := m.Pow(new(Poly), x, f.Modulus())
	g := new(Poly).GCD(h.Sub(h, x), p)
	var roots []prime.Element
	shift := uint64(0)
	var split func(g *Poly) error
	split = func(g *Poly) error {
		if ctx.Err() != nil {
			return context.Cause(ctx)
		}
		switch g.Degree() {
		case 0:
			return nil
		case 1:
			v, _ := f.Div(f.Neg(g.c[0]), g.c[1])
			roots = append(roots, v)
			return nil
		}
		m, err := NewModulus(g)
		if err != nil {
			return err
		}
		for {
			shift++
			h := m.Pow(new(Poly), New(f, f.FromUint64(shift), f.One()), (f.Modulus()-1)/2)
			h.Sub(h, New(f, f.One()))
			h.GCD(h, g)
			if h.Degree() > 0 && h.Degree() < g.Degree() {
				if err := split(h); err != nil {
					return err
				}
				var q, r Poly
				q.DivRem(g, h, &r)
				return split(&q)
			}
		}
	}
	if err := split(g); err != nil {
		return nil, err
	}
	slices.SortFunc(roots, func(a, b prime.Element) int {
		if f.Uint64(a) < f.Uint64(b) {
			return -1
		}
		return 1
	})
	return roots, nil
}
