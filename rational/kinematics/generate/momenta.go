package generate

import (
	"math/big"
	"slices"
	"strings"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// vector is a momentum or polarisation.
type vector []*big.Rat

func newVector(d int) vector {
	v := make(vector, d)
	for i := range v {
		v[i] = new(big.Rat)
	}
	return v
}

// dot returns the product in the metric.
func dot(metric string, x, y vector) *big.Rat {
	z, t := new(big.Rat), new(big.Rat)
	for i, sign := range metric {
		t.Mul(x[i], y[i])
		if sign == '-' {
			t.Neg(t)
		}
		z.Add(z, t)
	}
	return z
}

// candidates is how many momenta of the first leg are drawn to keep the one of
// the smallest numerators and denominators.
const candidates = 24

// momenta draws points in light-cone components k+- = k_i +- k_j of a direction i
// of sign + and one j of sign -, where k^2 = k+ k- + q(k_perp), so k- is rational
// for any m^2. The k+ of legs 3..n add up to zero; then with P the sum of these
// legs and k_1+ =: a,
//
//	k_2^2 = (P + k_1)^2 = m^2  is  a P- + 2 q(P_perp, k_1 perp) = -P^2,
//
// linear in a. Legs are permuted at the end.
func (d *drawer) momenta(src *prime.Source, size int) *kinematics.Point {
	c := newLightCone(d)
	k := make([]vector, d.n)
	sum, perpSum, minusSum := newVector(d.Dimension), newVector(d.Dimension), new(big.Rat)
	for a, plus := range zeroSum(src, d.n-2) {
		v := c.perpendicular(src, size)
		add(perpSum, v)
		minusSum.Add(minusSum, c.complete(v, new(big.Rat).SetInt64(plus)))
		add(sum, v)
		k[a+2] = v
	}
	if minusSum.Sign() == 0 {
		return nil
	}
	least := 0
	for range candidates {
		first := c.perpendicular(src, size)
		plus := dot(d.Metric, perpSum, first)
		plus.Add(plus, plus)
		plus.Add(plus, dot(d.Metric, sum, sum))
		plus.Quo(plus.Neg(plus), minusSum)
		if plus.Sign() == 0 {
			continue
		}
		c.complete(first, plus)
		if h := height(first); k[0] == nil || h < least {
			k[0], least = first, h
		}
	}
	if k[0] == nil {
		return nil
	}
	k[1] = newVector(d.Dimension)
	for i := range sum {
		k[1][i].Add(sum[i], k[0][i])
		k[1][i].Neg(k[1][i])
	}
	if d.mass == nil {
		makeIntegers(k)
	}
	for i := len(k) - 1; i > 0; i-- {
		j := src.Below(uint64(i + 1))
		k[i], k[j] = k[j], k[i]
	}
	return d.momentaPoint(k)
}

// zeroSum draws n >= 2 integers of magnitude 1 or 2 that add up to zero.
func zeroSum(src *prime.Source, n int) []int64 {
	z := make([]int64, n)
	for {
		var sum int64
		for i := range n - 1 {
			z[i] = nonzero(src, 2)
			sum += z[i]
		}
		if z[n-1] = -sum; sum != 0 && sum >= -2 && sum <= 2 {
			return z
		}
	}
}

func add(z, x vector) {
	for i := range z {
		z[i].Add(z[i], x[i])
	}
}

// momentaPoint makes a point of momenta; nil if two are equal, which no invariant
// of massive legs tells.
func (d *drawer) momentaPoint(k []vector) *kinematics.Point {
	rows := make([][]*big.Rat, len(k))
	for a := range k {
		rows[a] = k[a]
		for b := range a {
			if slices.EqualFunc(k[a], k[b], func(x, y *big.Rat) bool { return x.Cmp(y) == 0 }) {
				return nil
			}
		}
	}
	p := &kinematics.Point{Kind: kinematics.KindMomenta, Metric: d.Metric, Momenta: kinematics.NewMatrix(rows)}
	if d.mass != nil {
		for range d.n {
			p.MassesSquared = append(p.MassesSquared, d.mass)
		}
	}
	return p
}

// lightCone is a choice of light-cone directions.
type lightCone struct {
	*drawer
	i, j int // components of sign + and -
	m    *big.Rat
}

func newLightCone(d *drawer) *lightCone {
	c := &lightCone{drawer: d, i: strings.IndexByte(d.Metric, '+'), j: strings.IndexByte(d.Metric, '-'), m: new(big.Rat)}
	if d.mass != nil {
		c.m = d.mass
	}
	return c
}

// perpendicular draws the components other than i and j, which stay zero.
func (c *lightCone) perpendicular(src *prime.Source, size int) vector {
	v := newVector(c.Dimension)
	for x := range v {
		if x != c.i && x != c.j {
			v[x].SetInt64(src.Between(int64(-size), int64(size)))
		}
	}
	return v
}

// complete sets components i and j of a perpendicular vector from k+ and the
// mass shell, and returns k-.
func (c *lightCone) complete(k vector, plus *big.Rat) (minus *big.Rat) {
	minus = new(big.Rat).Sub(c.m, dot(c.Metric, k, k))
	minus.Quo(minus, plus)
	half := big.NewRat(1, 2)
	k[c.i].Add(plus, minus).Mul(k[c.i], half)
	k[c.j].Sub(plus, minus).Mul(k[c.j], half)
	return minus
}

// makeIntegers scales the vectors together to integers without common divisor.
func makeIntegers(k []vector) {
	l, g, t := big.NewInt(1), new(big.Int), new(big.Int)
	for _, v := range k {
		for _, x := range v {
			t.GCD(nil, nil, l, x.Denom())
			l.Mul(l, t.Quo(x.Denom(), t))
		}
	}
	for _, v := range k {
		for _, x := range v {
			t.Quo(l, x.Denom())
			t.Mul(t, x.Num())
			g.GCD(nil, nil, g, t.Abs(t))
		}
	}
	if g.Sign() == 0 {
		return
	}
	scale := new(big.Rat).SetFrac(l, g)
	for _, v := range k {
		for _, x := range v {
			x.Mul(x, scale)
		}
	}
}

// height is the number of bits of all numerators and denominators.
func height(v vector) int {
	h := 0
	for _, x := range v {
		h += x.Num().BitLen() + x.Denom().BitLen()
	}
	return h
}

// polarise adds polarisations to a point.
func (d *drawer) polarise(p *kinematics.Point, src *prime.Source) {
	if p.Kind == kinematics.KindProducts {
		d.polariseProducts(p, src)
		return
	}
	rows := make([][]*big.Rat, d.n)
	for a, row := range p.Momenta {
		k := make(vector, len(row))
		for i, c := range row {
			k[i] = c.Coefficient(0)
		}
		e := d.polarisation(k, src)
		for e == nil {
			e = d.polarisation(k, src)
		}
		rows[a] = e
	}
	p.Polarisations = kinematics.NewMatrix(rows)
}

// polarisation draws e = (w.k) v - (v.k) w, which has e.k = 0, scaled to
// integers; nil if e is a multiple of k.
func (d *drawer) polarisation(k vector, src *prime.Source) vector {
	const size = 2
	draw := func() vector {
		v := newVector(d.Dimension)
		for i := range v {
			v[i].SetInt64(src.Between(-size, size))
		}
		return v
	}
	v, w := draw(), draw()
	x, y := dot(d.Metric, w, k), dot(d.Metric, v, k)
	e := newVector(d.Dimension)
	var t, u big.Rat
	for i := range e {
		e[i].Sub(t.Mul(x, v[i]), u.Mul(y, w[i]))
	}
	for i := range e {
		for j := range i {
			if t.Mul(e[i], k[j]).Cmp(u.Mul(e[j], k[i])) != 0 {
				makeIntegers([]vector{e})
				return e
			}
		}
	}
	return nil
}
