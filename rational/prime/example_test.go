package prime_test

import (
	"fmt"
	"math/big"

	"eliminant/rational/prime"
)

// A rational number modulo a prime, and a product of polynomials by
// transforms.
func Example() {
	f, err := prime.NewField(10007)
	if err != nil {
		fmt.Println(err)
		return
	}
	third, ok := f.FromRat(big.NewRat(1, 3))
	fmt.Println(f, f.Uint64(third), ok)
	fmt.Println(f.Uint64(f.Mul(third, f.FromInt64(-3))))
	_, ok = f.FromRat(big.NewRat(1, 10007))
	fmt.Println(ok)

	// (1 + 2x)(3 + x) = 3 + 7x + 2x^2
	g := prime.TableField(0)
	t, err := prime.NewTransform(g, 4)
	if err != nil {
		fmt.Println(err)
		return
	}
	a := []prime.Element{g.FromInt64(1), g.FromInt64(2), 0, 0}
	b := []prime.Element{g.FromInt64(3), g.FromInt64(1), 0, 0}
	t.Forward(a)
	t.Forward(b)
	g.MulRow(a, a, b)
	t.Inverse(a)
	for _, c := range a {
		fmt.Print(g.Uint64(c), " ")
	}
	fmt.Println()
	// Output:
	// GF(10007) 3336 true
	// 10006
	// false
	// 3 7 2 0
}
