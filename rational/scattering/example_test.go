package scattering_test

import (
	"fmt"
	"math/big"

	"eliminant/rational/scattering"
)

// The equations of five legs, and a point at which solutions coincide.
func Example() {
	entries := func(x ...int64) [][]*big.Rat {
		s := make([][]*big.Rat, 5)
		for a := range s {
			for b := range s {
				s[a] = append(s[a], big.NewRat(x[5*a+b], 1))
			}
		}
		return s
	}
	d, err := scattering.New(entries(
		0, 2, -4, -5, 7,
		2, 0, 5, 1, -8,
		-4, 5, 0, 7, -8,
		-5, 1, 7, 0, -3,
		7, -8, -8, -3, 12))
	fmt.Println(err)
	d, err = scattering.New(entries(
		0, 2, -4, -5, 7,
		2, 0, 5, -5, -2,
		-4, 5, 0, 7, -8,
		-5, -5, 7, 0, 3,
		7, -2, -8, 3, 0))
	fmt.Println(err)
	for _, h := range d.Constraints(scattering.Gauge{}) {
		fmt.Println(h)
	}
	fmt.Println(d.Vanishing())
	// Output:
	// invariants, entry (5,5): the diagonal is 12, not 0
	// <nil>
	// -4*z3-5*z4+2
	// -2*z3*z4+3*z3-8*z4
	// []
}
