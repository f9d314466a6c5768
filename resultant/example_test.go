package resultant_test

import (
	"context"
	"fmt"
	"math/big"

	"eliminant/rational/poly"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"
	"eliminant/resultant"
)

// fiveLegs has the planar invariants s_12, s_123, s_23, s_234, s_34 = 2, 3, 5, 7, 11.
func fiveLegs() *scattering.Data {
	s := make([][]*big.Rat, 5)
	for a, row := range [5][5]int64{
		{0, 2, -4, -5, 7},
		{2, 0, 5, -9, 2},
		{-4, 5, 0, 11, -12},
		{-5, -9, 11, 0, 3},
		{7, 2, -12, 3, 0},
	} {
		for b := range row {
			s[a] = append(s[a], big.NewRat(row[b], 1))
		}
	}
	d, err := scattering.New(s)
	if err != nil {
		panic(err)
	}
	return d
}

// The two solutions of five legs have z_3 = 8 and 3/8.
func ExampleComputeEliminant() {
	e, err := resultant.ComputeEliminant(context.Background(), fiveLegs(), 3, resultant.Options{})
	if err != nil {
		panic(err)
	}
	fmt.Println(e.Monic, e.Record.Proof)
	// Output: [3/1 -67/8 1/1] bound
}

// Modulo a prime every solution is a root of Chi, here 8 and 3/8, and the
// residues of 1 and of z_4 add up to 0 and 1/c0.
func ExampleComputeRepresentation() {
	f := prime.TableField(0)
	s, err := fiveLegs().Reduce(f)
	if err != nil {
		panic(err)
	}
	p, err := resultant.NewPencil(f, 5, s, nil)
	if err != nil {
		panic(err)
	}
	r, err := resultant.ComputeRepresentation(context.Background(), p, resultant.Options{})
	if err != nil {
		panic(err)
	}
	z4, err := r.Z(4)
	if err != nil {
		panic(err)
	}
	one := poly.New(f, f.One())
	fmt.Println(f.Uint64(r.Chi.Eval(f.FromInt64(8))), f.Uint64(r.ResidueSum(one)))
	fmt.Println(f.Uint64(f.Mul(r.C0, r.ResidueSum(z4))))
	// z_4 = -6 where z_3 = 8
	fmt.Println(f.Uint64(f.Neg(z4.Eval(f.FromInt64(8)))))
	// Output:
	// 0 0
	// 1
	// 6
}
