package kinematics

import "math/big"

// Brackets are the spinor products of a point. With lambda and lambda-tilde of
// the legs,
//
//	<i j> = lambda_i^1 lambda_j^2 - lambda_i^2 lambda_j^1
//	[i j] = -(lambda-tilde_i^1 lambda-tilde_j^2 - lambda-tilde_i^2 lambda-tilde_j^1)
//	s_ij  = <i j>[j i].
//
// Legs count from 1; methods panic for legs that do not exist. Immutable.
type Brackets struct{ angle, square [][]*big.Rat }

// Brackets returns the spinor products of a point that has rational spinors:
// twistors, spinors, or massless momenta in the metric "+-+-", whose spinors are
// those of Convert. The error is of type InputErrors.
func (p *Point) Brackets() (*Brackets, error) {
	if p.IsFamily() {
		return nil, inputError(CodeFamily, p.Label, "take the point at one value of the parameter", "a family has no values of its own")
	}
	q, err := p.Convert(KindSpinors)
	if err != nil {
		return nil, err
	}
	return &Brackets{q.Angle.rationals(), q.Square.rationals()}, nil
}

// Legs returns n.
func (b *Brackets) Legs() int { return len(b.angle) }

// Angle returns <i j>.
func (b *Brackets) Angle(i, j int) *big.Rat { return determinantOf(b.angle[i-1], b.angle[j-1]) }

// Square returns [i j].
func (b *Brackets) Square(i, j int) *big.Rat { return determinantOf(b.square[j-1], b.square[i-1]) }

// Lambda returns copies of the components of lambda_i.
func (b *Brackets) Lambda(i int) [2]*big.Rat { return pair(b.angle[i-1]) }

// LambdaTilde returns copies of the components of lambda-tilde_i.
func (b *Brackets) LambdaTilde(i int) [2]*big.Rat { return pair(b.square[i-1]) }

func pair(x []*big.Rat) [2]*big.Rat {
	return [2]*big.Rat{new(big.Rat).Set(x[0]), new(big.Rat).Set(x[1])}
}

// determinantOf returns x^1 y^2 - x^2 y^1.
func determinantOf(x, y []*big.Rat) *big.Rat {
	z := new(big.Rat).Mul(x[0], y[1])
	return z.Sub(z, new(big.Rat).Mul(x[1], y[0]))
}
