package groebner

import (
	"context"

	"eliminant/rational/prime"
)

// CharacteristicPolynomial returns the coefficients of det(x - m), monic, from
// the constant one on: n+1 of them. Panics unless m is square. Method: reduction
// to Hessenberg form, then the recurrence of the leading minors (H. Cohen, A
// Course in Computational Algebraic Number Theory, 1993, algorithm 2.2.9). Cost:
// about n^3 products.
func (m *Matrix) CharacteristicPolynomial(ctx context.Context) ([]prime.Element, error) {
	m.wantSquare()
	h := m.Clone()
	if err := h.hessenberg(ctx); err != nil {
		return nil, err
	}
	return h.hessenbergPolynomial(ctx)
}

// hessenberg replaces m by a similar matrix with zeros below the subdiagonal.
func (m *Matrix) hessenberg(ctx context.Context) error {
	f, n := m.field, m.rows
	u := make([]prime.Element, n)
	for k := 1; k < n-1; k++ {
		if err := poll(ctx, "characteristic polynomial"); err != nil {
			return err
		}
		i := k
		for i < n && m.At(i, k-1) == 0 {
			i++
		}
		if i == n {
			continue
		}
		if i != k {
			m.swapRows(i, k)
			for r := range n {
				x := m.Row(r)
				x[i], x[k] = x[k], x[i]
			}
		}
		pivot := m.Row(k)[k-1:]
		inverse, _ := f.Inv(pivot[0])
		for i := k + 1; i < n; i++ {
			x := m.Row(i)[k-1:]
			u[i] = f.Mul(x[0], inverse)
			if u[i] != 0 {
				f.SubScaledRow(x, u[i], pivot)
			}
		}
		// the inverse operation on columns, all at once: column k += sum u_i column i
		for r := range n {
			x := m.Row(r)
			x[k] = f.Add(x[k], f.Dot(u[k+1:], x[k+1:]))
		}
	}
	return nil
}

// hessenbergPolynomial returns the characteristic polynomial of a Hessenberg
// matrix. With P_k that of the leading k x k block, P_0 = 1 and
//
//	P_k = (x - h_kk) P_{k-1} - sum over i < k of h_ik (prod_{i<j<=k} h_{j,j-1}) P_{i-1}.
func (m *Matrix) hessenbergPolynomial(ctx context.Context) ([]prime.Element, error) {
	f, n := m.field, m.rows
	minors := make([][]prime.Element, n+1)
	minors[0] = []prime.Element{f.One()}
	for k := 1; k <= n; k++ {
		if err := poll(ctx, "characteristic polynomial"); err != nil {
			return nil, err
		}
		p := make([]prime.Element, k+1)
		copy(p[1:], minors[k-1])
		f.SubScaledRow(p[:k], m.At(k-1, k-1), minors[k-1])
		product := f.One()
		for i := k - 1; i >= 1; i-- {
			product = f.Mul(product, m.At(i, i-1))
			if product == 0 {
				break
			}
			f.SubScaledRow(p[:i], f.Mul(m.At(i-1, k-1), product), minors[i-1])
		}
		minors[k] = p
	}
	return minors[n], nil
}
