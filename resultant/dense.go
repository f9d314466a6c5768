package resultant

import (
	"context"

	"eliminant/rational/prime"
)

// MaxDense is the largest N for which matrices of N^2 elements are used.
const MaxDense = 720

// characteristicDense returns the coefficients, from the constant on, of the
// monic characteristic polynomial of M, without any assumption on t: reduction
// to Hessenberg form and the recurrence of its leading minors (H. Cohen, A Course
// in Computational Algebraic Number Theory, 1993, algorithm 2.2.9). Cost: about
// 2 N^3 products.
func characteristicDense(ctx context.Context, p *Pencil) ([]prime.Element, error) {
	n := p.plan.size
	a := make([][]prime.Element, n)
	for i := range a {
		a[i] = make([]prime.Element, n)
	}
	x := make([]prime.Element, n)
	for j := range n {
		clear(x)
		x[j] = p.field.One()
		p.Multiply(x, x)
		for i, v := range x {
			a[i][j] = v
		}
	}
	return hessenberg(ctx, p.field, a)
}

// hessenberg returns the characteristic polynomial of a, which it destroys.
func hessenberg(ctx context.Context, f *prime.Field, a [][]prime.Element) ([]prime.Element, error) {
	n := len(a)
	for m := 1; m < n-1; m++ {
		if ctx.Err() != nil {
			return nil, context.Cause(ctx)
		}
		i := m
		for i < n && a[i][m-1] == 0 {
			i++
		}
		if i == n {
			continue
		}
		if i != m {
			a[i], a[m] = a[m], a[i]
			for r := range a {
				a[r][i], a[r][m] = a[r][m], a[r][i]
			}
		}
		inv, _ := f.Inv(a[m][m-1])
		// rows: row i -= u_i row m; columns: column m += u_i column i
		u := make([]prime.Element, n)
		for i := m + 1; i < n; i++ {
			if a[i][m-1] != 0 {
				u[i] = f.Mul(a[i][m-1], inv)
				f.SubScaledRow(a[i][m-1:], u[i], a[m][m-1:])
			}
		}
		for r := range a {
			a[r][m] = f.Add(a[r][m], f.Dot(u[m+1:], a[r][m+1:]))
		}
	}
	// minors[m] = det(T - H_m) = (T - h_mm) minors[m-1] - sum_i h_im (prod of the
	// subdiagonal from i to m) minors[i-1]
	minors := make([][]prime.Element, n+1)
	minors[0] = []prime.Element{f.One()}
	for m := 1; m <= n; m++ {
		z := make([]prime.Element, m+1)
		copy(z[1:], minors[m-1])
		f.SubScaledRow(z[:m], a[m-1][m-1], minors[m-1])
		t := f.One()
		for i := m - 1; i >= 1; i-- {
			t = f.Mul(t, a[i][i-1])
			if t == 0 {
				break
			}
			f.SubScaledRow(z[:i], f.Mul(t, a[i-1][m-1]), minors[i-1])
		}
		minors[m] = z
	}
	return minors[n], nil
}
