package generate

import (
	"math"
	"math/big"
	"slices"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// checkPhysical refuses masses that integer momenta cannot have: m^2 must be a
// positive integer, and n m^2 even, because k^2 is congruent to the sum of the
// components of k modulo 2, and these add up to zero over the legs.
func (d *drawer) checkPhysical() error {
	if d.mass == nil {
		return nil
	}
	if d.mass.Sign() < 0 {
		return refuse("draw momenta", "physical momenta have no negative squared mass %s", d.mass.RatString())
	}
	if !d.mass.IsInt() {
		square := new(big.Int).Mul(d.mass.Num(), d.mass.Denom())
		return refuse("try "+square.String()+", which is the same in other units, or draw momenta",
			"physical momenta are integers, and so is their squared mass, not %s", d.mass.RatString())
	}
	if d.n%2 == 1 && d.mass.Num().Bit(0) == 1 {
		square := new(big.Int).Lsh(d.mass.Num(), 2)
		return refuse("try "+square.String()+", which is the same in other units, or draw momenta",
			"no %d integer momenta of squared mass %s add up to zero: their sum is odd", d.n, d.mass.RatString())
	}
	if d.mass.Num().BitLen() > maxMassBits {
		return refuse("choose other units, or draw momenta", "a squared mass of %s is past the limit of 2^%d of physical points", d.mass.RatString(), maxMassBits)
	}
	return nil
}

// maxMassBits bounds m^2 of physical points, so that the search stays short.
const maxMassBits = 14

// shells lists integer vectors (E, x) with E^2 - x^2 = m^2, E > 0, in 2 or 3
// dimensions of space.
type shells struct {
	space int
	known map[[2]int64][][]int64
}

func newShells(space int) *shells {
	return &shells{space: space, known: map[[2]int64][][]int64{}}
}

// at returns the vectors of one squared mass and energy.
func (s *shells) at(mass, energy int64) [][]int64 {
	key := [2]int64{mass, energy}
	list, ok := s.known[key]
	if !ok {
		list = s.extend(nil, []int64{energy}, energy*energy-mass)
		s.known[key] = list
	}
	return list
}

// extend appends to list all ways to add the missing components to head, whose
// squares add up to rest.
func (s *shells) extend(list [][]int64, head []int64, rest int64) [][]int64 {
	if rest < 0 {
		return list
	}
	last := len(head) == s.space
	r := root(rest)
	for x := -r; x <= r; x++ {
		if last {
			if r*r != rest {
				break
			}
			if x != -r && x != r {
				continue
			}
		}
		v := append(head[:len(head):len(head)], x)
		if last {
			list = append(list, v)
		} else {
			list = s.extend(list, v, rest-x*x)
		}
	}
	return list
}

// root returns the integer part of the square root of x >= 0, x < 2^50.
func root(x int64) int64 {
	r := int64(math.Sqrt(float64(x)))
	for r*r > x {
		r--
	}
	for (r+1)*(r+1) <= x {
		r++
	}
	return r
}

// pick draws a vector of squared mass with at most size energies above the least
// possible, uniformly; nil if there is none.
func (s *shells) pick(src *prime.Source, mass int64, size int) []int64 {
	least := root(mass)
	if least*least < mass || least == 0 {
		least++
	}
	count := 0
	for e := range int64(size) {
		count += len(s.at(mass, least+e))
	}
	if count == 0 {
		return nil
	}
	i := int(src.Below(uint64(count)))
	for e := least; ; e++ {
		list := s.at(mass, e)
		if i < len(list) {
			return list[i]
		}
		i -= len(list)
	}
}

// physical draws integer momenta: legs 3..n outgoing from the shells; with Q their
// sum, leg 1 is minus a vector q of the shells with 2 Q.q = Q^2, and leg 2 is
// q - Q, which then has the same mass. Both have negative energy because Q is
// timelike. Components beyond the third dimension of space are drawn first and
// add to the mass on the shell.
func (d *drawer) physical(src *prime.Source, size int) *kinematics.Point {
	if d.Dimension == 3 && d.mass == nil {
		return d.physicalPlane(src, size)
	}
	var mass int64
	if d.mass != nil {
		mass = d.mass.Num().Int64()
	}
	further := d.Dimension - 1 - d.shells.space
	k := make([][]int64, d.n)
	total := make([]int64, d.Dimension)
	for a := 2; a < d.n; a++ {
		if k[a] = d.outgoing(src, k[2:a], further, mass, size); k[a] == nil {
			return nil
		}
		for i, x := range k[a] {
			total[i] += x
		}
	}
	r := make([]int64, further)
	for i := range r {
		r[i] = total[d.shells.space+1+i]/2 + src.Between(-1, 1)
	}
	found := d.shells.opposite(total, r, mass+square(r))
	if len(found) == 0 {
		return nil
	}
	q := found[src.Below(uint64(len(found)))]
	k[0] = make([]int64, d.Dimension)
	k[1] = make([]int64, d.Dimension)
	for i := range total {
		k[0][i] = -append(q[:len(q):len(q)], r...)[i]
		k[1][i] = -total[i] - k[0][i]
	}
	return d.integerPoint(k)
}

// outgoing draws a momentum that is neither equal nor (massless) parallel to an
// earlier one, that is k.k' != m^2; nil if it finds none.
func (d *drawer) outgoing(src *prime.Source, earlier [][]int64, further int, mass int64, size int) []int64 {
	for range retries {
		r := integers(src, further, 1)
		v := d.shells.pick(src, mass+square(r), size)
		if v == nil {
			return nil
		}
		v = append(v[:len(v):len(v)], r...)
		if !slices.ContainsFunc(earlier, func(k []int64) bool { return v[0]*k[0]-scalar(v[1:], k[1:]) == mass }) {
			return v
		}
	}
	return nil
}

// scalar returns the Euclidean product.
func scalar(x, y []int64) int64 {
	var z int64
	for i := range x {
		z += x[i] * y[i]
	}
	return z
}

// square returns the sum of the squares.
func square(x []int64) int64 { return scalar(x, x) }

// opposite lists the vectors q of the shells, completed by the further components
// r, with 2 total.q = total^2; mass is m^2 + r^2.
func (s *shells) opposite(total, r []int64, mass int64) [][]int64 {
	near := total[1 : s.space+1]
	c := total[0]*total[0] - square(total[1:])
	for i, x := range r {
		c += 2 * total[s.space+1+i] * x
	}
	if c%2 != 0 {
		return nil
	}
	c /= 2
	// c = E Q_0 - x.Q >= E Q_0 - |x||Q| bounds E by the roots of a quadratic;
	// one unit of margin on both sides covers rounding
	e0, q2, fc, m := float64(total[0]), float64(square(near)), float64(c), float64(mass)
	lead := e0*e0 - q2
	if lead <= 0 {
		return nil
	}
	disc := q2 * (fc*fc - lead*m)
	if disc < 0 {
		return nil
	}
	lo, hi := (e0*fc-math.Sqrt(disc))/lead, (e0*fc+math.Sqrt(disc))/lead
	var out [][]int64
	for e := max(1, int64(lo)-1); e <= int64(hi)+1; e++ {
		for _, v := range s.at(mass, e) {
			if e*total[0]-scalar(near, v[1:]) == c {
				out = append(out, v)
			}
		}
	}
	return out
}

// physicalPlane draws massless momenta in 3 dimensions, where few integer vectors
// are null: legs 3..n are multiples of (p^2+q^2, 2pq, p^2-q^2), and with P their
// sum and l another such vector k_1 = -(P^2/(2 P.l)) l, k_2 = -P-k_1, everything
// scaled to integers.
func (d *drawer) physicalPlane(src *prime.Source, size int) *kinematics.Point {
	null := func() vector {
		p, q := src.Between(0, int64(size)), src.Between(int64(-size), int64(size))
		c := src.Between(1, 2)
		return vector{big.NewRat(c*(p*p+q*q), 1), big.NewRat(2*c*p*q, 1), big.NewRat(c*(p*p-q*q), 1)}
	}
	k := make([]vector, d.n)
	sum := newVector(3)
	for a := 2; a < d.n; a++ {
		k[a] = null()
		for i := range sum {
			sum[i].Add(sum[i], k[a][i])
		}
	}
	l := null()
	divisor := dot(d.Metric, sum, l)
	if divisor.Sign() == 0 {
		return nil
	}
	factor := dot(d.Metric, sum, sum)
	factor.Quo(factor, divisor)
	factor.Mul(factor, big.NewRat(-1, 2))
	k[0], k[1] = newVector(3), newVector(3)
	for i := range sum {
		k[0][i].Mul(factor, l[i])
		k[1][i].Add(sum[i], k[0][i])
		k[1][i].Neg(k[1][i])
	}
	makeIntegers(k)
	for _, v := range k {
		for _, x := range v {
			if x.Num().BitLen() > 53 {
				return nil
			}
		}
	}
	return d.momentaPoint(k)
}

// integerPoint makes a point of integer momenta; massless ones lose a common
// divisor.
func (d *drawer) integerPoint(k [][]int64) *kinematics.Point {
	out := make([]vector, len(k))
	for a, row := range k {
		out[a] = newVector(len(row))
		for i, x := range row {
			out[a][i].SetInt64(x)
		}
	}
	if d.mass == nil {
		makeIntegers(out)
	}
	return d.momentaPoint(out)
}
