package residue

import (
	"context"
	"errors"
	"fmt"
	"math/big"

	"eliminant/checks/formula"
	"eliminant/rational/prime"
)

// identicallyZero returns the divisor that vanishes at random invariants and
// random punctures, each draw modulo its own random prime: such a divisor is
// the zero function, with a chance of error far below 2^-100 (Schwartz-Zippel,
// degrees are bounded by formula.MaxPower). The punctures are free, so what
// vanishes on the solutions only is not meant.
func identicallyZero(ctx context.Context, f *formula.Formula, n int, massless bool) *formula.DivisionByZero {
	src := prime.NewSource("divisor", f.String())
	var zero *formula.DivisionByZero
	for range 4 {
		d := &free{f: src.Field(), src: src, n: n, known: map[string]prime.Element{}}
		if massless {
			d.known["msq"] = 0
		}
		_, err := formula.Evaluate(ctx, f, n, d)
		if !errors.As(err, &zero) {
			return nil
		}
	}
	return zero
}

// free evaluates an integrand at random values of the punctures, of the
// invariants of pairs and of the mass; detPhi and J are further random values.
type free struct {
	f     *prime.Field
	src   *prime.Source
	n     int
	known map[string]prime.Element
}

func (d *free) Rational(r *big.Rat) (prime.Element, error) {
	x, ok := d.f.FromRat(r)
	if !ok {
		return 0, prime.ErrBadPrime
	}
	return x, nil
}

func (d *free) Add(x, y prime.Element) prime.Element          { return d.f.Add(x, y) }
func (d *free) Sub(x, y prime.Element) prime.Element          { return d.f.Sub(x, y) }
func (d *free) Mul(x, y prime.Element) prime.Element          { return d.f.Mul(x, y) }
func (d *free) Neg(x prime.Element) prime.Element             { return d.f.Neg(x) }
func (d *free) Inverse(x prime.Element) (prime.Element, bool) { return d.f.Inv(x) }

// value draws the value of a name once.
func (d *free) value(name string) prime.Element {
	v, ok := d.known[name]
	if !ok {
		v = d.f.FromUint64(d.src.Uint64())
		d.known[name] = v
	}
	return v
}

func (d *free) puncture(leg int) prime.Element { return d.value(fmt.Sprint("z", leg)) }

// planar draws X_ij, which turn into invariants with zero row sums.
func (d *free) planar(i, j int) prime.Element {
	i, j = (i-1)%d.n, (j-1)%d.n
	if i > j {
		i, j = j, i
	}
	switch j - i {
	case 0:
		return 0
	case 1, d.n - 1:
		return d.value("msq")
	}
	return d.value(fmt.Sprint("X", i, ",", j))
}

func (d *free) Leaf(n formula.Node) (prime.Element, error) {
	switch n := n.(type) {
	case *formula.Puncture:
		switch n.Leg {
		case 2:
			return d.f.One(), nil
		case d.n:
			return 0, nil
		}
		return d.puncture(n.Leg), nil
	case *formula.Difference:
		return d.f.Sub(d.puncture(n.A), d.puncture(n.B)), nil
	case *formula.ParkeTaylor:
		v := d.f.One()
		for i, a := range n.Ordering {
			v = d.f.Mul(v, d.f.Sub(d.puncture(a), d.puncture(n.Ordering[(i+1)%len(n.Ordering)])))
		}
		inv, ok := d.f.Inv(v)
		if !ok {
			return 0, prime.ErrBadPrime
		}
		return inv, nil
	case *formula.Invariant:
		var v prime.Element
		m := d.value("msq")
		for i, a := range n.Legs {
			for _, b := range n.Legs[i+1:] {
				x := d.f.Sub(d.f.Add(d.planar(a, b+1), d.planar(a+1, b)), d.f.Add(d.planar(a, b), d.planar(a+1, b+1)))
				v = d.f.Add(v, d.f.Add(x, d.f.Add(m, m)))
			}
		}
		k := int64(len(n.Legs))
		return d.f.Sub(v, d.f.Mul(d.f.FromInt64(k*(k-2)), m)), nil
	case *formula.MassSquared:
		return d.value("msq"), nil
	}
	return d.value(n.String()), nil
}
