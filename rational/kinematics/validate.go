package kinematics

import (
	"fmt"
	"math/big"
	"strings"
)

// MinDimension and MaxDimension bound the number of components of a momentum.
const (
	MinDimension = 3
	MaxDimension = 64
)

// Validate checks the point exactly: shape, k^2 = m^2, conservation of momentum,
// e.k = 0, symmetry, diagonals, row sums, and for twistors that no <i,i+1>
// vanishes. Every residual is computed as a polynomial in the parameter and must
// have no coefficient other than zero, so a family that passes is on shell and
// conserved for every value of the parameter (for twistors: defined for all but
// finitely many). The error is of type InputErrors and lists everything that is
// wrong.
func (p *Point) Validate() error { return problemErrors(p.problems(), p.Label) }

func (p *Point) problems() []problem {
	c := &checker{Point: p}
	switch p.Kind {
	case KindTwistors:
		c.twistors()
	case KindSpinors:
		c.spinors()
	case KindMomenta:
		c.momenta()
	case KindInvariants:
		c.invariantMatrix()
	case KindProducts:
		c.products()
	default:
		c.fail(CodeKind, place{"", -1, -1}, 0, "", "unknown kind %q", p.Kind)
	}
	return c.list
}

// checker collects the problems of a point.
type checker struct {
	*Point
	list []problem
}

func (c *checker) fail(code string, at place, leg int, hint, format string, args ...any) {
	for i, x := range args {
		switch x := x.(type) {
		case Component:
			args[i] = abridged(x.String())
		case string:
			args[i] = abridged(x)
		}
	}
	c.list = append(c.list, problem{code, at, leg, fmt.Sprintf(format, args...), hint})
}

// abridged shortens what no one reads to the end.
func abridged(s string) string {
	const most = 200
	if len(s) <= most {
		return s
	}
	return fmt.Sprintf("%s...%s (%d characters)", s[:80], s[len(s)-20:], len(s))
}

// count checks the number of legs.
func (c *checker) count(name string, m Matrix) bool {
	n := len(m)
	if n < MinLegs || n > MaxLegs {
		c.fail(CodeLegs, place{name, -1, -1}, 0, "give one row for each leg", "%s; from %d to %d are possible", plural(n, "leg"), MinLegs, MaxLegs)
		return false
	}
	return true
}

// shape checks that m has one row of width components for each of n legs. Nil
// rows are accepted if optional.
func (c *checker) shape(name string, m Matrix, n, width int, optional bool) bool {
	ok := true
	if len(m) != n {
		c.fail(CodeShape, place{name, -1, -1}, 0, "give one row for each leg", "%s: %d rows for %d legs", name, len(m), n)
		ok = false
	}
	for i, row := range m {
		if row == nil && optional {
			continue
		}
		if len(row) != width {
			c.fail(CodeShape, place{name, i, -1}, i+1, "", "%s of leg %d: %s, expected %d", name, i+1, plural(len(row), "component"), width)
			ok = false
		}
	}
	return ok
}

func plural(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

func (c *checker) twistors() {
	if !c.count("twistors", c.Twistors) || !c.shape("twistors", c.Twistors, c.Legs(), 4, false) {
		return
	}
	n := c.Legs()
	for i, z := range c.Twistors {
		next := c.Twistors[(i+1)%n]
		if determinant(z, next).IsZero() {
			c.fail(CodeBracket, place{"twistors", i, -1}, i+1, "change the first two components of one of the two legs",
				"<%d %d> = 0: lambda-tilde of legs %d and %d is undefined", i+1, (i+1)%n+1, i+1, (i+1)%n+1)
		}
	}
}

// vanishingBracket names the first <i,i+1> that is zero, "" if there is none;
// rows begin with lambda.
func vanishingBracket(rows Matrix) string {
	n := len(rows)
	for i, z := range rows {
		if determinant(z, rows[(i+1)%n]).IsZero() {
			return fmt.Sprintf("<%d %d>", i+1, (i+1)%n+1)
		}
	}
	return ""
}

// determinant returns x^1 y^2 - x^2 y^1.
func determinant(x, y []Component) Component {
	return x[0].times(y[1]).minus(x[1].times(y[0]))
}

func (c *checker) spinors() {
	if !c.count("angle", c.Angle) {
		return
	}
	n := c.Legs()
	ok := c.shape("angle", c.Angle, n, 2, false)
	if !c.shape("square", c.Square, n, 2, false) || !ok {
		return
	}
	for i := range 2 {
		for j := range 2 {
			var sum Component
			for a := range n {
				sum = sum.plus(c.Angle[a][i].times(c.Square[a][j]))
			}
			if !sum.IsZero() {
				c.fail(CodeConservation, place{"", -1, -1}, 0, "the sum over all legs of angle times square must vanish",
					"momentum is not conserved: component %d of angle times component %d of square sums to %v", i+1, j+1, sum)
			}
		}
	}
}

func (c *checker) metricOK() bool {
	d := len(c.Metric)
	if d < MinDimension || d > MaxDimension {
		c.fail(CodeMetric, place{"metric", -1, -1}, 0, "give one sign for each component", "momenta in %s; from %d to %d are possible", plural(d, "dimension"), MinDimension, MaxDimension)
		return false
	}
	if strings.Trim(c.Metric, "+-") != "" {
		c.fail(CodeMetric, place{"metric", -1, -1}, 0, `for instance "+---"`, "the metric %q is not a string of signs + and -", c.Metric)
		return false
	}
	return true
}

func (c *checker) massesOK(n int) bool {
	if len(c.MassesSquared) != 0 && len(c.MassesSquared) != n {
		c.fail(CodeMass, place{"masses_squared", -1, -1}, 0, "give one for all legs, or one for each", "%d squared masses for %d legs", len(c.MassesSquared), n)
		return false
	}
	return true
}

func (c *checker) momenta() {
	if !c.count("momenta", c.Momenta) || !c.metricOK() {
		return
	}
	n, d := c.Legs(), len(c.Metric)
	ok := c.massesOK(n)
	ok = c.shape("momenta", c.Momenta, n, d, false) && ok
	polarisations := c.Point.fields()[1:]
	for _, e := range polarisations {
		if *e.matrix != nil {
			ok = c.shape(e.name, *e.matrix, n, d, true) && ok
		}
	}
	if c.Polarisations2 != nil && c.Polarisations == nil {
		c.fail(CodeKey, place{"polarisations2", -1, -1}, 0, `add "polarisations"`, "second polarisations without first ones")
	}
	if !ok {
		return
	}
	for a, k := range c.Momenta {
		m := c.massSquared(a)
		square := c.Dot(k, k)
		if r := square.minus(NewComponent(m)); !r.IsZero() {
			hint := `massive legs need "masses_squared"`
			if m.Sign() != 0 {
				hint = "the square is taken in the metric " + c.Metric
			}
			c.fail(CodeOnShell, place{"momenta", a, -1}, a+1, hint, "leg %d is off shell: k^2 - m^2 = %v - %s = %v", a+1, square, m.RatString(), r)
		}
	}
	for i := range d {
		var sum Component
		for _, k := range c.Momenta {
			sum = sum.plus(k[i])
		}
		if !sum.IsZero() {
			c.fail(CodeConservation, place{"momenta", -1, -1}, 0, "all legs are outgoing: incoming ones have negative energy",
				"momentum is not conserved: component %d sums to %v", i+1, sum)
		}
	}
	for _, e := range polarisations {
		for a, v := range *e.matrix {
			if v == nil {
				continue
			}
			if r := c.Dot(v, c.Momenta[a]); !r.IsZero() {
				c.fail(CodeTransversality, place{e.name, a, -1}, a+1, "add a multiple of a vector w with w.k != 0", "%s of leg %d: e.k = %v, not 0", e.name, a+1, r)
			}
		}
	}
}

func (c *checker) invariantMatrix() {
	if !c.count("invariants", c.S) {
		return
	}
	n := c.Legs()
	ok := c.massesOK(n)
	if !c.shape("invariants", c.S, n, n, false) || !ok {
		return
	}
	c.symmetric("invariants", c.S)
	c.zeroDiagonal("invariants", c.S)
	total := new(big.Rat)
	for a := range n {
		total.Add(total, c.massSquared(a))
	}
	for a, row := range c.S {
		want := new(big.Rat).Mul(big.NewRat(int64(n-4), 1), c.massSquared(a))
		c.rowSum("invariants", a, row, want.Add(want, total))
	}
}

// symmetric checks m_ab = m_ba where both rows exist.
func (c *checker) symmetric(name string, m Matrix) {
	for a, row := range m {
		for b := range a {
			if row == nil || m[b] == nil || row[b].Equal(m[b][a]) {
				continue
			}
			c.fail(CodeSymmetry, place{name, a, b}, a+1, "", "%s is not symmetric: entry (%d,%d) is %v, entry (%d,%d) is %v", name, a+1, b+1, row[b], b+1, a+1, m[b][a])
		}
	}
}

func (c *checker) zeroDiagonal(name string, m Matrix) {
	for a, row := range m {
		if row != nil && !row[a].IsZero() {
			c.fail(CodeDiagonal, place{name, a, a}, a+1, "", "%s: the diagonal entry (%d,%d) is %v, not 0", name, a+1, a+1, row[a])
		}
	}
}

func (c *checker) rowSum(name string, a int, row []Component, want *big.Rat) {
	var sum Component
	for _, x := range row {
		sum = sum.plus(x)
	}
	if r := sum.minus(NewComponent(want)); !r.IsZero() {
		c.fail(CodeRowSum, place{name, a, -1}, a+1, "momentum is conserved only if it does", "%s: row %d sums to %v, not %s (off by %v)", name, a+1, sum, want.RatString(), r)
	}
}

func (c *checker) products() {
	q := &c.Products
	if !c.count("k.k", q.KK) {
		return
	}
	n := c.Legs()
	ok := c.shape("k.k", q.KK, n, n, false)
	for _, set := range [][]field{
		{{"e.k", &q.EK}, {"e.e", &q.EE}},
		{{"f.k", &q.FK}, {"f.e", &q.FE}, {"f.f", &q.FF}},
	} {
		var given, missing []string
		for _, x := range set {
			if *x.matrix == nil {
				missing = append(missing, x.name)
				continue
			}
			given = append(given, x.name)
			ok = c.shape(x.name, *x.matrix, n, n, true) && ok
		}
		if len(given) > 0 && len(missing) > 0 {
			c.fail(CodeKey, place{given[0], -1, -1}, 0, "", "%s needs %s too", given[0], strings.Join(missing, " and "))
			ok = false
		}
	}
	if q.FK != nil && q.EK == nil {
		c.fail(CodeKey, place{"f.k", -1, -1}, 0, "", "f.k needs e.k too")
		ok = false
	}
	if !ok {
		return
	}
	c.symmetric("k.k", q.KK)
	for a, row := range q.KK {
		c.rowSum("k.k", a, row, new(big.Rat))
		if row[a].Degree() > 0 {
			c.fail(CodeMass, place{"k.k", a, a}, a+1, "", "the squared mass of leg %d depends on the parameter: %v", a+1, row[a])
		}
	}
	c.polarised("e.k", q.EK, field{"e.e", &q.EE})
	c.polarised("f.k", q.FK, field{"f.f", &q.FF}, field{"f.e", &q.FE})
	c.emptyColumns("e.e", q.EE, q.EK)
	c.emptyColumns("f.e", q.FE, q.EK)
	c.emptyColumns("f.f", q.FF, q.FK)
	c.symmetric("e.e", q.EE)
	c.symmetric("f.f", q.FF)
}

// polarised checks the rows e_a.k_b: e_a.k_a = 0, conservation, and that the
// other products have rows for the same legs.
func (c *checker) polarised(name string, ek Matrix, others ...field) {
	c.zeroDiagonal(name, ek)
	for a, row := range ek {
		if row != nil {
			c.rowSum(name, a, row, new(big.Rat))
		}
		for _, o := range others {
			if ((*o.matrix)[a] == nil) != (row == nil) {
				c.fail(CodeShape, place{o.name, a, -1}, a+1, "a leg without polarisation has null in both", "leg %d has a row in only one of %s and %s", a+1, name, o.name)
			}
		}
	}
}

// emptyColumns checks that the columns of legs without polarisation, the nil rows
// of columns, hold nothing.
func (c *checker) emptyColumns(name string, m, columns Matrix) {
	for a, row := range m {
		for b, x := range row {
			if columns[b] == nil && !x.IsZero() {
				c.fail(CodeShape, place{name, a, b}, a+1, "write null or 0", "%s: entry (%d,%d) is %v, but leg %d has no polarisation", name, a+1, b+1, x, b+1)
			}
		}
	}
}

// Dot returns the dot product of two vectors in the metric of the point.
func (p *Point) Dot(x, y []Component) Component {
	var z Component
	for i, sign := range p.Metric {
		t := x[i].times(y[i])
		if sign == '-' {
			z = z.minus(t)
		} else {
			z = z.plus(t)
		}
	}
	return z
}
