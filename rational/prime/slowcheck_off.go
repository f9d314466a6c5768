//go:build !slowcheck

package prime

// slowcheck is off: the build tag slowcheck asserts that operands are
// canonical.
const slowcheck = false

func (f *Field) checkCanonical(...[]Element) {}
