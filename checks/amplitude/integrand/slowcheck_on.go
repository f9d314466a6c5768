//go:build slowcheck

package integrand

import (
	"fmt"

	"eliminant/rational/prime"
)

// slowcheck: operands of the row kernels are asserted to be canonical, and
// unreduced sums to be in range.
const slowcheck = true

func (r *Ring) checkCanonical(rows ...[]prime.Element) {
	for _, x := range rows {
		for i, v := range x {
			if uint64(v) >= r.field.Modulus() {
				panic(fmt.Sprintf("integrand: entry %d is %d, not in [0, %d)", i, uint64(v), r.field.Modulus()))
			}
		}
	}
}

func (r *Ring) checkRange(hi uint64, multiple uint64) {
	if hi >= multiple*r.field.Modulus() {
		panic(fmt.Sprintf("integrand: high word %d is not below %d p", hi, multiple))
	}
}
