package groebner_test

import (
	"context"
	"fmt"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

// The circle x^2 + y^2 = 5 meets the hyperbola x y = 2 in (1,2), (2,1), (-1,-2),
// (-2,-1). The sum of x/y over the four points is 1/2 + 2 + 1/2 + 2 = 5.
func Example() {
	f, _ := prime.NewField(32003)
	ring, _ := groebner.NewRing(f, groebner.GrevLex, "x", "y")
	x, y := ring.Variable(0), ring.Variable(1)
	constant := func(v int64) *groebner.Polynomial { return ring.Constant(f.FromInt64(v)) }

	circle := new(groebner.Polynomial).Mul(x, x)
	circle.Add(circle, new(groebner.Polynomial).Mul(y, y))
	circle.Sub(circle, constant(5))
	hyperbola := new(groebner.Polynomial).Mul(x, y)
	hyperbola.Sub(hyperbola, constant(2))

	ctx := context.Background()
	generators := []*groebner.Polynomial{circle, hyperbola}
	basis, err := groebner.ComputeBasis(ctx, generators, groebner.Options{Cofactors: true})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, p := range basis.Elements {
		fmt.Println(p)
	}
	fmt.Println("check:", groebner.CheckBasis(ctx, generators, basis))

	quotient, err := groebner.ComputeQuotient(ctx, basis, groebner.QuotientOptions{})
	if err != nil {
		fmt.Println(err)
		return
	}
	sum, err := quotient.TraceQuotient(ctx, x, y)
	fmt.Println("points:", quotient.Dimension(), "sum of x/y:", f.Uint64(sum), err)
	_, err = quotient.TraceQuotient(ctx, y, new(groebner.Polynomial).Sub(x, constant(2)))
	fmt.Println(err)
	// Output:
	// x*y-2
	// x^2+y^2-5
	// y^3+2*x-5*y
	// check: <nil>
	// points: 4 sum of x/y: 5 <nil>
	// groebner: divisor is a zero divisor of the quotient algebra (rank 3 of 4)
}

// Lexicographic order eliminates: the implicit equations of the twisted cubic.
func ExampleComputeBasis() {
	f, _ := prime.NewField(32003)
	ring, _ := groebner.NewRing(f, groebner.Lex, "t", "x", "y", "z")
	t := ring.Variable(0)
	var generators []*groebner.Polynomial
	for i := 1; i <= 3; i++ {
		p := new(groebner.Polynomial).Pow(t, i)
		generators = append(generators, p.Sub(ring.Variable(i), p))
	}
	basis, err := groebner.ComputeBasis(context.Background(), generators, groebner.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, p := range basis.Elements {
		fmt.Println(p)
	}
	// Output:
	// y^3-z^2
	// x*z-y^2
	// x*y-z
	// x^2-y
	// t-x
}
