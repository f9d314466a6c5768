package series

import "eliminant/rational/prime"

// spinors is massless momenta k = lambda lambda-tilde in four dimensions that add
// up to zero, with s_ij = <ij>[ji].
type spinors struct {
	*prime.Field
	lambda, tilde [][]prime.Element
	left, right   []prime.Element // reference spinors r and rt
}

func newSpinors(f *prime.Field, n int, source *prime.Source) *spinors {
	draw := func() []prime.Element { return []prime.Element{element(f, source), element(f, source)} }
	x := &spinors{Field: f, left: draw(), right: draw()}
	for range n {
		x.lambda, x.tilde = append(x.lambda, draw()), append(x.tilde, draw())
	}
	for i, other := range []int{1, 0} { // <12> tilde_1 = sum of <2j> tilde_j, ..
		sum := make([]prime.Element, 2)
		for j := 2; j < n; j++ {
			f.AddScaledRow(sum, x.angle(x.lambda[other], x.lambda[j]), x.tilde[j])
		}
		c, _ := f.Inv(x.angle(x.lambda[i], x.lambda[other]))
		f.ScaleRow(x.tilde[i], c, sum)
	}
	return x
}

func (x *spinors) angle(u, v []prime.Element) prime.Element {
	return x.Sub(x.Mul(u[0], v[1]), x.Mul(u[1], v[0]))
}

func (x *spinors) square(u, v []prime.Element) prime.Element { return x.Neg(x.angle(u, v)) }

// particles returns bispinors (p_11, p_12, p_21, p_22) with p^2 = det p and the
// polarisations e_+ = r lambda-tilde/<r lambda>, e_- = lambda rt/[lambda-tilde rt];
// bits of negative are the legs of negative helicity.
func (x *spinors) particles(negative int) *particles {
	f := x.Field
	half, _ := f.Inv(f.FromInt64(2))
	p := &particles{field: f, metric: make([]prime.Element, 16)}
	p.metric[3], p.metric[12] = half, half
	p.metric[6], p.metric[9] = f.Neg(half), f.Neg(half)
	outer := func(u, v []prime.Element) []prime.Element {
		return []prime.Element{f.Mul(u[0], v[0]), f.Mul(u[0], v[1]), f.Mul(u[1], v[0]), f.Mul(u[1], v[1])}
	}
	for a, u := range x.lambda {
		v := x.tilde[a]
		p.k = append(p.k, outer(u, v))
		e, norm := outer(x.left, v), x.angle(x.left, u)
		if negative>>a&1 == 1 {
			e, norm = outer(u, x.right), x.square(v, x.right)
		}
		c, _ := f.Inv(norm)
		f.ScaleRow(e, c, e)
		p.e = append(p.e, e)
	}
	p.f = p.e
	return p
}
