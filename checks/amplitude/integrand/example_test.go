package integrand_test

import (
	"fmt"

	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"
)

// Four legs with s = 2, t = 3, u = -5: the one solution is z_3 = -s_12/s_13 = 2/5,
// and PT(1234)^2/det Phi = m(1234|1234) = -(1/s + 1/t).
func Example() {
	f := prime.TableField(0)
	var s []prime.Element
	for _, x := range []int64{0, 2, -5, 3, 2, 0, 3, -5, -5, 3, 0, 2, 3, -5, 2, 0} {
		s = append(s, f.FromInt64(x))
	}
	z3, _ := f.Div(f.FromInt64(2), f.FromInt64(5))

	r := integrand.NewRing(f, 1)
	v := integrand.NewSolution(r, 4, s, nil)
	v.Place([]prime.Element{0, f.One(), z3, 0})

	row := func() []prime.Element { return make([]prime.Element, r.Depth()) }
	residual, value, determinant, inverse := row(), row(), row(), row()
	v.Residual(residual, 3)
	order := integrand.ParkeTaylor{Ordering: []int{1, 2, 3, 4}}
	integrand.Power{Base: order, Exponent: 2}.Evaluator(r, 4).Evaluate(value, v)
	v.ReducedDeterminant(determinant)
	r.Invert(inverse, determinant)
	r.Mul(value, value, inverse)

	expected, _ := f.Div(f.FromInt64(-5), f.FromInt64(6))
	fmt.Println(residual[0] == 0, value[0] == expected)
	// Output: true true
}
