//go:build slowcheck

package prime

import "fmt"

// slowcheck: operands are asserted to be canonical.
const slowcheck = true

func (f *Field) checkCanonical(rows ...[]Element) {
	for _, x := range rows {
		for i, v := range x {
			if uint64(v) >= f.p {
				panic(fmt.Sprintf("prime: entry %d is %d, not in [0, %d): an element of another field, or not reduced", i, uint64(v), f.p))
			}
		}
	}
}
