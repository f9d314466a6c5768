package kinematics

import (
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// splitMetric is the signature whose spinors are real: a momentum
// (p0, p1, p2, p3) is the bispinor [[p0+p3, p1-p2], [p1+p2, p0-p3]], p^2 its
// determinant.
const splitMetric = "+-+-"

// Convert returns the point as another kind:
//
//	twistors   -> spinors by lambda-tilde_i = (<i,i+1> mu_{i-1} + <i+1,i-1> mu_i
//	              + <i-1,i> mu_{i+1}) / (<i-1,i><i,i+1>)
//	spinors    -> twistors by mu_i = sum over j < i of <j i> lambda-tilde_j
//	spinors    -> momenta in the metric "+-+-"
//	momenta    -> spinors, in the metric "+-+-" and massless
//	momenta    -> products, with polarisations; invariants
//	products   -> invariants;  invariants -> products
//
// and any chain of these. Only products keep polarisations. The point must be
// valid. The error is of type InputErrors: no such conversion (the hint names
// those there are), or one that divides by the parameter of a family.
func (p *Point) Convert(kind Kind) (*Point, error) {
	if err := p.Validate(); err != nil {
		return nil, err
	}
	return p.convert(kind)
}

// convert skips the validation.
func (p *Point) convert(kind Kind) (*Point, error) {
	q := p
	for q.Kind != kind {
		if !slices.Contains(p.reachable(), kind) {
			return nil, p.noConversion(kind)
		}
		switch {
		case q.Kind == KindTwistors:
			q = q.spinorsOfTwistors()
		case q.Kind == KindSpinors && kind == KindTwistors:
			if b := vanishingBracket(q.Angle); b != "" {
				return nil, inputError(CodeBracket, p.Label, "relabel the legs, or draw another point", "%s = 0: the point has no momentum twistors", b)
			}
			q = q.twistorsOfSpinors()
		case q.Kind == KindSpinors:
			q = q.momentaOfSpinors()
		case q.Kind == KindMomenta && (kind == KindSpinors || kind == KindTwistors):
			q = q.spinorsOfMomenta()
		case q.Kind == KindMomenta:
			q = q.productsOfMomenta()
		case q.Kind == KindInvariants:
			q = q.productsOfInvariants()
		case q.Kind == KindProducts:
			q = q.invariantsOfProducts()
		}
		q.Label = p.Label
	}
	return q, nil
}

// reachable lists the other kinds that the point converts to.
func (p *Point) reachable() []Kind {
	rational := !p.IsFamily() // a division by a polynomial leaves the families
	switch p.Kind {
	case KindTwistors:
		if rational {
			return []Kind{KindSpinors, KindMomenta, KindInvariants, KindProducts}
		}
	case KindSpinors:
		return []Kind{KindTwistors, KindMomenta, KindInvariants, KindProducts}
	case KindMomenta:
		if rational && p.Metric == splitMetric && p.massless() {
			return []Kind{KindTwistors, KindSpinors, KindInvariants, KindProducts}
		}
		return []Kind{KindInvariants, KindProducts}
	case KindInvariants:
		return []Kind{KindProducts}
	case KindProducts:
		return []Kind{KindInvariants}
	}
	return nil
}

// noConversion says why the point does not convert to a kind, and to which it
// does.
func (p *Point) noConversion(kind Kind) error {
	why := fmt.Sprintf("%s cannot be converted to %s", p.Kind, kind)
	toSpinors := p.Kind == KindMomenta && (kind == KindSpinors || kind == KindTwistors)
	switch {
	case !slices.Contains(Kinds, kind):
		why = fmt.Sprintf("unknown kind %q", kind)
	case toSpinors && p.Metric != splitMetric:
		why += fmt.Sprintf(": spinors are rational in the metric %q only, not in %q", splitMetric, p.Metric)
	case toSpinors && !p.massless():
		why += ": massive legs have no spinors"
	case p.IsFamily() && (toSpinors || p.Kind == KindTwistors):
		why += " as a family: the components would not be polynomials"
	}
	var names []string
	for _, k := range p.reachable() {
		names = append(names, string(k))
	}
	hint := "this point converts to no other kind"
	if len(names) > 0 {
		hint = "possible: " + strings.Join(names, ", ")
	}
	return inputError(CodeConversion, p.Label, hint, "%s", why)
}

// twistorsOfSpinors sets mu_i = sum over j < i of <j i> lambda-tilde_j.
func (p *Point) twistorsOfSpinors() *Point {
	q := &Point{Kind: KindTwistors, Twistors: make(Matrix, p.Legs())}
	for i, l := range p.Angle {
		var mu [2]Component
		for j := range i {
			b := determinant(p.Angle[j], l)
			for k := range mu {
				mu[k] = mu[k].plus(b.times(p.Square[j][k]))
			}
		}
		q.Twistors[i] = []Component{l[0], l[1], mu[0], mu[1]}
	}
	return q
}

// spinorsOfTwistors needs constants.
func (p *Point) spinorsOfTwistors() *Point {
	n := p.Legs()
	q := &Point{Kind: KindSpinors, Angle: make(Matrix, n), Square: make(Matrix, n)}
	for i, z := range p.Twistors {
		before, after := p.Twistors[(i+n-1)%n], p.Twistors[(i+1)%n]
		next, round, last := determinant(z, after), determinant(after, before), determinant(before, z)
		inverse := new(big.Rat).Inv(next.times(last)[0])
		q.Angle[i] = []Component{z[0], z[1]}
		q.Square[i] = make([]Component, 2)
		for k := range 2 {
			sum := next.times(before[2+k]).plus(round.times(z[2+k])).plus(last.times(after[2+k]))
			q.Square[i][k] = sum.scaled(inverse)
		}
	}
	return q
}

// momentaOfSpinors reads the components off the bispinor lambda lambda-tilde.
func (p *Point) momentaOfSpinors() *Point {
	q := &Point{Kind: KindMomenta, Metric: splitMetric, Momenta: make(Matrix, p.Legs())}
	half := big.NewRat(1, 2)
	for a, l := range p.Angle {
		t := p.Square[a]
		p11, p12, p21, p22 := l[0].times(t[0]), l[0].times(t[1]), l[1].times(t[0]), l[1].times(t[1])
		q.Momenta[a] = []Component{
			p11.plus(p22).scaled(half), p12.plus(p21).scaled(half),
			p21.minus(p12).scaled(half), p11.minus(p22).scaled(half),
		}
	}
	return q
}

// spinorsOfMomenta needs massless constants in the split metric:
// lambda = (p0+p3, p1+p2), lambda-tilde = (1, (p1-p2)/(p0+p3)); where p0+p3 = 0,
// lambda = (0,1) and lambda-tilde is the second row of the bispinor if the first
// vanishes, else lambda is its second column and lambda-tilde = (0,1).
func (p *Point) spinorsOfMomenta() *Point {
	n := p.Legs()
	q := &Point{Kind: KindSpinors, Angle: make(Matrix, n), Square: make(Matrix, n)}
	for a, k := range p.Momenta {
		p11, p12, p21, p22 := k[0].plus(k[3]), k[1].minus(k[2]), k[1].plus(k[2]), k[0].minus(k[3])
		switch {
		case !p11.IsZero():
			q.Angle[a] = []Component{p11, p21}
			q.Square[a] = []Component{Int(1), p12.scaled(new(big.Rat).Inv(p11[0]))}
		case p12.IsZero():
			q.Angle[a] = []Component{Int(0), Int(1)}
			q.Square[a] = []Component{p21, p22}
		default:
			q.Angle[a] = []Component{p12, p22}
			q.Square[a] = []Component{Int(0), Int(1)}
		}
	}
	return q
}

// productsOfMomenta takes all dot products.
func (p *Point) productsOfMomenta() *Point {
	q := &Point{Kind: KindProducts}
	dots := func(x, y Matrix) Matrix {
		if x == nil || y == nil {
			return nil
		}
		z := make(Matrix, len(x))
		for a, v := range x {
			if v == nil {
				continue
			}
			z[a] = make([]Component, len(y))
			for b, w := range y {
				if w != nil {
					z[a][b] = p.Dot(v, w)
				}
			}
		}
		return z
	}
	k, e, f := p.Momenta, p.Polarisations, p.Polarisations2
	q.Products = Products{KK: dots(k, k), EK: dots(e, k), EE: dots(e, e), FK: dots(f, k), FE: dots(f, e), FF: dots(f, f)}
	return q
}

// productsOfInvariants sets k_a.k_b = (s_ab - m_a^2 - m_b^2)/2.
func (p *Point) productsOfInvariants() *Point {
	q := &Point{Kind: KindProducts}
	q.Products.KK = make(Matrix, p.Legs())
	half := big.NewRat(1, 2)
	for a, row := range p.S {
		q.Products.KK[a] = make([]Component, len(row))
		for b, s := range row {
			if a == b {
				q.Products.KK[a][b] = NewComponent(p.massSquared(a))
				continue
			}
			m := new(big.Rat).Add(p.massSquared(a), p.massSquared(b))
			q.Products.KK[a][b] = s.minus(NewComponent(m)).scaled(half)
		}
	}
	return q
}

// invariantsOfProducts sets s_ab = k_a.k_a + k_b.k_b + 2 k_a.k_b.
func (p *Point) invariantsOfProducts() *Point {
	kk := p.Products.KK
	n := len(kk)
	q := &Point{Kind: KindInvariants, S: make(Matrix, n)}
	two := big.NewRat(2, 1)
	massive := false
	q.MassesSquared = make([]*big.Rat, n)
	for a, row := range kk {
		q.MassesSquared[a] = row[a].Coefficient(0)
		massive = massive || !row[a].IsZero()
		q.S[a] = make([]Component, n)
		for b, x := range row {
			if a != b {
				q.S[a][b] = x.scaled(two).plus(row[a]).plus(kk[b][b])
			}
		}
	}
	if !massive {
		q.MassesSquared = nil
	}
	return q
}
