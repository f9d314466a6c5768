package lift_test

import (
	"context"
	"fmt"
	"math/big"

	"eliminant/rational/lift"
	"eliminant/rational/prime"
)

// The kernel knows -22/7 modulo every prime; the bounds say that numerator and
// denominator have at most three digits.
func ExampleRationals() {
	kernel := func(_ context.Context, f *prime.Field, out []prime.Element) error {
		v, ok := f.Div(f.FromInt64(-22), f.FromInt64(7))
		if !ok {
			return prime.ErrBadPrime
		}
		out[0] = v
		return nil
	}
	x, record, _ := lift.Rationals(context.Background(), 1, big.NewInt(999), big.NewInt(999), kernel, lift.Options{})
	fmt.Println(x[0].RatString(), record.Proof, len(record.Primes))
	// Output: -22/7 bound 1
}
