package series

import (
	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"
)

// lifter continues the start solutions along s0 + e s1, one at a time. Points are
// numbered as in start: i < m is leg 3 + i, m is leg 2, m + 1 is leg n.
type lifter struct {
	start *start
	ring  *integrand.Ring
	field *prime.Field
	depth int
	pairs []pair

	z []prime.Element // m rows
	// per pair: u = z_i - z_j upwards and g = 1/u downwards, so that a
	// coefficient of u g is one dot product
	u, back []prime.Element
	inverse []prime.Element // of Phi, permuted
	known   []prime.Element // per leg: the part of f_i without z[t]
	part    []prime.Element // per pair: the sum of u[k] g[t-k] over 0 < k < t
}

// pair is two points i < j, i < m, and the invariant between them.
type pair struct {
	i, j   int
	legI   int
	legJ   int
	s0, s1 prime.Element
	// at e = 0, with g = 1/(z_i - z_j): -g, -s0 g, -g^2
	minus, force, square prime.Element
}

// newLifter prepares the continuation to the depth of r along start.s + e s1, s1
// by leg.
func newLifter(r *integrand.Ring, p *start, s1 []prime.Element) *lifter {
	m, n, depth := p.free, p.legs, r.Depth()
	l := &lifter{
		start: p, ring: r, field: r.Field(), depth: depth,
		z:       make([]prime.Element, m*depth),
		inverse: make([]prime.Element, m*m),
		known:   make([]prime.Element, m),
	}
	leg := func(i int) int {
		switch i {
		case m:
			return 2
		case m + 1:
			return n
		}
		return 3 + i
	}
	for i := range m {
		for j := i + 1; j < m+2; j++ {
			k := (leg(i)-1)*n + leg(j) - 1
			l.pairs = append(l.pairs, pair{i: i, j: j, legI: leg(i), legJ: leg(j), s0: p.s[k], s1: s1[k]})
		}
	}
	l.u = make([]prime.Element, len(l.pairs)*depth)
	l.back = make([]prime.Element, len(l.pairs)*depth)
	l.part = make([]prime.Element, len(l.pairs))
	return l
}

// lift continues the solution that has node order[i] at leg 3 + i, and stores it
// in v.
//
// Order t of f_i = sum over j of s_ij/(z_i - z_j) is linear in the unknown
// coefficients z_i[t], with the matrix Phi of the start point for every t: with
// g[t] = -g[0] (sum_{0<k<t} u[k] g[t-k] + u[t] g[0]) the part without u[t] gives
// the right-hand side. Cost: n^2/2 (D^2/2 + 4 D) products.
func (l *lifter) lift(order []int, v *integrand.Solution) {
	f, r, p, d := l.field, l.ring, l.start, l.depth
	m, size := p.free, p.free+2
	for i := range m {
		l.z[i*d] = p.z[order[i]]
		for j := range m {
			l.inverse[i*m+j] = p.inverse[order[i]*m+order[j]]
		}
	}
	for k := range l.pairs {
		q := &l.pairs[k]
		j := q.j
		if j < m {
			j = order[j]
		}
		g := p.g[order[q.i]*size+j]
		q.minus = f.Neg(g)
		q.force = f.Mul(q.s0, q.minus)
		q.square = f.Mul(q.minus, g)
		l.back[(k+1)*d-1] = g
	}
	for t := 1; t < d; t++ {
		clear(l.known)
		for k := range l.pairs {
			q := &l.pairs[k]
			u, back := l.u[k*d:(k+1)*d], l.back[k*d:(k+1)*d]
			// u[1..t-1] against g[t-1..1]
			h := r.Dot(u[1:t], back[d-t:])
			l.part[k] = h
			x := r.Combine(q.force, h, q.s1, back[d-t])
			l.known[q.i] = f.Add(l.known[q.i], x)
			if q.j < m {
				l.known[q.j] = f.Sub(l.known[q.j], x)
			}
		}
		for i := range m {
			l.z[i*d+t] = f.Neg(f.Dot(l.inverse[i*m:(i+1)*m], l.known))
		}
		for k := range l.pairs {
			q := &l.pairs[k]
			x := l.z[q.i*d+t]
			if q.j < m {
				x = f.Sub(x, l.z[q.j*d+t])
			}
			l.u[k*d+t] = x
			l.back[(k+1)*d-1-t] = r.Combine(q.minus, l.part[k], q.square, x)
		}
	}
	l.store(v)
}

// store copies coordinates and inverse differences to v; z_2 = 1 and z_n = 0 are
// there already.
func (l *lifter) store(v *integrand.Solution) {
	d := l.depth
	for i := range l.start.free {
		copy(v.Coordinate(3+i), l.z[i*d:(i+1)*d])
	}
	for k := range l.pairs {
		q := &l.pairs[k]
		x, y := v.Inverse(q.legI, q.legJ), v.Inverse(q.legJ, q.legI)
		back := l.back[k*d : (k+1)*d]
		for t := range x {
			g := back[d-1-t]
			x[t], y[t] = g, l.field.Neg(g)
		}
	}
}

// newSolution returns an empty solution on the line, with its two fixed points.
func (l *lifter) newSolution(s1 []prime.Element) *integrand.Solution {
	r, n := l.ring, l.start.legs
	v := integrand.NewSolution(r, n, l.start.s, s1)
	one := l.field.One()
	r.SetConstant(v.Inverse(2, n), one)
	r.SetConstant(v.Inverse(n, 2), l.field.Neg(one))
	return v
}
