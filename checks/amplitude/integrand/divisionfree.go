package integrand

import "eliminant/rational/prime"

// Algebra is a commutative ring whose elements are rows over GF(p) of one
// length: truncated power series (Ring), or polynomials modulo a polynomial.
// Results may be operands; operands are not changed otherwise.
type Algebra interface {
	// Width is the length of a row.
	Width() int
	// SetOne sets z = 1.
	SetOne(z []prime.Element)
	Add(z, x, y []prime.Element)
	Sub(z, x, y []prime.Element)
	Mul(z, x, y []prime.Element)
}

// Width returns the length of a row, D.
func (r *Ring) Width() int { return r.depth }

// SetOne sets z = 1.
func (r *Ring) SetOne(z []prime.Element) { r.SetConstant(z, r.field.One()) }

// DivisionFreePfaffian sets z to the Pfaffian of the antisymmetric matrix of even
// size with entries entry(i, j), i < j, without any division, so in algebras with
// zero divisors too.
//
// With J the standard symplectic matrix, Pf(J + tau (M - J)) is a polynomial in
// tau of degree at most size/2; as a power series in tau to that order every
// pivot of its elimination is 1 + O(tau), a unit, and tau = 1 gives Pf M. Cost:
// about size^3/6 (size/2)^2 products in the algebra.
func DivisionFreePfaffian(a Algebra, z []prime.Element, size int, entry func(i, j int) []prime.Element) {
	if size%2 != 0 {
		panic("integrand.DivisionFreePfaffian: odd size")
	}
	s := &homotopy{Algebra: a, width: a.Width(), order: size/2 + 1}
	s.one, s.product = make([]prime.Element, s.width), make([]prime.Element, s.width)
	a.SetOne(s.one)
	m := make([][]prime.Element, size*size)
	for i := range size {
		for j := i + 1; j < size; j++ {
			x := s.row()
			if i%2 == 0 && j == i+1 {
				copy(s.term(x, 0), s.one)
				a.Sub(s.term(x, 1), entry(i, j), s.one)
			} else {
				copy(s.term(x, 1), entry(i, j))
			}
			m[i*size+j] = x
		}
	}
	result, inverse, t := s.row(), s.row(), s.row()
	copy(s.term(result, 0), s.one)
	scaled := make([][]prime.Element, size)
	for k := 0; k < size; k += 2 {
		pivot := m[k*size+k+1]
		s.multiply(t, result, pivot)
		result, t = t, result
		s.invert(inverse, pivot)
		for j := k + 2; j < size; j++ {
			scaled[j] = s.row()
			s.multiply(scaled[j], m[k*size+j], inverse)
		}
		b := m[(k+1)*size:]
		for i := k + 2; i < size; i++ {
			for j := i + 1; j < size; j++ {
				x := m[i*size+j]
				s.multiply(t, b[i], scaled[j])
				s.add(x, t)
				s.multiply(t, scaled[i], b[j])
				s.subtract(x, t)
			}
		}
	}
	clear(z[:s.width])
	for k := range s.order {
		a.Add(z, z, s.term(result, k))
	}
}

// homotopy is power series in tau over an algebra, truncated at tau^order; an
// element is its coefficients one after another.
type homotopy struct {
	Algebra
	width, order int
	one, product []prime.Element
}

func (s *homotopy) row() []prime.Element { return make([]prime.Element, s.order*s.width) }

func (s *homotopy) term(x []prime.Element, k int) []prime.Element {
	return x[k*s.width : (k+1)*s.width]
}

func (s *homotopy) add(z, x []prime.Element) {
	for k := range s.order {
		s.Add(s.term(z, k), s.term(z, k), s.term(x, k))
	}
}

func (s *homotopy) subtract(z, x []prime.Element) {
	for k := range s.order {
		s.Sub(s.term(z, k), s.term(z, k), s.term(x, k))
	}
}

// multiply sets z = x y; z must not overlap x or y.
func (s *homotopy) multiply(z, x, y []prime.Element) {
	clear(z)
	for i := range s.order {
		for j := range s.order - i {
			s.Mul(s.product, s.term(x, i), s.term(y, j))
			s.Add(s.term(z, i+j), s.term(z, i+j), s.product)
		}
	}
}

// invert sets z = 1/x for x = 1 + O(tau).
func (s *homotopy) invert(z, x []prime.Element) {
	clear(z)
	copy(s.term(z, 0), s.one)
	for k := 1; k < s.order; k++ {
		for i := 1; i <= k; i++ {
			s.Mul(s.product, s.term(x, i), s.term(z, k-i))
			s.Sub(s.term(z, k), s.term(z, k), s.product)
		}
	}
}
